"""The rules in force as text: one line each, or one rule as its own manual page."""

from collections.abc import Iterator, Mapping

from rulecheck.rulebook.rulebook import Rule, Rulebook
from rulecheck.rulebook.scope import Parameter
from rulecheck.values import write_quantity


def rules_text(rulebook: Rulebook) -> str:
    """Every rule with its level, subject and pack; then what is off, changed and set."""
    width = max((len(rule.id) for rule in rulebook.rules), default=0)
    lines = [
        f"{rule.id:<{width}}  {rule.level:<7}  {rule.subject:<10}  {rule.pack}"
        for rule in rulebook.rules
    ]
    lines += [f"off: {off.rule}, by {off.pack}: {off.reason}" for off in rulebook.switched_off]
    lines += list(rulebook.changes)
    lines += [parameter_line(parameter) for parameter in rulebook.parameters.values()]
    return "\n".join(lines) + "\n"


def rule_text(rule: Rule, rulebook: Rulebook) -> str:
    """One rule: what it asks, why, what to do, its source, its parameters and examples."""
    return "\n".join(_page(rule, rulebook.parameters)) + "\n"


def _page(rule: Rule, parameters: Mapping[str, Parameter]) -> Iterator[str]:
    yield f"{rule.id}  ({rule.level}, on every {rule.subject}, pack {rule.pack})"
    for key in ("applies", "requires"):
        if key in rule.texts:
            yield f"  {key}: {_one_line(rule.texts[key])}"
    if "graver" in rule.texts:
        yield f"  {rule.graver_level} where: {_one_line(rule.texts['graver'])}"
    yield f"  why: {_one_line(rule.why)}"
    yield f"  remedy: {_one_line(rule.remedy)}"
    yield f"  source: {_one_line(rule.source)}"
    for parameter in (*rule.parameters.values(), *_used(rule, parameters)):
        yield f"  {parameter_line(parameter)}"
    for example in rule.examples:
        subject = f" of {example.of}" if example.of else ""
        yield f"  example{subject}, {example.expect}: {_one_line(example.shows)}"
        yield from (f"    {line}" for line in example.netlist.rstrip().splitlines())


def _used(rule: Rule, parameters: Mapping[str, Parameter]) -> tuple[Parameter, ...]:
    written = " ".join(rule.texts.values())
    return tuple(p for name, p in parameters.items() if name in written)


def parameter_line(parameter: Parameter) -> str:
    """`parameter derate.blocking = 0.8: share of the rating that may be used (source)`."""
    unit = parameter.dimension.value
    by_source: dict[str, list[str]] = {}
    for word, row in parameter.rows.items():
        figure = write_quantity(row.value, unit)
        shown = figure if parameter.plain else f"{word} {figure}"
        by_source.setdefault(row.source, []).append(shown)
    values = "; ".join(f"{', '.join(v)} ({_one_line(s)})" for s, v in by_source.items())
    meaning = f", {parameter.meaning}" if parameter.meaning else ""
    return f"parameter {parameter.name}{meaning}: {values}"


def _one_line(text: str) -> str:
    return " ".join(text.split())

"""The rules in force as text: one line each, then what packs changed and set."""

from rulecheck.rulebook.rulebook import Rulebook
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


def parameter_line(parameter: Parameter) -> str:
    """`parameter derate.blocking, share of the rating that may be used: 0.8 (source)`."""
    between = ", " if parameter.meaning else ": "
    return f"parameter {parameter.name}{between}{parameter_text(parameter)}"


def parameter_text(parameter: Parameter) -> str:
    """`share of the rating that may be used: 0.8 (source)`."""
    unit = parameter.dimension.value
    by_source: dict[str, list[str]] = {}
    for word, row in parameter.rows.items():
        figure = write_quantity(row.value, unit)
        shown = figure if parameter.plain else f"{word} {figure}"
        by_source.setdefault(row.source, []).append(shown)
    values = "; ".join(f"{', '.join(v)} ({_one_line(s)})" for s, v in by_source.items())
    return f"{parameter.meaning}: {values}" if parameter.meaning else values


def _one_line(text: str) -> str:
    return " ".join(text.split())

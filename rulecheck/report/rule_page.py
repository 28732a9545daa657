"""A rule as its own manual page: what it asks, why, what to do, its source and its examples."""

from collections.abc import Iterator, Mapping

from rulecheck.report.manual_page import Block, ManualPage
from rulecheck.rulebook import Rule, Rulebook
from rulecheck.rulebook.rulebook import Example
from rulecheck.rulebook.rules_text import parameter_text
from rulecheck.rulebook.scope import Parameter


def rule_page(rule: Rule, rulebook: Rulebook) -> ManualPage:
    """The page of one rule; a parameter that it uses is shown with its value in force."""
    about = f"{rule.level}, on every {rule.subject}, pack {rule.pack}"
    rows = tuple(_rows(rule, rulebook.parameters))
    return ManualPage(rule.id, about, rows, tuple(_block(example) for example in rule.examples))


def parameter_page(parameter: Parameter, users: tuple[str, ...]) -> ManualPage:
    """The page of a parameter, with the rules that use it."""
    rows = (("", parameter_text(parameter)), ("used by", ", ".join(users) or "no rule"))
    return ManualPage(parameter.name, "parameter of rules; a pack sets it under `set:`", rows)


def _rows(rule: Rule, parameters: Mapping[str, Parameter]) -> Iterator[tuple[str, str]]:
    yield from ((key, rule.texts[key]) for key in ("applies", "requires") if key in rule.texts)
    if "graver" in rule.texts:
        yield f"{rule.graver_level} if", rule.texts["graver"]
    yield "why", rule.why
    yield "remedy", rule.remedy
    yield "source", rule.source
    written = " ".join(rule.texts.values())
    used = (parameter for name, parameter in parameters.items() if name in written)
    for parameter in (*rule.parameters.values(), *used):
        yield "figure", f"{parameter.name}, {parameter_text(parameter)}"


def _block(example: Example) -> Block:
    subject = f" of {example.of}" if example.of else ""
    heading = f"example{subject}, {example.expect}: {example.shows}"
    return Block(heading, tuple(example.netlist.rstrip().splitlines()))

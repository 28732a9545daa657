"""A word of the rules' vocabulary as a manual page: a subject, a field of it, or a link."""

import re
from collections.abc import Mapping

from rulecheck.facts import FieldTerm, LinkTerm, SubjectTerm
from rulecheck.report.manual_page import ManualPage
from rulecheck.rulebook import Rule


def subject_page(term: SubjectTerm, rules: tuple[Rule, ...]) -> ManualPage:
    """What the subject is, its fields and links, and the rules that judge it."""
    own = [rule.id for rule in rules if rule.subject == term.name]
    rows = (
        ("", term.sentence),
        ("fields", ", ".join(field.name for field in term.fields)),
        *((("links", ", ".join(link.name for link in term.links)),) if term.links else ()),
        ("rules", ", ".join(own) or "none in force"),
    )
    return ManualPage(term.name, "subject that rules judge", rows)


def field_page(field: FieldTerm, of: SubjectTerm, rules: tuple[Rule, ...]) -> ManualPage:
    about = f"fact of a {of.name}, {_unit(field)}"
    rows = (("", field.sentence), ("asked by", _asking(field.name, rules)))
    return ManualPage(field.name, about, rows)


def link_page(link: LinkTerm, of: SubjectTerm, rules: tuple[Rule, ...]) -> ManualPage:
    about = f"link of a {of.name} to each {link.to}"
    rows = (("", link.sentence), ("asked by", _asking(link.name, rules)))
    return ManualPage(link.name, about, rows)


def _unit(field: FieldTerm) -> str:
    return {"1": "a number", "1, range": "a range of numbers"}.get(field.unit, field.unit)


def _asking(name: str, rules: tuple[Rule, ...]) -> str:
    found = [rule.id for rule in rules if name in _words_of(rule.texts)]
    return ", ".join(found) or "no rule in force"


def _words_of(texts: Mapping[str, str]) -> set[str]:
    return set(re.findall(r"[\w-]+", " ".join(texts.values())))

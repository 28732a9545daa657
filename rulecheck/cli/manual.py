"""Every word that has a manual page: rules, facts, parameters and the keys of the files."""

from collections.abc import Iterator, Sequence

from rulecheck.cli.file_shapes import FILE_SHAPES
from rulecheck.facts import VOCABULARY
from rulecheck.reading.keys import EACH, NO_WORD, Key, keys_of
from rulecheck.report.fact_page import field_page, link_page, subject_page
from rulecheck.report.key_page import key_page
from rulecheck.report.manual_page import ManualPage
from rulecheck.report.rule_page import parameter_page, rule_page
from rulecheck.rulebook import Rulebook

Entry = tuple[str, tuple[str, ...], ManualPage]
"""The group of a page, the words that it is found by, and the page."""


def manual(rulebook: Rulebook) -> tuple[Entry, ...]:
    """All pages, in the order in which they are shown where a word has several."""
    return (*_rules(rulebook), *_keys(), *_facts(rulebook))


def _rules(rulebook: Rulebook) -> Iterator[Entry]:
    for rule in rulebook.rules:
        yield "rules", (rule.id,), rule_page(rule, rulebook)
    for name, parameter in rulebook.parameters.items():
        users = tuple(r.id for r in rulebook.rules if name in " ".join(r.texts.values()))
        yield "parameters", (name,), parameter_page(parameter, users)


def _facts(rulebook: Rulebook) -> Iterator[Entry]:
    rules = rulebook.rules
    for term in VOCABULARY.values():
        yield "subjects", (term.name,), subject_page(term, rules)
        for field in term.fields:
            found_by = (field.name, f"{term.name}.{field.name}")
            yield "facts", found_by, field_page(field, term, rules)
        for link in term.links:
            found_by = (link.name, f"{term.name}.{link.name}")
            yield "facts", found_by, link_page(link, term, rules)


def _keys() -> Iterator[Entry]:
    for file in FILE_SHAPES.values():
        keys = {key.place: key for key in keys_of(file.shape)}
        alike: dict[tuple[str, str], list[Key]] = {}
        for key in keys.values():
            alike.setdefault((key.name, file.words.get(key.place, NO_WORD).sentence), []).append(
                key
            )
        for same in alike.values():
            page = key_page(same, keys, file.words, file.called)
            yield f"keys of {file.called}", tuple(_names(same)), page


def _names(keys: Sequence[Key]) -> Iterator[str]:
    """A key's own name, and where it stands: `between`, `ports.*.between`, `ports.between`."""
    yield keys[0].name
    for key in keys:
        yield key.place
        yield ".".join(step for step in key.path if step != EACH)

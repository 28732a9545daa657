"""The vocabulary: every kind of subject that a rule may judge, in one literal table."""

from collections.abc import Mapping

from rulecheck.facts.bank_facts import BANK
from rulecheck.facts.clamp_facts import CLAMP
from rulecheck.facts.commanded_facts import COMMANDED_STATE
from rulecheck.facts.core_facts import CORE
from rulecheck.facts.filter_facts import FILTER
from rulecheck.facts.free_path_facts import FREE_PATH
from rulecheck.facts.gate_drive_terms import GATE_DRIVE
from rulecheck.facts.gate_supply_facts import GATE_SUPPLY
from rulecheck.facts.isolation_facts import CROSSING, GROUND_PAIR
from rulecheck.facts.leg_facts import BRIDGE, LEG
from rulecheck.facts.line_facts import LINE_ELEMENT
from rulecheck.facts.net_facts import NET, STAGE
from rulecheck.facts.part_facts import PART
from rulecheck.facts.passive_facts import CAPACITOR, INDUCTOR, RESISTOR
from rulecheck.facts.port_facts import PORT
from rulecheck.facts.position_terms import POSITION
from rulecheck.facts.shunt_facts import SHUNT
from rulecheck.facts.snubber_facts import SNUBBER
from rulecheck.facts.state_facts import GROUP, SWITCH_STATE
from rulecheck.facts.terms import SubjectTerm
from rulecheck.facts.transformer_facts import LINE_MAGNETIC
from rulecheck.facts.winding_clamp_facts import WINDING_CLAMP
from rulecheck.parts import Kind
from rulecheck.stage import Role

VOCABULARY: Mapping[str, SubjectTerm] = {
    term.name: term
    for term in (
        STAGE,
        NET,
        PART,
        POSITION,
        LEG,
        BRIDGE,
        GROUP,
        SWITCH_STATE,
        COMMANDED_STATE,
        GATE_DRIVE,
        GATE_SUPPLY,
        INDUCTOR,
        CAPACITOR,
        RESISTOR,
        BANK,
        FILTER,
        PORT,
        LINE_ELEMENT,
        SHUNT,
        CLAMP,
        SNUBBER,
        WINDING_CLAMP,
        CORE,
        LINE_MAGNETIC,
        CROSSING,
        GROUND_PAIR,
        FREE_PATH,
    )
}

TABLE_WORDS = (
    *(kind.value for kind in Kind),
    *("ceramic", "film", "electrolytic", "tantalum"),
    *(role.value for role in Role),
)
"""The words that a table of a parameter may have rows for: kinds, dielectrics, roles."""

_NAME = ("name", "text", "Its name; every kind of subject has this field.")


def vocabulary_text() -> str:
    """The whole vocabulary as a listing: subject, fields with unit and sentence, links."""
    return "\n".join((_row(*_NAME) + "\n", *map(_subject_text, VOCABULARY.values())))


def _subject_text(term: SubjectTerm) -> str:
    lines = [f"{term.name}: {term.sentence}"]
    lines += [_row(field.name, field.unit, field.sentence) for field in term.fields]
    lines += [_row(link.name, f"-> {link.to}", link.sentence) for link in term.links]
    return "\n".join(lines) + "\n"


def _row(name: str, what: str, sentence: str) -> str:
    return f"  {name:<24} {what:<12} {sentence}"

"""Everything a rule may ask: subjects, fields and links, unknown where unknown."""

from rulecheck.facts.collect import collect_facts
from rulecheck.facts.facts import Bounds, Facts, Subject, Value
from rulecheck.facts.terms import FieldTerm, Form, LinkTerm, SubjectTerm
from rulecheck.facts.text import facts_text, value_text
from rulecheck.facts.vocabulary import TABLE_WORDS, VOCABULARY, vocabulary_text

__all__ = [
    "TABLE_WORDS",
    "VOCABULARY",
    "Bounds",
    "Facts",
    "FieldTerm",
    "Form",
    "LinkTerm",
    "Subject",
    "SubjectTerm",
    "Value",
    "collect_facts",
    "facts_text",
    "value_text",
    "vocabulary_text",
]

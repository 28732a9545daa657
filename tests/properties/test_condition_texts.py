"""Any text at all is a condition or a flaw with a place in it, and never an exception."""

from hypothesis import example, given, settings
from hypothesis import strategies as st

from rulecheck.reading import SourceText
from rulecheck.rulebook import load_packs
from rulecheck.rulebook.binding import bind
from rulecheck.rulebook.parsing import parse_condition
from rulecheck.rulebook.scope import OWN, Bound, Scene
from rulecheck.rulebook.tree import Flaw
from tests.rulebook.making import facts, parameter, subject

WORDS = st.sampled_from(
    [
        "gated", "blocks-forward", "off-voltage", "from", "needs", "devices", "d", "d.gated",
        "d.blocking", "derate", "and", "or", "not", "implies", "every", "some", "among", "has",
        "in", "matches", "of", "source", "count", "sum", "min", "max", "for", "where", "lowest",
        "abs", "root", "(", ")", "[", "]", ",", "<=", "=", "!=", ">", "+", "-", "*", "/", "yes",
        "no", "3", "3 V", "80 %", "4.7 uF", "1e999", '"igbt"', '"*"', "name", ".", "-3", "3 V A",
    ]
)  # fmt: skip
TEXTS = st.one_of(
    st.lists(WORDS, max_size=14).map(" ".join), st.lists(WORDS, max_size=8).map("".join), st.text()
)
OWN_SUBJECT = subject("position", "Q1", {"devices": ("D1",)})
FACTS = facts(OWN_SUBJECT, subject("part", "D1"))
PARAMETERS = {"derate": parameter({"other": 0.8, "diode": 0.7})}


@settings(max_examples=300, deadline=None)
@given(TEXTS)
@example("1e999 V > blocks-forward")
@example('"\\')
@example("sum(d.blocking for d among devices) / (blocks-forward - blocks-forward) > 1")
@example(
    "min(d.blocking for d among devices where no)"
    " - max(d.blocking for d among devices where no) > 1 V"
)
def test_every_text_is_bound_or_refused_at_its_place(text):
    node = parse_condition(text)
    if isinstance(node, Flaw):
        assert 0 <= node.at <= len(text)
        assert node.what
        assert node.remedy
        return
    bound = bind(node, "position", PARAMETERS)
    if isinstance(bound, Bound):
        bound.run(Scene(FACTS, {OWN: OWN_SUBJECT}))
    else:
        assert bound
        assert all(0 <= flaw.at <= len(text) and flaw.what and flaw.remedy for flaw in bound)


@settings(max_examples=100, deadline=None)
@given(TEXTS, TEXTS)
def test_no_text_in_a_pack_raises(condition, message):
    quoted = [text.replace("\\", "").replace('"', "'") for text in (condition, message)]
    pack = (
        "pack: p\nrules:\n  - id: r\n    subject: position\n    level: note\n"
        f'    requires: "{quoted[0]}"\n    message: "{quoted[1]}"\n'
        "    why: w\n    remedy: r\n    source: s\n    examples: []\n"
    )
    book = load_packs([SourceText("p.rules.yaml", pack)])
    assert book.problems
    assert all(problem.span.file == "p.rules.yaml" for problem in book.problems)

"""The condition language: what it answers, in three values, and what it refuses at its place."""

import pytest

from rulecheck.facts import Bounds
from rulecheck.values import Interval, Unknown
from tests.rulebook.making import ask, flaws, missing, parameter, subject

INF = float("inf")
RATING = missing("blocking of Q2")


def at_least(volts: float) -> Bounds:
    return Bounds(Interval(volts, INF), (RATING,))


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("blocks-forward >= 100 V", True),
        ("blocks-forward > 100 V", False),
        ("blocks-forward = 0.1 kV", True),
        ("blocks-forward * 80 % >= asked-forward-voltage", True),
        ("asked-forward-voltage / blocks-forward <= 0.58", True),
        ("blocks-forward - asked-forward-voltage < 42 V", False),
        ("-asked-forward-voltage < 0 V", True),
        ("lowest(off-voltage) >= 36 V and highest(off-voltage) <= 58 V", True),
        ("magnitude(on-current) = 86 A", True),
        ("abs(lowest(on-current)) = 86 A", True),
        ("smaller(blocks-forward, asked-forward-voltage) = 58 V", True),
        ("larger(blocks-forward, asked-forward-voltage) = 58 V", False),
        ("root(blocks-forward * blocks-forward) = 100 V", True),
        ("gated", True),
        ("not gated or carries-forward", False),
        ("gated implies carries-reverse", True),
        ("carries-forward implies carries-reverse implies gated", True),
        ("gated = yes and carries-forward = no", True),
        ('"I" in needs and "II" in needs', False),
        ("needs = has", False),
        ('from in ["BUS", "SW"]', True),
        ('from matches "bu?" and name matches "q*"', True),
        ('from matches "b"', False),
        ('from != "SW"', True),
    ],
)
def test_known_values_give_plain_answers(text, expected):
    q1 = subject(
        "position", "Q1", gated=True, carries_reverse=True, blocks_forward=100.0,
        asked_forward_voltage=58.0, off_voltage=Interval(36.0, 58.0),
        on_current=Interval(-86.0, 86.0), needs=("I", "IV"), has=("I",), **{"from": "BUS"},
    )  # fmt: skip
    assert ask(text, q1).truth is expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("blocks-forward >= 100 V", True),
        ("blocks-forward >= 58 V and gated", True),
        ("blocks-forward >= 150 V", None),
        ("blocks-forward < 99 V", False),
        ("blocks-forward = 99 V", False),
        ("blocks-forward = 120 V", None),
        ("blocks-forward >= 150 V and not gated", False),
        ("blocks-forward >= 150 V or gated", True),
        ("blocks-forward >= 150 V implies gated", True),
        ("gated implies blocks-forward >= 150 V", None),
        ("2 * blocks-forward >= 200 V", True),
        ("blocks-forward / 2 >= 51 V", None),
        ("600 V / blocks-forward <= 6", True),
        ("blocks-forward * 0 = 0 V", True),
        ("carries-forward", None),
        ("carries-forward and blocks-forward < 50 V", False),
        ('"I" in needs', None),
        ('from = "BUS"', None),
        ('from matches "B*"', None),
        ("off-voltage-known or gated", True),
    ],
)
def test_what_is_not_known_matters_only_where_it_could_change_the_answer(text, expected):
    text = text.replace("off-voltage-known", "lowest(off-voltage) > 0 V")
    q1 = subject(
        "position", "Q1", gated=True, blocks_forward=at_least(100.0),
        carries_forward=missing("card"), needs=missing("currents"), off_voltage=missing("volts"),
        **{"from": missing("net")},
    )  # fmt: skip
    answer = ask(text, q1)
    assert answer.truth is expected
    assert bool(answer.missing) is (expected is None)


def test_an_undecided_answer_names_what_would_decide_it_and_nothing_else():
    q1 = subject(
        "position", "Q1", blocks_forward=at_least(100.0), carries_forward=missing("card"),
        carries_reverse=missing("other card"),
    )  # fmt: skip
    answer = ask("(carries-reverse and gated) or (carries-forward and blocks-forward > 1 kV)", q1)
    assert answer.missing == (missing("card"), RATING)


DEVICES = (
    subject("part", "Q1", kind="mosfet", blocking=100.0, gated=True),
    subject("part", "D1", kind="diode", blocking=600.0),
    subject("part", "D2", kind="diode", blocking=RATING),
)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("count(devices) = 3", True),
        ('count(d among devices where d.kind = "diode") = 2', True),
        ("count(d among devices where d.blocking > 200 V) >= 1", True),
        ("count(d among devices where d.blocking > 200 V) >= 2", None),
        ("count(d among devices where d.blocking > 200 V) >= 3", False),
        ("sum(d.blocking for d among devices where d.gated) = 100 V", True),
        ("sum(d.blocking for d among devices) > 800 V", None),
        ("min(d.blocking for d among devices) <= 100 V", True),
        ("min(d.blocking for d among devices) > 100 V", False),
        ("max(d.blocking for d among devices) >= 600 V", True),
        ('min(d.blocking for d among devices where d.kind = "igbt") > 1 kV', True),
        ('every d among devices has d.kind in ["mosfet", "diode"]', True),
        ("every d among devices has d.blocking >= 100 V", None),
        ("every d among devices has d.blocking > 100 V", False),
        ("some d among devices has d.blocking >= 600 V", True),
        ("some d among devices has d.blocking >= 700 V", None),
        ("some d among legs has d.gates-joined", None),
        ("every d among legs has d.gates-joined", None),
        ("count(legs) >= 0", True),
        ("count(legs) >= 1", None),
        ("some d among devices has (d.name = name and d.gated)", True),
        ("every d among devices has (some e among devices has e.kind = d.kind)", True),
    ],
)
def test_quantifiers_over_linked_subjects(text, expected):
    links = {"devices": ("Q1", "D1", "D2"), "legs": missing("states")}
    assert ask(text, subject("position", "Q1", links), *DEVICES).truth is expected


def test_parameters_are_numbers_or_tables_by_word():
    q1 = subject(
        "position", "Q1", blocks_forward=100.0, asked_forward_voltage=78.0, kinds=("diode", "igbt")
    )
    rule = "asked-forward-voltage <= derate{} * blocks-forward"
    plain, table = parameter(0.8), parameter({"other": 0.8, "diode": 0.75})
    assert ask(rule.format(""), q1, parameters={"derate": plain}).truth
    assert ask(rule.format(" of kinds"), q1, parameters={"derate": plain}).truth
    assert ask(rule.format(" of kinds"), q1, parameters={"derate": table}).truth is False
    assert ask('source of derate = "common practice"', q1, parameters={"derate": plain}).truth
    known = 'source of derate of kinds = "common practice"'
    assert ask(known, q1, parameters={"derate": table}).truth
    assert flaws(rule.format(""), parameters={"derate": table})
    assert flaws('source of derate = "x"', parameters={"derate": table})


def test_a_table_of_an_unknown_word_takes_in_all_its_rows():
    c1 = subject("capacitor", "C1", largest_voltage=70.0, rated_voltage=100.0,
                 dielectric=missing("dielectric"))  # fmt: skip
    table = {"derate": parameter({"other": 0.8, "ceramic": 0.6})}
    rule = "largest-voltage <= derate of dielectric * rated-voltage"
    assert ask(rule, c1, parameters=table).truth is None
    assert ask(f"{rule} or 50 V < largest-voltage", c1, parameters=table).truth is True


@pytest.mark.parametrize(
    ("text", "flaw"),
    [
        ("blocks-forward + on", "17: 'on' is no field and no parameter"),
        ("blocks-forward + rated-forward-current > 3 V", "15: A added to V"),
        ("blocks-forward - 3 > 3 V", "15: a plain number subtracted from V"),
        ("blocks-forward >= 3 A", "15: V compared with A"),
        ("blocks-forward / rated-forward-current > 3 V", "39: ohm compared with V"),
        ("off-voltage > 3 V", "0: a range where a number is wanted"),
        ("gated > carries-forward", "6: '>' between a yes-or-no and another"),
        ('from = 3 V', "5: a text compared with a number"),
        ("not blocks-forward", "4: a number where a condition is wanted"),
        ("gated and from", "10: a text where a condition is wanted"),
        ("devices", "0: 'devices' leads to subjects and has no value"),
        ("every d among gated has d.gated", "14: 'gated' is no link of position"),
        ("every d among devices has gated2", "26: 'gated2' is no field and no parameter"),
        ("every d among devices has d.frequency > 3 V", "26: 'd.frequency' is no field and no"),
        ("lowest(blocks-forward) > 3 V", "7: a number in lowest()"),
        ("smaller(blocks-forward) > 3 V", "0: smaller() takes 2, not 1"),
        ("smaller(blocks-forward, 3 A) > 3 V", "0: V and A in smaller()"),
        ("blocks-forward >= derate", "18: 'derate' is no field and no parameter"),
        ("derate of kinds > 1", "0: 'derate' is no parameter"),
        ('3 V in ["a"]', "0: a number where a text is wanted"),
        ("blocks-forward >=", "17: the condition ends too early"),
        ("blocks-forward >= 3 V)", "21: ')' has no place here"),
        ("blocks-forward ; gated", "15: ';' has no place here"),
        ("blocks-forward >= 3 W and", "25: the condition ends too early"),
        ("__import__('os')", "0: '_' has no place here"),
        ("", "0: the condition ends too early"),
    ],
)  # fmt: skip
def test_mistakes_are_refused_where_they_stand(text, flaw):
    assert [found.startswith(flaw) for found in flaws(text)] == [True], flaws(text)


def test_several_mistakes_are_all_found():
    assert len(flaws("blocks-forwards > 3 V and carries-forwards and off-voltage > 3 V")) == 3


@pytest.mark.parametrize(
    "text",
    [
        "(" * 60 + "gated" + ")" * 60,
        "not " * 900 + "gated",
        "1 + " * 900 + "1 > 3",
        "gated and " * 390 + "gated",
        "gated or " * 600 + "gated",
        'name matches "*a*a*a*a*a*a*a*a*a*"',
        "every a among legs has every b among a.positions has every c among b.legs has "
        "every d among c.positions has d.gated",
    ],
)
def test_conditions_are_bounded(text):
    assert flaws(text)


def test_an_alias_word_hides_nothing_of_the_subject():
    q1 = subject("position", "Q1", {"devices": ("D1",)}, gated=True)
    assert ask("every d among devices has (gated and not d.gated)", q1, *DEVICES).truth


def test_division_by_zero_is_undecided_and_says_so():
    answer = ask("1 V / blocks-forward > 3", subject("position", "Q1"))
    assert answer.truth is None
    assert answer.missing == (Unknown("a quotient", "a divisor other than 0"),)

"""Loading packs: mistakes are located, later packs have their say, with reasons."""

import pytest

from rulecheck.reading import SourceText
from rulecheck.rulebook import load_packs, rules_text
from rulecheck.rulebook.scope import Row
from tests.rulebook.making import pack

EXAMPLES = """    examples:
      - {shows: kept, expect: holds, netlist: "* none"}
      - {shows: broken, expect: broken, netlist: "* none"}
"""
RULE = """  - id: {id}
    subject: position
    level: error
    requires: {requires}
    message: "{message}"
    why: because
    remedy: mend it
    source: common practice
"""


def rule(id="team-rule", requires="gated", message="is not gated", more="", examples=EXAMPLES):
    return RULE.format(id=id, requires=requires, message=message) + more + examples


def single(**changes):
    return "pack: x\nrules:\n" + rule(**changes)


def sources(*texts: str) -> list[SourceText]:
    return [pack(text, f"p{number}.rules.yaml") for number, text in enumerate(texts, 1)]


def load(*texts: str):
    return load_packs(sources(*texts))


def lines(*texts: str) -> list[str]:
    return [problem.line() for problem in load(*texts).problems]


BASE = "pack: base\nparameters:\n  share: {value: 0.8, source: common practice}\nrules:\n" + rule()


def test_a_sound_pack_loads_without_a_word():
    book = load(BASE)
    assert book.problems == ()
    assert [r.id for r in book.rules] == ["team-rule"]
    assert len(book.ready) == 1


@pytest.mark.parametrize(
    ("text", "place", "what"),
    [
        ("rules: []\n", "1:1", "key 'pack' is missing"),
        ("pack: x\nrulez: []\n", "2:1", "unknown key 'rulez'"),
        (single(requires='gatedd'), "6:15", "'gatedd' is no field"),
        (single(requires='gated and'), "6:24", "the condition ends too early"),
        (single(requires='blocks-forward > 3 A'), "6:30", "V compared with A"),
        (single(requires='blocks-forward + 3 V'), "6:30", "this is no condition"),
        (single(message='{gatedd}'), "7:16", "'gatedd' is no field"),
        (f"pack: x\nrules:\n{rule(message='{gated')}", "7:15", "a brace that is not closed"),
        (single(message='{gated and}'), "7:25", "in '{gated and}': the condi"),
        (single(more='    values: {has: gatedd}').replace("gatedd}", "gatedd}\n"),
         "11:19", "'gatedd' is no field"),
        (single(more='    applies: tied and no2').replace("no2", "no2\n"),
         "11:23", "'no2' is no field"),
        (single() + rule(), "14:5", "rule 'team-rule' stands here a second"),
        (single(examples=''), "3:5", "key 'examples' is missing"),
        (single(examples='    examples: []'), "11:5", "'team-rule' has 0 of"),
        (single().replace("common practice", "''"), "10:5", "has an empty 'sourc"),
        (single().replace("    source: common practice\n", ""), "3:5",
         "key 'source' is missing"),
        (single().replace("position", "positoin"), "4:5", "'positoin' is no subj"),
        (single().replace("error", "fatal"), "5:12", "'fatal' is not known here"),
        (single().replace("broken,", "wrong,"), "13:32", "'wrong' is not"),
        ("pack: x\nparameters:\n  a: {value: 3 Q, source: s}\n", "3:7", "'Q' is no unit"),
        ("pack: x\nparameters:\n  a: {value: 3}\n", "3:3", "parameter 'a' has no source"),
        ("pack: x\nparameters:\n  a: {value: {diode: 1}, source: s}\n", "3:7", "no row 'other'"),
        ("pack: x\nparameters:\n  a: {value: {diode: 1 V, other: 1}, source: s}\n", "3:7", "diff"),
        ("pack: x\nparameters:\n  a: {value: {diod: 1, other: 1}, source: s}\n", "3:15", "did you"),
        ("pack: x\nset:\n  a: {value: 1, source: s}\n", "3:3", "no earlier pack has a para"),
        ("pack: x\nchange:\n  - {rule: nix, reason: r, off: true}\n", "3:6", "no earlier pack has"),
    ],
)  # fmt: skip
def test_a_mistake_is_reported_at_its_place(text, place, what):
    found = lines(text)
    assert [line for line in found if line.startswith(f"p1.rules.yaml:{place}: error: ")], found
    assert what in " ".join(found)


def test_a_flaw_in_a_folded_condition_is_found_on_its_own_line():
    folded = rule(requires=">\n      gated\n      and carries-forward\n      and tide")
    assert "p1.rules.yaml:9:11: error: 'tide' is no field" in lines(f"pack: x\nrules:\n{folded}")[0]


def test_twenty_mistakes_give_twenty_messages_in_one_run():
    wrong = [
        rule("r1", requires="gatedd"),
        rule("r2", requires="gated and"),
        rule("r3", requires="blocks-forward > 3 A"),
        rule("r4", requires="lowest(gated) > 3"),
        rule("r5", requires="off-voltage > 3 V"),
        rule("r6", message="{nothing}"),
        rule("r7", message="{gated"),
        rule("r8", examples="    examples: []\n"),
        rule("r9").replace("common practice", "''"),
        rule("r10").replace("because", "''"),
        rule("r11").replace("error", "fatal"),
        rule("r12").replace("position", "positoin"),
        rule("r13", more="    aplies: gated\n"),
        rule("r14", more="    values: {has: 3 +}\n"),
        rule("r15", more="    graver: {when: gate, level: error}\n"),
        rule("r1"),
        rule("r16", requires="some d among parts has d.gated"),
        rule("r17", more="    parameters: {m: {value: 3 Q, source: s}}\n"),
    ]
    text = (
        "pack: x\nparameters:\n  a: {value: 3}\nset:\n  b: {value: 1, source: s}\nrules:\n"
        + "".join(wrong)
    )
    found = lines(text)
    assert len(found) == 20, found
    assert len({line.split(": error")[0] for line in found}) == 20


def test_a_later_pack_changes_level_and_parameter_and_says_why():
    team = """pack: team
set:
  share: {value: 0.7, source: team handbook}
change:
  - {rule: team-rule, level: note, reason: tried first}
"""
    book = load(BASE, team)
    assert book.problems == ()
    assert book.rules[0].level == "note"
    assert book.parameters["share"].rows == {"other": Row(0.7, "team handbook")}
    assert book.changes == (
        "team sets share (team handbook)",
        "team changes team-rule: tried first",
    )


def test_a_rule_is_switched_off_with_its_reason_and_on_again():
    off = "pack: team\nchange:\n  - {rule: team-rule, off: true, reason: not our boards}\n"
    on = "pack: late\nchange:\n  - {rule: team-rule, reason: but for this one}\n"
    book = load(BASE, off)
    assert book.rules == ()
    assert book.ready == ()
    assert [(o.rule, o.reason, o.pack) for o in book.switched_off] == [
        ("team-rule", "not our boards", "team")
    ]
    again = load(BASE, off, on)
    assert [r.id for r in again.rules] == ["team-rule"]
    assert again.switched_off == ()


@pytest.mark.parametrize(
    ("change", "what"),
    [
        ("{rule: team-rule, off: true}", "key 'reason' is missing"),
        ("{rule: team-rule, off: true, reason: ' '}", "a change of 'team-rule' without a reason"),
        ("{rule: team-rul, off: true, reason: r}", "did you mean 'team-rule'?"),
        (
            "{rule: team-rule, reason: r, parameters: {m: {value: 1, source: s}}}",
            "no parameter 'm'",
        ),
    ],
)
def test_a_change_has_to_be_sound(change, what):
    assert what in " ".join(lines(BASE, f"pack: team\nchange:\n  - {change}\n"))


def test_a_table_without_other_leaves_the_rest_as_it_was():
    book = load(BASE, "pack: p\nset:\n  share: {value: {diode: 0.7}, source: handbook}\n")
    rows = book.parameters["share"].rows
    assert rows == {"other": Row(0.8, "common practice"), "diode": Row(0.7, "handbook")}
    again = load(BASE, "pack: p\nset:\n  share: {value: 0.6, source: handbook}\n")
    assert again.parameters["share"].rows == {"other": Row(0.6, "handbook")}


def test_a_parameter_keeps_its_unit():
    found = lines(BASE, "pack: team\nset:\n  share: {value: 3 V, source: s}\n")
    assert found[0].startswith("p2.rules.yaml:3:3: error: 'share' is in plain numbers")


def test_the_rules_print_as_a_list():
    off = "pack: team\nchange:\n  - {rule: second, off: true, reason: not our boards}\n"
    book = load(BASE + rule("second"), off)
    assert rules_text(book) == (
        "team-rule  error    position    base\n"
        "off: second, by team: not our boards\n"
        "parameter share: 0.8 (common practice)\n"
    )

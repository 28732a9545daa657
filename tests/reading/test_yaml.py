"""YAML into typed structs: every mistake located, in one run."""

import textwrap
from typing import Any, Literal

import msgspec
import pytest

from rulecheck.reading import SourceText, YamlReading, json_schema, read_yaml
from rulecheck.reading.quantities import VoltageRange
from rulecheck.values import Span


class Store(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    """Invented for these tests: one entry of a list of stores."""

    rated_voltage: VoltageRange
    label: str = ""
    nets: list[str] = []
    share: float = 1.0
    kind: Literal["battery", "capacitor"] = "battery"


class Hut(msgspec.Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    stores: dict[str, Store] = {}
    rooms: list[Store] = []
    count: int = 1
    open: bool = True


def read(text: str) -> YamlReading[Hut]:
    return read_yaml(SourceText("hut.yaml", textwrap.dedent(text)), Hut)


def lines(text: str) -> list[str]:
    return [problem.line().removeprefix("hut.yaml:") for problem in read(text).problems]


def test_a_sound_file_gives_its_value_and_no_problem() -> None:
    reading = read("stores: {bank: {rated-voltage: [42 V, 58 V], share: 1}}\ncount: 3\n")
    assert reading.problems == ()
    assert reading.value == Hut({"bank": Store(["42 V", "58 V"], share=1.0)}, count=3)


@pytest.mark.parametrize("text", ["", "# nothing yet\n", "---\n"])
def test_an_empty_file_is_the_default(text: str) -> None:
    reading = read(text)
    assert reading.problems == ()
    assert reading.value == Hut()


@pytest.mark.parametrize(
    ("written", "label"),
    [
        ("on", "on"),
        ("no", "no"),
        ("off", "off"),
        ("1e-9", "1e-9"),
        ("012", "012"),
        ("1:30", "1:30"),
        ("12", "12"),
        ("1.50", "1.50"),
        ("true", "true"),
        ("'7'", "7"),
        ("2024-01-01", "2024-01-01"),
        ("=", "="),
    ],
)
def test_text_stays_as_it_looks(written: str, label: str) -> None:
    reading = read(f"stores: {{bank: {{rated-voltage: 1, label: {written}}}}}\n")
    assert reading.problems == ()
    assert reading.value is not None
    assert reading.value.stores["bank"].label == label


@pytest.mark.parametrize("key", ["on", "0", "yes", "1e3", "null"])
def test_keys_are_text(key: str) -> None:
    reading = read(f"stores: {{{key}: {{rated-voltage: 1}}}}\n")
    assert reading.value is not None
    assert list(reading.value.stores) == [key]


@pytest.mark.parametrize(("written", "number"), [("1e-9", 1e-9), ("3", 3.0), ("12.5e3", 12500.0)])
def test_numbers_are_numbers_where_numbers_are_wanted(written: str, number: float) -> None:
    reading = read(f"stores: {{bank: {{rated-voltage: 1, share: {written}}}}}\n")
    assert reading.value is not None
    assert reading.value.stores["bank"].share == number


def test_nets_called_by_numbers_are_text_in_a_list_of_names() -> None:
    reading = read("stores: {bank: {rated-voltage: 1, nets: [0, 12, SW, off]}}\n")
    assert reading.value is not None
    assert reading.value.stores["bank"].nets == ["0", "12", "SW", "off"]


def test_all_mistakes_are_told_in_one_run_each_at_its_place() -> None:
    assert lines(
        """\
        stores:
          bank: {rated-voltage: 48 V, lable: x}
          spare: {label: [x], kind: batery}
          old:
            rated-voltage: 12 V
            share: much
        rooms:
          - {rated-voltage: 230}
          - {label: x}
          - seven
        count: 1.5
        roms: []
        """
    ) == [
        "2:31: error: unknown key 'lable'; did you mean 'label'?",
        "3:3: error: key 'rated-voltage' is missing in 'spare'; add 'rated-voltage: ...'",
        "3:18: error: this is a list for 'label'; write text",
        "3:29: error: 'batery' is not known here; did you mean 'battery'?",
        "6:12: error: this is text for 'share'; write a number",
        "9:5: error: key 'rated-voltage' is missing; add 'rated-voltage: ...'",
        "10:5: error: this is text; write a mapping of keys with the keys "
        "rated-voltage, label, nets, share, kind",
        "11:8: error: this is a number for 'count'; write a whole number",
        "12:1: error: unknown key 'roms'; did you mean 'rooms'?",
    ]


def test_what_is_sound_is_kept_beside_a_mistake() -> None:
    reading = read("stores: {a: {rated-voltage: 1}, b: {lable: 1}}\ncount: 2\n")
    assert reading.problems
    assert reading.value == Hut({"a": Store(1)}, count=2)


def test_a_required_key_with_a_wrong_value_is_told_once() -> None:
    assert lines("stores: {a: {rated-voltage: {x: 1}}}\n") == [
        "1:29: error: this is a mapping of keys for 'rated-voltage'; "
        "write a whole number or a number or text or a list"
    ]


def test_a_key_without_a_value_says_so() -> None:
    assert lines("count:\n") == ["1:7: error: nothing is given for 'count'; write a whole number"]


def test_a_faulty_entry_among_many_is_found_by_its_key() -> None:
    rows = [f"  s{k}: {{rated-voltage: {k}}}" for k in range(40)]
    rows[17], rows[31] = "  s17: {rated-voltage: [true, {}]}", "  s31: 5"
    assert [line.partition(" ")[0] for line in lines("stores:\n" + "\n".join(rows) + "\n")] == [
        "19:31:",
        "33:8:",
    ]


@pytest.mark.parametrize(
    ("text", "start"),
    [
        ("count: 1\ncount: 2\n", "2:1: error: key 'count' stands here a second time"),
        ("count: [1\n", "2:1: error: not YAML: "),
        ("count: 'x\n", "2:1: error: not YAML: "),
        ("count: *there\n", "1:8: error: not YAML: found undefined alias"),
        ("count: 1\n---\ncount: 2\n", "2:1: error: not YAML: "),
        ("\tcount: 1\n", "1:1: error: not YAML: "),
        ("count: 1\x00\n", "1:9: error: control character"),
        ("rooms: &r [*r]\n", "1:8: error: an alias repeats without end"),
        ("? [a]\n: 1\n", "1:3: error: a list or mapping as a key"),
        ("count: !secret 1\n", "1:8: error: the tag !secret is not used here"),
        ("- 1\n", "1:1: error: this is a list; write a mapping of keys"),
        ("rooms: " + "[" * 500, "1:"),
        ("rooms:\n" + "".join(" " * k + "-\n" for k in range(80)), "61:60: error: nested more"),
    ],
)
def test_yaml_mistakes_are_located(text: str, start: str) -> None:
    found = [
        problem.line().removeprefix("hut.yaml:")
        for problem in read_yaml(SourceText("hut.yaml", text), Hut).problems
    ]
    assert found
    assert found[0].startswith(start)


def test_aliases_that_multiply_are_stopped() -> None:
    rows = ["a0: &a0 [x, x, x, x, x, x, x, x, x, x]"]
    rows += [f"a{k}: &a{k} [{', '.join([f'*a{k - 1}'] * 10)}]" for k in range(1, 9)]
    assert any("alias repeats" in line for line in lines("\n".join(rows)))


def test_a_span_is_that_of_the_key_or_of_the_nearest_parent() -> None:
    reading = read("stores:\n  bank: {rated-voltage: 1, nets: [A, B]}\n")
    assert reading.span(()) == Span("hut.yaml", 1, 1)
    assert reading.span(("stores", "bank")) == Span("hut.yaml", 2, 3)
    assert reading.span(("stores", "bank", "rated-voltage")) == Span("hut.yaml", 2, 10)
    assert reading.span(("stores", "bank", "nets", 1)) == Span("hut.yaml", 2, 38)
    assert reading.span(("stores", "bank", "share")) == Span("hut.yaml", 2, 3)
    assert reading.span(("rooms", 4, "label")) == Span("hut.yaml", 1, 1)


def test_the_schema_carries_units_and_forbids_other_keys() -> None:
    schema: dict[str, Any] = json_schema(Hut)
    store = schema["$defs"]["Store"]
    assert schema["$schema"].startswith("https://json-schema.org/draft/2020-12")
    assert store["additionalProperties"] is False
    assert store["required"] == ["rated-voltage"]
    assert store["properties"]["rated-voltage"]["x-unit"] == "V"


def test_too_many_entries_are_refused_before_they_are_built() -> None:
    (line,) = lines("rooms: [" + "1," * 200_001 + "]")
    assert line.endswith("error: more than 200000 entries; split the file in two")

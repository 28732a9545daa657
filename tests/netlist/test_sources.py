"""Independent sources: DC values and waveforms."""

import pytest

from rulecheck.values import Unknown
from tests.kit.netlists import circuit, errors, one


@pytest.mark.parametrize(
    ("card", "value"),
    [
        ("V1 a 0 48", 48.0),
        ("V1 a 0 48V", 48.0),
        ("V1 a 0 DC 48", 48.0),
        ("V1 a 0 dc {2*24}", 48.0),
        ("V1 a 0 DC=48", 48.0),
        ("V1 a 0 DC 48 AC 1", 48.0),
        ("V1 a 0 AC 1 0", 0.0),
        ("V1 a 0", 0.0),
        ("V1 a 0 0", 0.0),
        ("I1 a 0 -3.3m", -3.3e-3),
        ("V1 a 0 48 Rser=10m Cpar=1n", 48.0),
        ("V1 a 0 DC 5 SIN(0 325 50)", 5.0),
        ("V1 a 0 PULSE(1 12 0 1n 1n 5u 10u)", 1.0),
        ("V1 a 0 PWL(0 3 1u 5)", 3.0),
        ("V1 dc ac 5", 5.0),
    ],
)
def test_the_value_of_a_source_is_its_dc_value(card: str, value: float) -> None:
    found = circuit(card)
    assert found.elements[0].value == pytest.approx(value)
    assert found.problems == ()


def test_a_source_described_by_a_word_is_unknown() -> None:
    found = one("V1 BAT 0 BANK-48")
    assert isinstance(found.value, Unknown)
    assert found.text == "BANK-48"


@pytest.mark.parametrize(
    ("written", "kind", "values"),
    [
        ("SIN(0 325 50)", "sin", (0, 325, 50)),
        ("SIN (0 325 50)", "sin", (0, 325, 50)),
        ("sin 0 325 50", "sin", (0, 325, 50)),
        ("SINE(0,325,50)", "sin", (0, 325, 50)),
        ("SIN({vo} {2*vo+1} 50Hz)", "sin", (2, 5, 50)),
        ("SIN(vo 325 50)", "sin", (2, 325, 50)),
        ("SIN({vo}\n+ 325\n+ 50)", "sin", (2, 325, 50)),
        ("PULSE(0 12 0 10n 10n 5u 10u)", "pulse", (0, 12, 0, 1e-8, 1e-8, 5e-6, 1e-5)),
        ("PULSE 0 12 0 10n", "pulse", (0, 12, 0, 1e-8)),
        ("PULSE(0 12 0 10n", "pulse", (0, 12, 0, 1e-8)),
        ("PWL(0 0 1u 5 2u -5)", "pwl", (0, 0, 1e-6, 5, 2e-6, -5)),
        ("PWL(0,0 1u,5)", "pwl", (0, 0, 1e-6, 5)),
        ("PWL((0,0) (1u,5))", "pwl", (0, 0, 1e-6, 5)),
        ("PWL 0,0 1u,5", "pwl", (0, 0, 1e-6, 5)),
        ("PWL(0 0 +1u 5 +2u 7)", "pwl", (0, 0, 1e-6, 5, 3e-6, 7)),
        ("PWL file=ramp.txt", "pwl", ()),
        ('PWL(file="ramp of day.txt")', "pwl", ()),
        ("EXP(0 5 1u 1u)", "exp", (0, 5, 1e-6, 1e-6)),
        ("SFFM(0 1 10k 5 1k)", "sffm", (0, 1, 1e4, 5, 1e3)),
        ("AC 1 SIN(0 325 50)", "sin", (0, 325, 50)),
        ("SIN(0 325 50) AC 1 90", "sin", (0, 325, 50)),
    ],
)
def test_waveforms(written: str, kind: str, values: tuple[float, ...]) -> None:
    found = circuit(f"V1 a 0 {written}\n.param vo=2\n")
    waveform = found.elements[0].waveform
    assert waveform is not None
    assert waveform.kind == kind
    assert waveform.values == pytest.approx(values)
    assert errors(found) == []


@pytest.mark.parametrize("rest", ["R=5", "table=(0,0,1,1)", "value={V(a)*2}"])
def test_a_source_that_is_defined_by_an_expression_is_not_zero(rest: str) -> None:
    found = circuit(f"I1 a 0 {rest}\n")
    waveform = found.elements[0].waveform
    assert waveform is not None
    assert (waveform.kind, waveform.text) == ("behavioural", rest)
    assert isinstance(found.elements[0].value, Unknown)
    assert found.problems == ()


def test_the_text_of_a_waveform_is_what_was_written() -> None:
    waveform = one("V1 a 0 DC 1 PULSE(0 12 0) Rser=1").waveform
    assert waveform is not None
    assert waveform.text == "PULSE(0 12 0)"


def test_a_waveform_argument_that_is_no_number_is_an_error_and_leaves_no_values() -> None:
    found = circuit("V1 a 0 PULSE(0 VHIGH 0 1n)\n")
    waveform = found.elements[0].waveform
    assert waveform is not None
    assert waveform.values == ()
    assert isinstance(found.elements[0].value, Unknown)
    assert errors(found) == ["2:16: 'VHIGH' is no number for a waveform"]


def test_a_waveform_argument_without_a_value_is_an_error_and_leaves_no_values() -> None:
    found = circuit("V1 a 0 PULSE(0 {vhigh} 0 1n)\n")
    waveform = found.elements[0].waveform
    assert waveform is not None
    assert waveform.values == ()
    assert errors(found) == ["2:17: parameter 'vhigh' is not defined"]


@pytest.mark.parametrize(
    ("written", "repeats_from", "times"),
    [
        ("PWL(0 0 1u 5)", None, (0, 1e-6)),
        ("PWL(0 0 1u 5) r=0", 0, (0, 1e-6)),
        ("PWL(0 0 1u 5) r=-1", None, (0, 1e-6)),
        ("PWL(0 0 1u 5 r=0)", 0, (0, 1e-6)),
        ("PWL(0 0 1u 5 2u 0) r=1u td=4u", 5e-6, (4e-6, 5e-6, 6e-6)),
        ("PWL(0 0 1u 5) r={vo-2}", 0, (0, 1e-6)),
        ("PWL REPEAT FOREVER (0 0 1u 5) ENDREPEAT", 0, (0, 1e-6)),
        ("PWL(REPEAT FOR 3 0 0 1u 5 ENDREPEAT)", 0, (0, 1e-6)),
    ],
)
def test_a_piecewise_list_may_repeat(
    written: str, repeats_from: float | None, times: tuple[float, ...]
) -> None:
    waveform = circuit(f"V1 a 0 {written}\n.param vo=2\n").elements[0].waveform
    assert waveform is not None
    assert waveform.values[::2] == pytest.approx(times)
    assert waveform.repeats_from == (None if repeats_from is None else pytest.approx(repeats_from))

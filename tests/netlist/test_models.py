"""Model cards in every notation, and which one an element gets."""

import pytest

from rulecheck.netlist import Model
from tests.kit.netlists import circuit, element, errors, notes, one


def model(card: str, name: str = "DX") -> Model:
    found = one(f"D1 a k {name}", card).model
    assert found is not None
    return found


@pytest.mark.parametrize(
    ("card", "parameters"),
    [
        (".model DX D(BV=600 IS=1n)", {"bv": 600.0, "is": 1e-9}),
        (".MODEL dx d (bv=600 is=1n)", {"bv": 600.0, "is": 1e-9}),
        (".model DX D BV=600 IS=1n", {"bv": 600.0, "is": 1e-9}),
        (".model DX D {BV=600 IS=1n}", {"bv": 600.0, "is": 1e-9}),
        (".model DX D(BV=600, IS=1n)", {"bv": 600.0, "is": 1e-9}),
        (".model DX D(BV = 600\n+ IS = 1n)", {"bv": 600.0, "is": 1e-9}),
        (".model DX D(BV=600 IS=1n", {"bv": 600.0, "is": 1e-9}),
        (".model DX D BV=600 IS=1n)", {"bv": 600.0, "is": 1e-9}),
        (".model DX D(BV={2*300} IS='1n')", {"bv": 600.0, "is": 1e-9}),
        (".model DX D(BV=600 LOT=5% IS=1n DEV 2%)", {"bv": 600.0, "is": 1e-9}),
        (".model DX D(BV 600 IS 1n)", {"bv": 600.0, "is": 1e-9}),
        (".model DX D", {}),
        (".model DX D()", {}),
        (".model DX D(pchan bv=600)", {"pchan": 1.0, "bv": 600.0}),
        (".model DX D(mfg=hut bv=600V)", {"mfg": "hut", "bv": 600.0}),
    ],
)
def test_model_notations(card: str, parameters: dict[str, float | str]) -> None:
    found = model(card)
    assert found.type == "D"
    assert found.name.upper() == "DX"
    assert found.parameters == parameters


@pytest.mark.parametrize("name", ["1N-60", "D", "D-600/15", "D.600+", "600D"])
def test_model_names(name: str) -> None:
    assert model(f".model {name} D(bv=600)", name).name == name


def test_an_unbalanced_parenthesis_and_trailing_words_are_noted() -> None:
    assert notes(circuit("D1 a k DX\n.model DX D(BV=600\n")) == [
        "3:12: '(' is not closed on this card; closed at its end"
    ]
    assert notes(circuit("D1 a k DX\n.model DX D(BV=600) more words\n")) == [
        "3:21: what follows the closing parenthesis of a model is ignored"
    ]


def test_inheritance() -> None:
    found = circuit(
        "D1 a k DX\nD2 a k DY\n.model BASE D(BV=600 IS=1n)\n"
        ".model DX AKO:BASE D(IS=2n)\n.model DY AKO: base (IS=3n)\n"
    )
    models = [one.model for one in found.elements]
    assert [(one.type, one.parameters) for one in models if one] == [
        ("D", {"bv": 600.0, "is": 2e-9}),
        ("D", {"bv": 600.0, "is": 3e-9}),
    ]


@pytest.mark.parametrize(
    ("cards", "message"),
    [
        (".model DX AKO:NONE D", "3:1: model 'DX' inherits from 'NONE', which is not there"),
        (".model DX AKO:DX D", "3:1: model 'DX' inherits from 'DX', which is not there"),
        (".model DX", "3:1: a model has a name and a type"),
        (".model", "3:1: a model without a name"),
        (".model DX D(BV=)", "3:16: no value follows '='"),
        (".model DX D(BV={none})", "3:17: parameter 'none' is not defined"),
    ],
)
def test_faulty_models_are_located(cards: str, message: str) -> None:
    assert errors(circuit(f"D1 a k DX\n{cards}\n")) == [message]


def test_a_second_model_of_a_name_is_noted_and_the_first_used() -> None:
    found = circuit("D1 a k DX\n.model DX D(BV=600)\n.model dx D(BV=700)\n")
    assert found.elements[0].model is not None
    assert found.elements[0].model.parameters == {"bv": 600.0}
    assert notes(found) == [
        "4:1: model 'dx' is defined a second time; the first, at hut.cir:3:1, is used"
    ]
    assert notes(circuit("D1 a k DX\n.model DX D(BV=600)\n.MODEL dx  d(bv=600)\n")) == []


def test_the_innermost_model_of_a_name_is_taken_with_the_parameters_of_its_scope() -> None:
    found = circuit(
        """\
        D1 a k DX
        X1 a k CELL vb=300
        X2 a k CELL
        X3 a k PLAIN
        .model DX D(BV=100)
        .subckt CELL a k vb=200
        D1 a k DX
        .model DX D(BV={vb})
        .ends
        .subckt PLAIN a k
        D1 a k dx
        .ends
        """
    )
    voltages = {
        name: element(found, name).model.parameters["bv"]  # type: ignore[union-attr]
        for name in ("D1", "X1.D1", "X2.D1", "X3.D1")
    }
    assert voltages == {"D1": 100.0, "X1.D1": 300.0, "X2.D1": 200.0, "X3.D1": 100.0}


def test_a_model_that_no_element_uses_is_not_complained_about() -> None:
    assert circuit("R1 a b 1\n.model DX D(BV={none})\n").problems == ()

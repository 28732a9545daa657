"""Parameters, functions and their scope."""

import math

import pytest

from rulecheck.values import Unknown
from tests.kit.netlists import circuit, element, errors, notes, one


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("1+2*3", 7),
        ("(1+2)*3", 9),
        ("2**3**2", 512),
        ("2^3", 8),
        ("-2**2", -4),
        ("2**-1", 0.5),
        ("7/2", 3.5),
        ("7%4", 3),
        ("10k/2", 5e3),
        ("4k7*2", 9400),
        ("1Meg*1u", 1),
        ("1e3+1E-3", 1000.001),
        ("10us*20kHz", 0.2),
        ("3 > 2", 1),
        ("3 <= 2", 0),
        ("3 == 3 && 2 != 2", 0),
        ("1 || 0", 1),
        ("!0", 1),
        ("1 > 0 ? 5 : 6", 5),
        ("0 ? 5 : 1 ? 7 : 8", 7),
        ("if(0, 1/0, 4)", 4),
        ("sin(pi/2)", 1),
        ("cos(0)+tan(0)", 1),
        ("sqrt(16)", 4),
        ("exp(1)", math.e),
        ("ln(exp(2))", 2),
        ("log(exp(2))", 2),
        ("log10(1000)", 3),
        ("abs(-3)", 3),
        ("min(3, 2, 5) + max(1, 2)", 4),
        ("pow(2, 10)", 1024),
        ("pwr(-2, 2)", 4),
        ("pwrs(-2, 2)", -4),
        ("int(-2.7)", -2),
        ("floor(-2.5)", -3),
        ("ceil(2.1)", 3),
        ("limit(7, 0, 5)", 5),
        ("sgn(-4)", -1),
        ("atan2(1, 1)", math.pi / 4),
        ("table(1.5, 0, 0, 1, 10, 2, 20)", 15),
        ("{2*{3}}", 6),
        ("dbl(tripled(2))", 12),
        ("VIN*2", 96),
        ("half", 24),
        ("  2 +\n+ 3", 5),
    ],
)
def test_expressions(text: str, value: float) -> None:
    found = circuit(
        f"R1 a b {{{text}}}\n"
        ".param vin=48 half={vin/2}\n"
        ".func dbl(x) {2*x}\n.func tripled(x) = x*3\n"
    )
    assert found.elements[0].value == pytest.approx(value)
    assert found.problems == ()


@pytest.mark.parametrize(
    "card",
    [
        ".param a=1 b={a+1}",
        ".PARAM b={A+1} a=1",
        ".param a = 1 b = a + 1",
        ".param a=1, b='a+1'",
        ".param a=1\n+ b=2",
        ".params a 1\n.param b 2",
        ".param a={1} b = {a == 1 ? 2 : 3}",
        ".param a=1 b=if(a==1,2,3)",
        ".param b=1\n.param b=2",
        ".param f(x)={x+1} b={f(1)}",
        ".param a=1m b={a*2k}",
        ".param a=1µ b={a*2meg}",
    ],
)
def test_parameters_in_every_notation_and_order(card: str) -> None:
    assert one("R1 p q {b}", card).value == pytest.approx(2.0)


def test_a_parameter_that_is_defined_twice_is_noted() -> None:
    assert notes(circuit("R1 p q {b}\n.param b=1\n.param b=2\n")) == [
        "4:10: parameter 'b' is defined again; the first, at hut.cir:3:10, is not used"
    ]


def test_a_cycle_is_an_error_at_its_place_and_the_value_unknown() -> None:
    found = circuit("R1 a b {p}\nR2 a b {q}\n.param p={q+1}\n.param q={2*p}\n")
    assert errors(found) == ["4:10: parameter 'p' depends on itself (p -> q -> p)"]
    assert all(isinstance(one.value, Unknown) for one in found.elements)


def test_a_function_that_calls_itself_ends_in_an_error() -> None:
    found = circuit("R1 a b {f(1)}\n.func f(x) {f(x+1)}\n")
    assert [line.partition(": ")[2] for line in errors(found)] == [
        "the expression refers to itself, or too deep"
    ]
    assert isinstance(found.elements[0].value, Unknown)


def test_a_function_with_an_end_may_call_itself_as_far_as_it_is_stopped() -> None:
    found = circuit("R1 a b {f(3)}\n.func f(x) {if(x<=0, 0, x)}\n")
    assert found.elements[0].value == 3.0


@pytest.mark.parametrize(
    ("expression", "message"),
    [
        ("vim", "2:9: parameter 'vim' is not defined"),
        ("2*(3", "2:13: '}' does not belong in an expression: '{2*(3}'"),
        ("2 3", "2:11: '3' does not belong in an expression: '{2 3}'"),
        ("1/0", "2:10: '/' of 1, 0 has no value"),
        ("sqrt(-1)", "2:9: 'sqrt' of -1 has no value"),
        ("sqrt(1, 2)", "2:9: function 'sqrt' takes 1 arguments; here are 2"),
        ("dbl(1, 2)", "2:9: function 'dbl' takes 1 arguments; here are 2"),
    ],
)
def test_a_faulty_expression_is_located(expression: str, message: str) -> None:
    found = circuit(f"R1 a b {{{expression}}}\n.param vin=48\n.func dbl(x) {{2*x}}\n")
    assert errors(found) == [message]
    assert isinstance(found.elements[0].value, Unknown)


def test_a_misspelt_parameter_is_shown_the_nearest() -> None:
    problem = circuit("R1 a b {rgat}\n.param rgate=5\n").problems[0]
    assert problem.remedy == "did you mean 'rgate'?"


def test_an_unknown_function_leaves_the_value_unknown_with_a_note() -> None:
    found = circuit("R1 a b {gauss(1, 2, 3)}\n")
    assert isinstance(found.elements[0].value, Unknown)
    assert notes(found) == [
        "2:9: function 'gauss' is not known here, so '{gauss(1, 2, 3)}' has no value"
    ]


@pytest.mark.parametrize("text", ["{1k*(1+V(a))}", "{1k*temper}", "{I(V1)*2}", "{time}"])
def test_what_only_a_simulation_knows_is_unknown_without_a_complaint(text: str) -> None:
    found = circuit(f"R1 a b {text}\n")
    assert isinstance(found.elements[0].value, Unknown)
    assert found.problems == ()


def test_a_parameter_of_the_card_that_cannot_be_computed_keeps_its_text() -> None:
    found = circuit("C1 a b 1u voltage={vmax}\n")
    assert found.elements[0].parameters == {"voltage": "{vmax}"}
    assert errors(found) == ["2:20: parameter 'vmax' is not defined"]


def test_a_long_sum_and_a_long_chain_of_parameters_are_no_trouble() -> None:
    chain = "\n".join(f".param p{k}={{p{k + 1}+1}}" for k in range(100))
    long_sum = "+".join(["1"] * 3000)
    found = circuit(f"R1 a b {{{long_sum}}}\nR2 a b {{p0}}\n{chain}\n.param p100=0\n")
    assert [one.value for one in found.elements] == [3000.0, 100.0]


def test_parameters_in_scope() -> None:
    found = circuit(
        """\
        X1 a b CELL L=2u
        X2 a b CELL
        .param k=3 own=1
        .subckt CELL p n PARAMS: L=1u
        .param own={k*10}
        L1 p n {L*k}
        R1 p n {own}
        X1 p n INNER L={L*2}
        .ends
        .subckt INNER p n L=5
        C1 p n {L}
        R1 p n {own}
        .ends
        """
    )
    values = {one.name: one.value for one in found.elements if one.letter != "X"}
    assert values == pytest.approx(
        {
            "X1.L1": 6e-6, "X1.R1": 30.0, "X1.X1.C1": 4e-6, "X1.X1.R1": 1.0,
            "X2.L1": 3e-6, "X2.R1": 30.0, "X2.X1.C1": 2e-6, "X2.X1.R1": 1.0,
        }
    )  # fmt: skip
    assert element(found, "X1").parameters == {"l": 2e-6}


def test_a_cycle_through_an_instance_is_found() -> None:
    found = circuit(
        "X1 a b CELL L={M}\n.param M={M2} M2={M}\n.subckt CELL p n L=1\nL1 p n {L}\n.ends\n"
    )
    assert errors(found) == ["3:10: parameter 'm' depends on itself (m -> m2 -> m)"]

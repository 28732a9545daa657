"""Values of parameters in their scope: computed when asked for, cycles found, faults as values."""

import difflib
import itertools
import math
from collections.abc import Callable, Mapping

from rulecheck.netlist.circuit import Model
from rulecheck.netlist.definition import Definition, UserFunction
from rulecheck.netlist.formula import (
    CALL,
    CHOOSE,
    NAME,
    NUMBER,
    Formula,
    NoFormula,
    Program,
    Step,
    compile_formula,
)
from rulecheck.netlist.functions import CHOOSERS, CONSTANTS, FUNCTIONS, OPERATORS, RUNNING
from rulecheck.netlist.numbers import beyond_numbers
from rulecheck.values import Problem, Span, error, note
from rulecheck.values.record import Mutable, Record, field

_DEEPEST = 120
_MOST_NAMES = 500
"""Among which a misspelt one is looked for."""
_MOST_STEPS = 100_000
"""Of one expression, those of the parameters and functions that it asks for included."""


class Fault(Record):
    """Why an expression has no value; `problem` is None where that is no mistake."""

    what: str
    problem: Problem | None = None
    cycle: bool = False


Outcome = float | Fault
Lookup = Callable[[str], Outcome | None]


class Scope(Mutable):
    """One definition in use: the top level, or one instance of a subcircuit.

    Names are looked up here, then in the scope in which the definition stands.
    """

    definition: Definition
    parent: "Scope | None" = None
    overrides: "Mapping[str, tuple[Formula, Scope]]" = field(default_factory=dict)
    """By lower-case name: what the instance states, with the scope in which it is computed."""
    cache: dict[str, Outcome] = field(default_factory=dict)
    busy: list[str] = field(default_factory=list)
    models: dict[str, Model | None] = field(default_factory=dict)

    def definition_of(self, name: str) -> "tuple[Definition, Scope] | None":
        """The subcircuit of that lower-case name, and the scope in which it is defined."""
        scope: Scope | None = self
        while scope is not None:
            found = scope.definition.inner.get(name)
            if found is not None:
                return found, scope
            scope = scope.parent
        return None


class _Effort(Mutable):
    """What one expression has cost so far: functions that call each other can double it a step."""

    depth: int = 0
    steps: int = 0


def compute(formula: Formula, scope: Scope) -> Outcome:
    """The value of an expression; a Fault where it has none."""
    return _run(formula, scope, {}, _Effort())


def _run(
    formula: Formula, scope: Scope, arguments: Mapping[str, Outcome], effort: _Effort
) -> Outcome:
    program = compile_formula(formula.text)
    if isinstance(program, NoFormula):
        return _unreadable(formula, program)
    effort.steps += len(program)
    if effort.depth > _DEEPEST:
        return _fault(formula.span(), "the expression refers to itself, or too deep", _UNRAVEL)
    if effort.steps > _MOST_STEPS:
        what = f"the expression takes more than {_MOST_STEPS} steps"
        return _fault(formula.span(), what, "write its value as a number")
    effort.depth += 1
    outcome = _steps(program, formula, scope, arguments, effort)
    effort.depth -= 1
    return outcome


def _steps(
    program: Program,
    formula: Formula,
    scope: Scope,
    arguments: Mapping[str, Outcome],
    effort: _Effort,
) -> Outcome:
    stack: list[Outcome] = []
    for step in program:
        if step.kind == NUMBER:
            stack.append(step.number)
            continue
        if step.kind == NAME:
            stack.append(_name(step, formula, scope, arguments, effort))
            continue
        operands = stack[len(stack) - step.count :]
        del stack[len(stack) - step.count :]
        stack.append(_apply(step, operands, formula, scope, effort))
    return stack[-1]


_UNRAVEL = "break the cycle: give one of its parameters a number"


def _unreadable(formula: Formula, reason: NoFormula) -> Fault:
    if reason.behavioural:
        return Fault(reason.what)
    span = formula.span(reason.position)
    return _fault(span, f"{reason.what}: '{formula.text}'", "correct the expression")


def _name(
    step: Step, formula: Formula, scope: Scope, arguments: Mapping[str, Outcome], effort: _Effort
) -> Outcome:
    name = step.word.lower()
    if name in arguments:
        return arguments[name]
    found = _parameter(name, scope, effort)
    if found is not None:
        return found
    if name in CONSTANTS:
        return CONSTANTS[name]
    if name in RUNNING:
        return Fault(f"depends on {name}, which only a simulation knows")
    if beyond_numbers(step.word):
        what = f"'{step.word}' is beyond what a number can hold"
        return _fault(formula.span(step.position), what, "write the number that is meant")
    close = difflib.get_close_matches(name, _alike(name, _names_in(scope)), 1)
    remedy = f"did you mean '{close[0]}'?" if close else f"define it: .param {step.word}=..."
    return _fault(formula.span(step.position), f"parameter '{step.word}' is not defined", remedy)


def _alike(name: str, names: list[str]) -> list[str]:
    """Few names that begin or end alike: a close look at all costs too much in a large file."""
    near = (
        known
        for known in names[:_MOST_NAMES]
        if abs(len(known) - len(name)) < 4
        and (known[:2] == name[:2] or known[-2:] == name[-2:] or len(name) < 4)
    )
    return list(itertools.islice(near, 20))


def _names_in(scope: Scope | None) -> list[str]:
    names: list[str] = []
    while scope is not None:
        names += [*scope.definition.parameters, *scope.overrides]
        scope = scope.parent
    return names


def has_parameter(name: str, scope: Scope) -> bool:
    """Whether a lower-case name is a parameter here."""
    home: Scope | None = scope
    while home is not None:
        if name in home.definition.parameters or name in home.overrides:
            return True
        home = home.parent
    return False


def _parameter(name: str, scope: Scope | None, effort: _Effort) -> Outcome | None:
    while scope is not None:
        if name in scope.cache:
            return scope.cache[name]
        if name in scope.overrides or name in scope.definition.parameters:
            return _evaluate_parameter(name, scope, effort)
        scope = scope.parent
    return None


def _evaluate_parameter(name: str, scope: Scope, effort: _Effort) -> Outcome:
    override = scope.overrides.get(name)
    formula, home = override or (scope.definition.parameters[name], scope)
    if name in scope.busy:
        return _cycle(scope.busy[scope.busy.index(name) :], scope)
    scope.busy.append(name)
    outcome = _run(formula, home, {}, effort)
    scope.busy.pop()
    scope.cache[name] = outcome
    return outcome


def _cycle(ring: list[str], scope: Scope) -> Fault:
    """Told from the alphabetically first name, whichever was asked for first."""
    start = ring.index(min(ring))
    turned = [*ring[start:], *ring[:start]]
    path = " -> ".join([*turned, turned[0]])
    formula = scope.definition.parameters.get(turned[0])
    span = formula.span() if formula else scope.definition.span
    what = f"parameter '{turned[0]}' depends on itself ({path})"
    return Fault(what, error(span, what, _UNRAVEL), cycle=True)


def _apply(
    step: Step, operands: list[Outcome], formula: Formula, scope: Scope, effort: _Effort
) -> Outcome:
    word = step.word.lower()
    faults = [operand for operand in operands if isinstance(operand, Fault)]
    cycle = next((fault for fault in faults if fault.cycle), None)
    if cycle is not None:
        return cycle
    if step.kind == CHOOSE or (step.kind == CALL and word in CHOOSERS and step.count == 3):
        test, positive, negative = operands
        if isinstance(test, Fault):
            return test
        return positive if test else negative
    if faults:
        return faults[0]
    numbers = [operand for operand in operands if isinstance(operand, float | int)]
    if step.kind == CALL:
        return _call(step, word, numbers, formula, scope, effort)
    return _arithmetic(OPERATORS[step.word], numbers, step, formula)


def _call(
    step: Step, word: str, numbers: list[float], formula: Formula, scope: Scope, effort: _Effort
) -> Outcome:
    user = _user_function(word, scope)
    if user is not None:
        function, home = user
        if len(numbers) != len(function.arguments):
            return _wrong_count(step, formula, str(len(function.arguments)), len(numbers))
        arguments = dict(zip(function.arguments, numbers, strict=True))
        return _run(function.body, home, arguments, effort)
    known = FUNCTIONS.get(word)
    span = formula.span(step.position)
    if known is None:
        what = f"function '{step.word}' is not known here, so '{formula.text}' has no value"
        return Fault(what, note(span, what, "write the number itself"))
    if not known.least <= len(numbers) <= known.most:
        return _wrong_count(step, formula, str(known.least), len(numbers))
    return _arithmetic(known.compute, numbers, step, formula)


def _user_function(word: str, scope: Scope | None) -> tuple[UserFunction, Scope] | None:
    while scope is not None:
        if word in scope.definition.functions:
            return scope.definition.functions[word], scope
        scope = scope.parent
    return None


def _wrong_count(step: Step, formula: Formula, wanted: str, found: int) -> Fault:
    what = f"function '{step.word}' takes {wanted} arguments; here are {found}"
    return _fault(formula.span(step.position), what, "correct the call")


def _arithmetic(
    function: Callable[..., float], numbers: list[float], step: Step, formula: Formula
) -> Outcome:
    try:
        value = float(function(*numbers))
    except (ArithmeticError, ValueError, TypeError):
        value = math.nan
    if math.isfinite(value):
        return value
    shown = ", ".join(f"{number:g}" for number in numbers)
    what = f"'{step.word.removeprefix('unary ')}' of {shown} has no value"
    return _fault(formula.span(step.position), what, "correct the expression or its parameters")


def _fault(span: Span, what: str, remedy: str) -> Fault:
    return Fault(what, error(span, what, remedy))

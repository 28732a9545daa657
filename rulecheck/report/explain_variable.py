"""Why a stiff voltage or current has the range that it has."""

from collections.abc import Iterable

from rulecheck.demand import Demands, Variable
from rulecheck.report.explanation import Entry
from rulecheck.report.figures import figure, range_figure
from rulecheck.report.look import PLAIN, Look
from rulecheck.stage import Stage
from rulecheck.values import Unknown


def variable_entries(
    names: Iterable[str], stage: Stage, demands: Demands, depth: int, look: Look = PLAIN
) -> tuple[Entry, ...]:
    """The named variables and, after each, those that its mean is made of; none twice."""
    known = {variable.name: variable for variable in demands.variables}
    waiting = list(dict.fromkeys(names))
    seen: list[str] = []
    while waiting:
        name = waiting.pop(0)
        if name in seen or name not in known:
            continue
        seen.append(name)
        form = known[name].form
        waiting = [*(form.names if form is not None else ()), *waiting]
    return tuple(
        Entry(name, f"{variable_text(known[name], look)}{_place(name, stage)}", depth)
        for name in seen
    )


def variable_text(variable: Variable, look: Look = PLAIN) -> str:
    """Range, mean as a form, ripple and origin in one sentence."""
    if isinstance(variable.range, Unknown):
        return f"unknown; settle with {variable.range.settle}"
    pieces = [range_figure(variable.range, variable.unit, look)]
    form = variable.form.text() if variable.form is not None else variable.name
    if form != variable.name and form not in variable.origin:
        pieces.append(f"mean {form}")
    if variable.ripple and "ripple" not in variable.origin:
        pieces.append(f"{look.plus_minus}{figure(variable.ripple, variable.unit)} of ripple in it")
    if variable.origin:
        pieces.append(variable.origin)
    return "; ".join(pieces)


def _place(name: str, stage: Stage) -> str:
    """Where the port is described whose quantity this is; nothing for any other quantity."""
    owner = name.partition("(")[2].rstrip(")").partition("/")[0]
    port = next((port for port in stage.ports if port.name == owner), None)
    return f" ({port.span})" if port is not None else ""

"""The stress sheet: what each part is asked for, beside what it is rated for."""

from rulecheck.demand import Demands, Derived
from rulecheck.parts import Part
from rulecheck.report.figures import figure, range_figure
from rulecheck.report.quadrant_result import QuadrantResult
from rulecheck.report.review.review import Row, Table
from rulecheck.report.standing import rated_current, rated_voltage
from rulecheck.stage import Stage
from rulecheck.values import Interval, Unknown, natural_key

_POSITION_HEADS = (
    "Position", "Blocks", "Rated", "Carries", "Rated", "Mean current", "rms current", "Waits for",
)  # fmt: skip
_INDUCTOR_HEADS = (
    "Inductor", "Value", "Current", "Mean", "rms",
    "Ripple, peak to peak", "Rated peak", "Rated rms", "Waits for",
)  # fmt: skip
_CAPACITOR_HEADS = (
    "Capacitor", "Value", "Voltage", "Ripple voltage", "Rated",
    "rms current", "Rated rms", "Waits for",
)  # fmt: skip


def stress_sheet(stage: Stage, demands: Demands, result: QuadrantResult) -> tuple[Table, ...]:
    """A table each of positions, inductors and capacitors; an empty one is left out."""
    tables = (
        Table("Switch positions", _POSITION_HEADS, _positions(demands, result)),
        Table("Inductors and windings", _INDUCTOR_HEADS, _inductors(stage, demands)),
        Table("Capacitors of the power path", _CAPACITOR_HEADS, _capacitors(stage, demands)),
    )
    return tuple(table for table in tables if table.rows)


def _positions(demands: Demands, result: QuadrantResult) -> tuple[Row, ...]:
    rows = []
    for row in result.positions:
        waves = demands.waveforms.positions.get(row.position.name)
        rows.append(Row((
            row.position.name,
            range_figure(row.demand.off_voltage, "V"), rated_voltage(row),
            range_figure(row.demand.on_current, "A"), rated_current(row),
            _derived(waves.mean if waves else None, "A"),
            _derived(waves.rms if waves else None, "A"),
            _waits(waves.mean, waves.rms) if waves else "not said",
        )))  # fmt: skip
    return tuple(rows)


def _inductors(stage: Stage, demands: Demands) -> tuple[Row, ...]:
    rows = []
    for name, waves in sorted(demands.waveforms.inductors.items(), key=lambda i: natural_key(i[0])):
        part = stage.parts.by_name.get(name)
        rows.append(Row((
            name, _value(part, "H"), _stiff(f"i({name})", "A", demands),
            _derived(waves.mean, "A"), _derived(waves.rms, "A"), _derived(waves.ripple, "A"),
            _rated(part, "ratings.current"), _rated(part, "ratings.rms-current"),
            _waits(waves.mean, waves.rms, waves.ripple),
        )))  # fmt: skip
    return tuple(rows)


def _capacitors(stage: Stage, demands: Demands) -> tuple[Row, ...]:
    rows = []
    waveforms = demands.waveforms.capacitors
    for name, waves in sorted(waveforms.items(), key=lambda i: natural_key(i[0])):
        part = stage.parts.by_name.get(name)
        rows.append(Row((
            name, _value(part, "F"), _stiff(f"v({name})", "V", demands),
            _derived(waves.ripple, "V"), _rated(part, "ratings.voltage"),
            _derived(waves.rms, "A"), _rated(part, "ratings.ripple-current"),
            _waits(waves.ripple, waves.rms),
        )))  # fmt: skip
    return tuple(rows)


def _derived(quantity: Derived | None, unit: str) -> str:
    """The range; where something is missing, that the truth lies somewhere within it."""
    if quantity is None:
        return "not worked out"
    text = range_figure(quantity.range, unit)
    return f"within {text}" if quantity.missing and isinstance(quantity.range, Interval) else text


def _waits(*quantities: Derived | None) -> str:
    """What would settle or narrow the numbers of a row."""
    found = [item for quantity in quantities if quantity for item in _open(quantity)]
    return "; ".join(dict.fromkeys(item.settle for item in found if item.settle)) or "nothing"


def _open(quantity: Derived) -> tuple[Unknown, ...]:
    unknown = (quantity.range,) if isinstance(quantity.range, Unknown) else ()
    return (*quantity.missing, *unknown)


def _value(part: Part | None, unit: str) -> str:
    return figure(part.value, unit) if part is not None else "unknown"


def _stiff(name: str, unit: str, demands: Demands) -> str:
    found = next((variable for variable in demands.variables if variable.name == name), None)
    return range_figure(found.range, unit) if found is not None else "not worked out"


def _rated(part: Part | None, path: str) -> str:
    datum = part.data.get(path) if part is not None else None
    if datum is None:
        return "not stated"
    if isinstance(datum.value, Interval):
        return range_figure(datum.value, datum.dimension.value)
    return figure(datum.value, datum.dimension.value)

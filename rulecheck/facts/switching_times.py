"""How often a position switches, and the shortest time that it is on or off."""

from rulecheck.facts.facts import Bounds, Value
from rulecheck.facts.inputs import Inputs
from rulecheck.stage import Position, Switching
from rulecheck.values import Interval, Unknown


def period_of(inputs: Inputs, position: Position) -> Value:
    """Of its leg or of all; a group of diodes alone follows the line, not the switching."""
    group = inputs.group_of_position.get(position.name)
    names = group.positions if group is not None else (position.name,)
    if not any(inputs.position_by_name[name].gated for name in names):
        settle = f"the frequency at which {position.name} commutates"
        return Unknown(f"frequency of {position.name}", settle)
    for switching in _switching(inputs, position):
        if switching.frequency:
            return 1.0 / switching.frequency
    return Unknown("switching frequency", "switching: {frequency: ...}")


def shortest_of(inputs: Inputs, position: Position) -> Value:
    """As the sheet states it; on or off is never longer than half a period at its shortest."""
    for switching in _switching(inputs, position):
        if switching.shortest_pulse:
            return switching.shortest_pulse
    missing = Unknown("shortest on or off time", "switching: {shortest-pulse: ...}")
    period = period_of(inputs, position)
    if not isinstance(period, float):
        return missing
    return Bounds(Interval(0.0, period / 2.0), (missing,))


def _switching(inputs: Inputs, position: Position) -> tuple[Switching, ...]:
    legs = inputs.legs_of_position.get(position.name, ())
    own = (inputs.stage.leg_switching.get(leg) for leg in legs)
    return (*(item for item in own if item is not None), inputs.stage.switching)

"""Of positions with several gates: whether one command serves them all, and whether it may.

matrix leg: three four-quadrant switches to one output, one of them on      two commands each
battery disconnect: one four-quadrant switch, on or off                      one command
"""

from rulecheck.facts.facts import Value
from rulecheck.facts.inputs import Inputs
from rulecheck.stage import DrivenBy, Position
from rulecheck.values import QuadrantSet, Unknown

_ALL = 4
_TRACED = frozenset(
    {DrivenBy.DRIVER, DrivenBy.SOURCE, DrivenBy.ISOLATOR, DrivenBy.CONTROLLER}
    | {DrivenBy.TRANSFORMER, DrivenBy.CONSTANT}
)


def command_count(inputs: Inputs, position: Position) -> Value:
    """How many separate outputs command the position's gates; unknown where one is not traced."""
    found = set()
    for gate in inputs.gates_of_position.get(position.name, ()):
        drive = inputs.stage.gate_drives[gate]
        if drive.output.by not in _TRACED:
            settle = f"the drive of gate {drive.gate} in the netlist"
            return Unknown(f"commands of {position.name}", settle)
        found.add((drive.output.part, drive.output.role))
    return float(len(found))


def takes_turns(inputs: Inputs, position: Position) -> bool | Unknown:
    """Another four-quadrant switch at one of its nets is on only while this one is off."""
    group = inputs.group_of_position.get(position.name)
    if group is None:
        return False
    if not group.analysed:
        return Unknown(f"the states of {position.name}", "what keeps its group from being analysed")
    ends = {position.start, position.end}
    others = [
        other
        for name in group.positions
        if name != position.name
        for other in (inputs.position_by_name[name],)
        if other.gated and ends & {other.start, other.end} and _four_quadrant(inputs, name)
    ]
    return any(
        not any({position.name, other.name} <= set(state.on) for state in group.states)
        for other in others
    )


def _four_quadrant(inputs: Inputs, name: str) -> bool:
    quadrants = inputs.demands.positions[name].quadrants
    return isinstance(quadrants, QuadrantSet) and len(quadrants.numerals) == _ALL

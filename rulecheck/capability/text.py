"""The capabilities as one canonical text, for golden tests and `explain --step capability`."""

from rulecheck.capability.capabilities import Capabilities, Capability, Direction
from rulecheck.values import Unknown, natural_key


def capabilities_text(capabilities: Capabilities) -> str:
    """One block a position: its quadrants, then what it does in each direction."""
    names = sorted(capabilities.positions, key=natural_key)
    return "".join(_block(capabilities.positions[name]) for name in names)


def _block(capability: Capability) -> str:
    return (
        f"{capability.position}  {capability.quadrants.label}\n"
        f"  forward  {_line(capability.forward)}\n"
        f"  reverse  {_line(capability.reverse)}\n"
    )


def _line(direction: Direction) -> str:
    holds = _rating(direction.blocks, direction.blocks_at_least, "V")
    weakest = ", ".join(direction.weakest)
    blocks = f"blocks {holds} by {weakest}" if direction.holds_off else "blocks nothing"
    rated = _rating(direction.current, direction.current_at_least, "A")
    way = "free" if direction.freewheels else "gated"
    through = ", ".join(direction.carried_by)
    carries = (
        f"carries {rated} through {through}, {way}" if direction.carries else "carries nothing"
    )
    missing = "".join(f"; missing {unknown.settle}" for unknown in direction.missing)
    return f"{blocks}; {carries}{missing}"


def _rating(value: float | Unknown, at_least: float, unit: str) -> str:
    if not isinstance(value, Unknown):
        return f"{value:.6g} {unit}"
    return f"unknown, at least {at_least:.6g} {unit}" if at_least else "unknown"

"""What must be true of every part list; tests call it on all that they make."""

from collections import Counter
from collections.abc import Iterator

from rulecheck.parts.edges import is_power_device
from rulecheck.parts.figures import APPLICABLE
from rulecheck.parts.part import Conduction, Edge, Kind, Part, PartList
from rulecheck.parts.roles import required
from rulecheck.values import Unknown


def check_parts(parts: PartList) -> tuple[str, ...]:
    """A sentence for each thing that is wrong with the product itself; none for a sound one."""
    return (*_check_list(parts), *(fault for part in parts.parts for fault in _check_part(part)))


def _check_list(parts: PartList) -> Iterator[str]:
    counts = Counter(part.name for part in parts.parts)
    yield from (f"{name} occurs twice" for name, count in counts.items() if count > 1)
    if set(parts.by_name) != set(counts):
        yield "by_name does not hold exactly the parts"
    unknown = {part.name for part in parts.parts if part.kind is Kind.UNKNOWN}
    if not unknown <= set(parts.not_understood):
        yield "a part of unknown kind is not listed as not understood"
    for core in parts.cores:
        wound = [parts.by_name.get(name) for name in core.windings]
        if len(wound) < 2 or any(p is None or p.kind is not Kind.INDUCTOR for p in wound):
            yield f"core {core.name} is not wound of inductors"
    yield from (
        f"{part.name} is inside {part.module}, which has no inside"
        for part in parts.parts
        if part.module and parts.by_name[part.module].kind not in (Kind.MODULE, Kind.WINDING_SET)
    )


def _check_part(part: Part) -> Iterator[str]:
    roles = {pin.role for pin in part.pins}
    ways = {(edge.tail, edge.head) for edge in part.edges}
    faults = {
        f"lacks pins of a {part.kind}": not set(required(part.kind)) <= roles,
        f"has {len(part.edges)} edges": bool(part.edges) != is_power_device(part.kind),
        "has an edge off its pins": not {net for way in ways for net in way} <= set(part.nets),
        "has an edge one way only": ways != {(head, tail) for tail, head in ways},
        "has an edge of another name": any(edge.part != part.name for edge in part.edges),
        "has an edge that cannot be": not all(_possible(edge) for edge in part.edges),
        "does not say where to state what is missing": not part.settle_in,
        "states what its kind does not have": not set(part.data) <= set(APPLICABLE[part.kind]),
    }
    yield from (f"{part.name} {fault}" for fault, found in faults.items() if found)


def _possible(edge: Edge) -> bool:
    """A free direction blocks nothing, and nothing blocks less than that."""
    if edge.conduction is Conduction.FREE:
        return edge.blocks == 0.0
    return isinstance(edge.blocks, Unknown) or edge.blocks >= 0.0

"""The quadrant table as one JSON object."""

import json
from typing import TextIO

from rulecheck.demand import Group, Leg
from rulecheck.report.figures import json_number, json_range
from rulecheck.report.look import PLAIN, Look
from rulecheck.report.quadrant_result import PositionResult, QuadrantResult
from rulecheck.values import QuadrantSet, Unknown


def render(result: QuadrantResult, stream: TextIO, look: Look = PLAIN) -> None:
    """Write the object; unknown numbers are null, an unbounded end of a range too."""
    del look
    json.dump(_document(result), stream, indent=1, ensure_ascii=False)
    stream.write("\n")


def _document(result: QuadrantResult) -> dict[str, object]:
    return {
        "netlist": result.netlist,
        "positions": [_position(row) for row in result.positions],
        "legs": [_leg(leg) for leg in result.legs],
        "groups": [_group(group) for group in result.groups],
        "undetermined": [
            {"what": item.what, "settle_with": item.settle_with} for item in result.undetermined
        ],
        "assumed": list(result.assumed),
        "not_covered": list(result.not_covered),
    }


def _position(row: PositionResult) -> dict[str, object]:
    forward, reverse = row.capability.forward, row.capability.reverse
    return {
        "name": row.position.name,
        "parts": list(row.position.parts),
        "from": row.position.start,
        "to": row.position.end,
        "demand": {
            "off_voltage": json_range(row.demand.off_voltage),
            "on_current": json_range(row.demand.on_current),
            **_quadrants(row.needs),
        },
        "capability": {
            **_quadrants(row.capability.quadrants),
            "blocks": {
                "forward": json_number(forward.blocks),
                "reverse": json_number(reverse.blocks),
            },
            "carries": {
                "forward": json_number(forward.current),
                "reverse": json_number(reverse.current),
            },
        },
        "covered": row.covered,
    }


def _quadrants(quadrants: QuadrantSet | Unknown) -> dict[str, object]:
    if isinstance(quadrants, Unknown):
        return {"quadrants": None, "class": None}
    return {"quadrants": list(quadrants.numerals), "class": quadrants.class_name}


def _leg(leg: Leg) -> dict[str, object]:
    return {
        "name": leg.name,
        "kind": leg.kind,
        "midpoint": leg.midpoint,
        "rails": list(leg.rails),
        "high": list(leg.high),
        "low": list(leg.low),
        "levels": leg.levels,
    }


def _group(group: Group) -> dict[str, object]:
    return {
        "positions": list(group.positions),
        "legal_states": len(group.states) if group.analysed else None,
    }

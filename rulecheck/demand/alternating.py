"""Which inductors carry no DC, whatever else is known of their current."""

from collections.abc import Iterator

from rulecheck.stage import BranchKind, Stage

_NO_DC = (["inductor", "winding"], ["capacitor", "inductor"])
"""What stands alone on a net where an inductor ends, so that the inductor carries no DC."""


def alternating_parts(stage: Stage) -> frozenset[str]:
    """Inductors in series with a winding or with a capacitor alone: they carry no DC."""
    at_net: dict[str, list[tuple[str, str]]] = {}
    for kind, name, nets in _touching(stage):
        for net in nets:
            at_net.setdefault(net, []).append((kind, name))
    return frozenset(
        name
        for touching in at_net.values()
        if sorted(kind for kind, _ in touching) in _NO_DC
        for kind, name in touching
        if kind == "inductor"
    )


def _touching(stage: Stage) -> Iterator[tuple[str, str, tuple[str, str]]]:
    kinds = {BranchKind.VOLTAGE: "capacitor", BranchKind.CURRENT: "inductor"}
    for branch in stage.branches:
        kind = kinds.get(branch.kind, "load") if branch.part else "port"
        yield kind, branch.part, (branch.start, branch.end)
    for core in stage.transformers:
        for pair in core.windings:
            yield "winding", core.name, pair
    for position in stage.positions:
        yield "position", position.name, (position.start, position.end)

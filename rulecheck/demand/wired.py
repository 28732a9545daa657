"""Other readings of a stage that cannot work as it stands.

A small inductor in series with a winding is stiff where the far side of the transformer is
voltage-stiff; where it is current-stiff, no state could carry power, and the inductor is read
as a wire: its ringing and the overlap of commutation are then not covered.
"""

from collections.abc import Iterable

from rulecheck.stage import Branch, BranchKind, Position, Role, Stage, Transformer
from rulecheck.values import Unknown, natural_key
from rulecheck.values.record import replace


def wire_leakages(stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    """The stage with every inductor in series with a winding merged away, and what to say."""
    leakages = [b for b in stage.branches if _in_series_with_winding(stage, b)]
    if not leakages:
        return stage, ()
    gone = {branch.name for branch in leakages}
    merge: dict[str, str] = {}
    for branch in leakages:
        first, second = _final(merge, branch.start), _final(merge, branch.end)
        if first != second:
            merge[second] = first
    sentences = tuple(
        f"{b.name} read as the leakage of a transformer and taken as a wire: its ringing and the "
        "overlap of commutation are not covered"
        for b in leakages
    )
    branches = tuple(_moved(b, merge) for b in stage.branches if b.name not in gone)
    positions = tuple(_moved_position(p, merge) for p in stage.positions)
    cores = tuple(_moved_core(core, merge) for core in stage.transformers)
    return replace(stage, branches=branches, positions=positions, transformers=cores), sentences


def _final(merge: dict[str, str], net: str) -> str:
    while net in merge:
        net = merge[net]
    return net


def _moved(branch: Branch, merge: dict[str, str]) -> Branch:
    return replace(branch, start=_final(merge, branch.start), end=_final(merge, branch.end))


def _moved_position(position: Position, merge: dict[str, str]) -> Position:
    edges = tuple(
        replace(edge, tail=_final(merge, edge.tail), head=_final(merge, edge.head))
        for edge in position.edges
    )
    start, end = _final(merge, position.start), _final(merge, position.end)
    return replace(position, start=start, end=end, edges=edges)


def _moved_core(core: Transformer, merge: dict[str, str]) -> Transformer:
    windings = tuple((_final(merge, a), _final(merge, b)) for a, b in core.windings)
    return replace(core, windings=windings)


def _in_series_with_winding(stage: Stage, branch: Branch) -> bool:
    """An inductor of which one net has nothing but it and a winding."""
    if branch.kind is not BranchKind.CURRENT or not branch.part or branch.given is not None:
        return False
    winding_nets = [net for core in stage.transformers for pair in core.windings for net in pair]
    for net in (branch.start, branch.end):
        others = [b for b in stage.branches if b is not branch and net in (b.start, b.end)]
        devices = [p for p in stage.positions if net in (p.start, p.end)]
        if winding_nets.count(net) == 1 and not others and not devices:
            return True
    return False


def separate_coupled(stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    """The stage with the windings of coupled chokes read as inductors of their own.

    Two windings alone on a core that start from one net without a switch share what this net
    takes: the current through both does not magnetise the core, so only their leakage, which an
    ideal transformer lacks, keeps it.
    """
    cores, chokes, sentences = [], [], []
    switched = {net for p in stage.positions for net in (p.start, p.end)}
    for core in stage.transformers:
        shared = set(core.windings[0]).intersection(*core.windings[1:]) - switched
        if len(core.windings) != 2 or not shared or core.windings[0] == core.windings[1]:
            cores.append(core)
            continue
        chokes += [
            _as_inductor(stage, *item) for item in zip(core.parts, core.windings, strict=True)
        ]
        names = " and ".join(core.parts)
        sentences.append(
            f"{names} read as inductors of their own: the current that they share is "
            "kept by their leakage, and the coupling's part of the ripple is left out"
        )
    branches = tuple(sorted((*stage.branches, *chokes), key=lambda b: natural_key(b.name)))
    return replace(stage, transformers=tuple(cores), branches=branches), tuple(sentences)


def _as_inductor(stage: Stage, part: str, ends: tuple[str, str]) -> Branch:
    value = stage.parts.by_name[part].value
    henry = None if isinstance(value, Unknown) else value
    given = stage.given.get(part)
    return Branch(part, BranchKind.CURRENT, ends[0], ends[1], henry, part, "", given)


def without_magnetising(stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    """The stage with leakages wired and the magnetising current of clamped cores neglected."""
    stage, sentences = wire_leakages(stage)
    clamped = {
        stage.merged.get(net, net)
        for name, role in stage.roles.items()
        if role is Role.CLAMP
        for net in stage.parts.by_name[name].nets
    }
    cores = []
    for core in stage.transformers:
        nets = {net for pair in core.windings for net in pair}
        if nets & clamped and not core.ideal:
            core = replace(core, ideal=True)
            sentences += (
                f"the magnetising current of {core.name} is left to the clamp at its winding: "
                "the clamp's voltage is not covered",
            )
        cores.append(core)
    return replace(stage, transformers=tuple(cores)), sentences


def without_followers(stage: Stage, capacitors: Iterable[str]) -> tuple[Stage, tuple[str, ...]]:
    """The stage without these capacitors: their voltage follows what diodes connect them to.

    A filter capacitor behind the diode bridge of a power-factor stage is stiff for the switching
    frequency only, and at the line frequency it has the rectified voltage.
    """
    names = frozenset(capacitors)
    sentences = tuple(
        f"{name} taken to follow the voltage that the diodes before it connect it to"
        for name in sorted(names)
    )
    branches = tuple(b for b in stage.branches if b.name not in names)
    return replace(stage, branches=branches), sentences

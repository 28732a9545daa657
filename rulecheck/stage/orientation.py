"""Rough mean potentials of nets, used only to choose which end of a symmetric position is named
first: the net with the higher average potential.

    port voltage 42 V ... 58 V between BAT and PGND      BAT lies 50 V over PGND
    an inductor or a winding from SW to BAT              SW lies where BAT lies
"""

from collections.abc import Iterable, Mapping

from rulecheck.stage.stage import Branch, BranchKind, Transformer


def mean_potentials(
    branches: Iterable[Branch], transformers: Iterable[Transformer], ground: str
) -> Mapping[str, float]:
    """Volts over ground of every net that stated voltages and inductors tie to it."""
    steps: dict[str, list[tuple[str, float]]] = {}

    def tie(first: str, second: str, volts: float) -> None:
        steps.setdefault(first, []).append((second, -volts))
        steps.setdefault(second, []).append((first, volts))

    for branch in branches:
        if branch.kind is BranchKind.VOLTAGE and branch.given is not None:
            tie(branch.start, branch.end, branch.given.middle if branch.given.bounded else 0.0)
        elif branch.kind is BranchKind.CURRENT and branch.part:
            tie(branch.start, branch.end, 0.0)
    for transformer in transformers:
        for first, second in transformer.windings:
            tie(first, second, 0.0)
    potentials = {ground: 0.0}
    frontier = [ground]
    for net in frontier:
        for other, volts in steps.get(net, ()):
            if other not in potentials:
                potentials[other] = potentials[net] + volts
                frontier.append(other)
    return potentials

"""The stage as one canonical text: ports, positions, branches, transformers, roles.

port battery dc BAT PGND voltage [42, 58] V current [-80, 80] A
position Q1 BUS -> SW parts Q1 gated free-reverse
"""

from collections.abc import Iterator

from rulecheck.stage.position import Position
from rulecheck.stage.stage import Branch, Port, Stage
from rulecheck.values import Interval


def stage_text(stage: Stage) -> str:
    """One line a record, in the order in which the stage holds them."""
    return "".join(f"{line}\n" for line in _lines(stage))


def _lines(stage: Stage) -> Iterator[str]:
    yield from (_port(port) for port in stage.ports)
    yield from (_position(position) for position in stage.positions)
    yield from (_branch(branch) for branch in stage.branches)
    for core in stage.transformers:
        windings = " ".join(
            f"{name}({start} {end} turns {turns / core.turns[0]:.6g})"
            for name, (start, end), turns in zip(core.parts, core.windings, core.turns, strict=True)
        )
        yield f"transformer {core.name} {windings}"
    for name, role in stage.roles.items():
        at = stage.role_of.get(name)
        yield f"role {name} {role}" + (f" of {at}" if at else "")
    for net, kept in sorted(stage.merged.items()):
        if net != kept:
            yield f"net {net} merged into {kept}"
    yield from (f"assumed {line}" for line in stage.assumed)
    yield from (f"not covered {line}" for line in stage.not_covered)


def _port(port: Port) -> str:
    words = ["port", port.name, port.kind.value, *port.nets]
    for label, span, unit in (
        ("voltage", port.voltage, "V"),
        ("current", port.current, "A"),
        ("power", port.power, "W"),
        ("frequency", port.frequency, "Hz"),
    ):
        if span is not None:
            words.append(f"{label} {_range(span)} {unit}")
    return " ".join(words)


def _range(span: Interval) -> str:
    return f"[{span.low:.6g}, {span.high:.6g}]"


def _position(position: Position) -> str:
    words = ["position", position.name, position.start, "->", position.end]
    words += ["parts", *position.parts]
    words += ["gated"] if position.gated else []
    words += ["free-forward"] if position.free_forward else []
    words += ["free-reverse"] if position.free_reverse else []
    return " ".join(words)


def _branch(branch: Branch) -> str:
    value = "?" if branch.value is None else f"{branch.value:.6g}"
    given = "" if branch.given is None else f" given {_range(branch.given)}"
    return f"{branch.kind} {branch.name} {branch.start} {branch.end} {value}{given}"

"""The circuit as one canonical text, a line an element."""

from collections.abc import Iterator

from rulecheck.netlist.circuit import Circuit, Element
from rulecheck.values import Unknown


def circuit_text(circuit: Circuit) -> str:
    """Title, elements in order, subcircuits, grounds, unread names and problems."""
    return "\n".join(_lines(circuit)) + "\n"


def _lines(circuit: Circuit) -> Iterator[str]:
    yield f"title {circuit.title}".rstrip()
    for element in circuit.elements:
        yield _element(element)
    for subcircuit in circuit.subcircuits.values():
        ports = " ".join(subcircuit.ports)
        yield f"subcircuit {subcircuit.name} ({ports}) at {subcircuit.span}"
    if circuit.grounds:
        yield f"grounds {' '.join(circuit.grounds)}"
    if circuit.unread:
        yield f"unread {' '.join(circuit.unread)}"
    for problem in circuit.problems:
        yield problem.line()


def _element(element: Element) -> str:
    pieces = [f"{element.name} {element.letter} ({' '.join(element.nets)})"]
    if not isinstance(element.value, Unknown):
        pieces.append(f"value={element.value:.9g}")
    if element.text:
        pieces.append(f"text={element.text!r}")
    if element.model is not None:
        pieces.append(f"model={element.model.name}:{element.model.type}")
    if element.waveform is not None:
        values = " ".join(f"{value:.9g}" for value in element.waveform.values)
        pieces.append(f"{element.waveform.kind}({values})")
    if element.controls:
        pieces.append(f"controlled by {' '.join(element.controls)}")
    pieces.extend(f"{key}={_shown(value)}" for key, value in sorted(element.parameters.items()))
    chain = "".join(f" in {span}" for span in reversed(element.instance_chain))
    return f"{' '.join(pieces)} at {element.span}{chain}"


def _shown(value: float | str) -> str:
    return repr(value) if isinstance(value, str) else f"{value:.9g}"

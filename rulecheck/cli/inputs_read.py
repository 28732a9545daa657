"""The files of an analysis with their lines and hashes, for a document that quotes them."""

import hashlib
from pathlib import Path

from rulecheck.pipeline import Analysis
from rulecheck.reading import decode
from rulecheck.report.review import InputFile


def inputs_read(analysis: Analysis, project: str) -> tuple[InputFile, ...]:
    """Every file that was read, the netlist first; one that has gone since is left out."""
    files = dict.fromkeys((*analysis.inputs, *((project,) if project else ())))
    found = (_input(file, _role(file, analysis, project)) for file in files)
    return tuple(entry for entry in found if entry is not None)


def _role(file: str, analysis: Analysis, project: str) -> str:
    if file == project:
        return "project file"
    named = {analysis.netlist: "netlist", analysis.stage.sheet: "stage sheet"}
    circuit = {element.span.file for element in analysis.circuit.elements}
    return named.get(file) or ("include" if file in circuit else "part data")


def _input(file: str, role: str) -> InputFile | None:
    try:
        data = Path(file).read_bytes()
    except OSError:
        return None
    lines = tuple(decode(data).split("\n"))
    return InputFile(file, role, hashlib.sha256(data).hexdigest(), lines)

"""What is fed with any bytes at all, and what must hold of every answer.

A target takes bytes and raises where the tool would have failed its user: by an exception, by a
problem without a place or a remedy, or by a text that would steer a terminal.
"""

import io
import json
import re
from collections import Counter
from collections.abc import Callable, Iterable, Mapping
from functools import cache
from pathlib import Path

from rulecheck.cli.project import ProjectFile
from rulecheck.facts import VOCABULARY, Facts
from rulecheck.netlist import circuit_text, read_circuit_text
from rulecheck.parts import read_part_data
from rulecheck.pipeline import Analysis, analyse_text
from rulecheck.reading import SourceText, decode, read_yaml
from rulecheck.report.lint_json import render as render_json
from rulecheck.report.lint_lines import render as render_lines
from rulecheck.report.lint_result import LintRun, lint_report, open_points
from rulecheck.rulebook import Rulebook, judge, load_packs, packs_in_force
from rulecheck.rulebook.binding import bind
from rulecheck.rulebook.parsing import parse_condition
from rulecheck.rulebook.record import read_record
from rulecheck.rulebook.scope import OWN, Bound, Scene
from rulecheck.rulebook.tree import Flaw
from rulecheck.stage import read_sheet
from rulecheck.values import Problem

ROOT = Path(__file__).resolve().parents[2]
FOLDER = ROOT / "tests" / "fuzz" / "included"
"""Where the fuzzed netlist stands: what it includes is found here, or nowhere."""
MOST_WORDS = 400
BETWEEN = "\n%%%%\n"
"""Parts the netlist from its sheet and its part data in one input of `whole`."""

# The smallest stage that has a subject of nearly every kind.
_STAGE = SourceText(
    str(FOLDER / "leg.cir"),
    "leg\nV1 BUS 0 58\nM1 BUS G1 SW SW FET\nM2 SW G2 0 0 FET\nL1 SW OUT 10u\nC1 OUT 0 10u\n"
    "R1 OUT 0 1\nVG1 G1 SW PULSE(0 10 0 1n 1n 5u 10u)\nVG2 G2 0 PULSE(10 0 0 1n 1n 5u 10u)\n"
    ".model FET VDMOS(Vds=100)\n",
)


def netlist(data: bytes) -> None:
    """The netlist reader, on a file of these bytes."""
    text = decode(data)
    circuit = read_circuit_text(SourceText(str(FOLDER / "hut.cir"), text))
    circuit_text(circuit)
    check_problems(circuit.problems)


def yaml(data: bytes) -> None:
    """One reader of YAML or of records, chosen by the first letter, on a file of the rest."""
    source = SourceText("hut.yaml", decode(data[1:]))
    read = _READERS["PQRST"[(data or b"P")[0] % 5]]
    check_problems(read(source))


def _record_problems(source: SourceText) -> tuple[Problem, ...]:
    record = read_record(source)
    return (record,) if isinstance(record, Problem) else ()


_READERS: Mapping[str, Callable[[SourceText], tuple[Problem, ...]]] = {
    "S": lambda source: read_sheet(source).problems,
    "P": lambda source: read_part_data([source]).problems,
    "Q": lambda source: read_yaml(source, ProjectFile).problems,
    "R": lambda source: load_packs([source]).problems,
    "T": _record_problems,
}


def condition(data: bytes) -> None:
    """The condition language: parsed, bound to every kind of subject, run on a small stage."""
    text = data.decode("utf-8", "replace")
    node = parse_condition(text)
    if isinstance(node, Flaw):
        assert 0 <= node.at <= len(text), node
        assert node.what, node
        assert node.remedy, node
        return
    facts, book = _facts(), _rulebook()
    for kind in VOCABULARY:
        bound = bind(node, kind, book.parameters)
        if isinstance(bound, Bound):
            for subject in facts.of_kind(kind)[:2]:
                bound.run(Scene(facts, {OWN: subject}))
        else:
            assert all(0 <= flaw.at <= len(text) and flaw.remedy for flaw in bound), bound


def whole(data: bytes) -> None:
    """Netlist, sheet and part data through all steps, the rules and two reports."""
    netlist, sheet, parts, *_ = [*decode(data).split(BETWEEN, 2), "", ""]
    sources = [SourceText("hut.parts.yaml", parts)] if parts else []
    analysis = analyse_text(
        SourceText(str(FOLDER / "hut.cir"), netlist),
        SourceText("hut.stage.yaml", sheet) if sheet else None,
        sources,
    )
    check_problems(analysis.problems)
    if isinstance(analysis, Analysis):
        check_reports(analysis)


def check_problems(problems: Iterable[Problem]) -> None:
    for problem in problems:
        assert min(problem.span.line, problem.span.column) >= 1, problem
        assert problem.what, problem


def check_reports(analysis: Analysis) -> None:
    """JSON that standard readers take, and lines that leave a terminal as it was."""
    book = _rulebook()
    verdicts = judge(book, analysis.facts)
    points = open_points(analysis.stage, analysis.demands, analysis.problems)
    run = LintRun((lint_report(verdicts, points),), book.rules, "error", False, (), {}, ())
    lines, data = io.StringIO(), io.StringIO()
    render_lines(run, lines)
    assert all(line.isprintable() for line in lines.getvalue().split("\n"))
    render_json(run, data)
    json.loads(data.getvalue(), parse_constant=_no_constant)


def _no_constant(name: str) -> None:
    raise AssertionError(f"{name} is no JSON")


@cache
def _rulebook() -> Rulebook:
    return load_packs(packs_in_force())


@cache
def _facts() -> Facts:
    analysis = analyse_text(_STAGE)
    assert isinstance(analysis, Analysis), analysis
    return analysis.facts


TARGETS: Mapping[str, Callable[[bytes], None]] = {
    "netlist": netlist,
    "yaml": yaml,
    "condition": condition,
    "whole": whole,
}


def seeds(target: str) -> list[bytes]:
    """Where to begin: the files of that sort in this repository."""
    return _SEEDS[target]()


def _netlists() -> list[bytes]:
    return [path.read_bytes() for path in sorted((ROOT / "tests").rglob("*.cir"))]


def _yaml_files() -> list[bytes]:
    files = [*(ROOT / "tests").rglob("*.yaml"), *(ROOT / "rules").rglob("*.yaml")]
    return [_reader_of(path).encode() + path.read_bytes() for path in sorted(files)]


def _reader_of(path: Path) -> str:
    if ".stage." in path.name:
        return "S"
    if ".parts." in path.name:
        return "P"
    return "R" if path.is_relative_to(ROOT / "rules") else "Q"


def _conditions() -> list[bytes]:
    texts = {text for rule in _rulebook().rules for text in rule.texts.values()}
    return [text.encode() for text in sorted(texts)]


def _stages() -> list[bytes]:
    found = []
    for path in sorted((ROOT / "tests" / "circuits").rglob("*.cir")):
        sheet, parts = path.with_suffix(".stage.yaml"), path.with_suffix(".parts.yaml")
        texts = [decode(one.read_bytes()) if one.exists() else "" for one in (path, sheet, parts)]
        found.append(BETWEEN.join(texts).encode())
    return found


_SEEDS: Mapping[str, Callable[[], list[bytes]]] = {
    "netlist": _netlists,
    "yaml": _yaml_files,
    "condition": _conditions,
    "whole": _stages,
}


def words(target: str) -> list[str]:
    """The words that the seeds use most, for a fuzzer's dictionary."""
    found = Counter(re.findall(r"[.\w][\w-]+", b" ".join(seeds(target)).decode("utf-8", "replace")))
    return [word for word, _ in found.most_common(MOST_WORDS) if word.isascii()]

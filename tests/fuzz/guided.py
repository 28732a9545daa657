"""Coverage-guided fuzzing of one target, for as long as asked.

    python -m tests.fuzz.guided netlist --seconds 900 --corpus DIR

Needs atheris, which is no dependency of the tests: `pip install -e '.[test,fuzz]'`. An input that
fails is written into DIR/findings once for each place of failure, and the run goes on.
"""

import argparse
import hashlib
import sys
import time
import traceback
from pathlib import Path
from typing import Any

import atheris

with atheris.instrument_imports(include=["rulecheck"]):
    from tests.fuzz.targets import TARGETS, seeds, words

SLOW = 5.0
"""Seconds of processor time for one input of at most LONGEST bytes; more is a finding."""
LONGEST = 4096


class _Watch:
    """Counts the inputs of a run, and keeps those that fail, one for each place of failure."""

    def __init__(self, target: str, findings: Path) -> None:
        self.run = TARGETS[target]
        self.target = target
        self.findings = findings
        self.inputs = 0
        self.failures: dict[str, str] = {}

    def __call__(self, data: bytes) -> None:
        self.inputs += 1
        start = time.process_time()
        try:
            self.run(data)
        except Exception as failure:
            self.keep(data, _place(failure), "".join(traceback.format_exception(failure)))
        spent = time.process_time() - start
        if spent > SLOW:
            self.keep(data, "slow", f"{spent:.1f} s of processor time\n")

    def keep(self, data: bytes, place: str, words: str) -> None:
        if place in self.failures:
            return
        self.failures[place] = words
        mark = hashlib.sha256(place.encode()).hexdigest()[:12]
        self.findings.mkdir(parents=True, exist_ok=True)
        (self.findings / f"{self.target}-{mark}").write_bytes(data)
        (self.findings / f"{self.target}-{mark}.txt").write_text(words, encoding="utf-8")
        print(f"finding {self.target}-{mark}: {words.splitlines()[-1]}", flush=True)


def _place(failure: Exception) -> str:
    """The kind of failure and the innermost lines of this program: one name for one bug."""
    frames = traceback.extract_tb(failure.__traceback__)
    own = [f"{frame.filename}:{frame.lineno}" for frame in frames if "rulecheck" in frame.filename]
    return " ".join([type(failure).__name__, *own[-2:]])


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("target", choices=list(TARGETS))
    parser.add_argument("--seconds", type=int, default=600)
    parser.add_argument("--corpus", type=Path, required=True, help="kept between runs")
    arguments: Any = parser.parse_args()
    corpus = arguments.corpus / arguments.target
    corpus.mkdir(parents=True, exist_ok=True)
    for seed in seeds(arguments.target):
        if len(seed) <= LONGEST:
            (corpus / hashlib.sha256(seed).hexdigest()[:16]).write_bytes(seed)
    watch = _Watch(arguments.target, arguments.corpus / "findings")
    dictionary = arguments.corpus / f"{arguments.target}.words"
    dictionary.write_text("".join(f'"{word}"\n' for word in words(arguments.target)))
    options = [
        f"-dict={dictionary}",
        f"-max_total_time={arguments.seconds}",
        f"-max_len={LONGEST}",
        "-timeout=120",
        "-rss_limit_mb=3000",
        "-print_final_stats=1",
        f"-artifact_prefix={arguments.corpus / 'findings'}/{arguments.target}-",
    ]
    watch.findings.mkdir(parents=True, exist_ok=True)
    atheris.Setup([sys.argv[0], *options, str(corpus)], watch)
    atheris.Fuzz()


if __name__ == "__main__":
    main()

"""YAML validated against a typed shape: all mistakes of a file in one run, each at its place."""

from typing import Generic, TypeVar

import msgspec

from rulecheck.reading.branches import Branch, grow
from rulecheck.reading.complaints import ANY_KEY, Complaint, explain, parse_complaint
from rulecheck.reading.schema import Path
from rulecheck.reading.text import SourceText
from rulecheck.values import Problem, Span, error
from rulecheck.values.record import Record, field

T = TypeVar("T")
_MOST_ERRORS = 200


class YamlReading(Record, Generic[T]):
    """What could be read: the value without its faulty entries, None where nothing is left."""

    value: T | None
    problems: tuple[Problem, ...]
    file: str
    root: Branch | None = field(default=None)

    def span(self, path: Path) -> Span:
        """Where the entry stands: a mapping entry's key, a list's item; else its nearest parent."""
        branch = self.root
        span = branch.span if branch else Span(self.file, 1)
        for step in path:
            branch = branch.child(step) if branch else None
            if branch is None:
                return span
            span = branch.key_span
        return span


class _Refusal(Record):
    """The library's message."""

    said: str


def read_yaml(source: SourceText, shape: type[T]) -> YamlReading[T]:
    """Read a file as `shape`; a faulty entry is reported, left out, and the rest read on."""
    root, problems = grow(source)
    if root is None:
        return YamlReading(None, problems, source.file)
    value, complaints = _convert(root.copy(), shape)
    found = sorted((*problems, *complaints), key=lambda problem: (problem.span, problem.what))
    return YamlReading(value, tuple(found), source.file, root)


def _convert(root: Branch, shape: type[T]) -> tuple[T | None, list[Problem]]:
    problems: list[Problem] = []
    pruned: set[tuple[Span, str | int]] = set()
    while len(problems) < _MOST_ERRORS:
        value = _attempt(root, shape)
        if not isinstance(value, _Refusal):
            return value, problems
        complaint = parse_complaint(value.said)
        trail = _trail(root, complaint, value.said, shape)
        if _read_otherwise(trail[-1][1], complaint):
            continue
        problem = _problem(trail, complaint, shape, pruned)
        if problem is not None:
            problems.append(problem)
        if not _prune(trail, complaint, pruned):
            return None, problems
    return None, problems


Trail = list[tuple[str | int, Branch]]
"""The steps from the root to a place, each with its branch; the root's own step is ''."""


def _trail(root: Branch, complaint: Complaint, said: str, shape: type) -> Trail:
    trail: Trail = [("", root)]
    for step in complaint.steps:
        branch = trail[-1][1]
        if step == ANY_KEY:
            step = _culprit(root, branch, said, shape)
        inner = branch.child(step)
        if inner is None:
            break
        trail.append((step, inner))
    return trail


def _culprit(root: Branch, branch: Branch, said: str, shape: type) -> str:
    """The first key of a mapping whose value the library complains about.

    The library checks in order, so the shortest run of first entries that still gives the
    same complaint ends with the faulty one: found by halving.
    """
    entries = list((branch.mapping or {}).items())
    low, high = 0, len(entries)
    while high - low > 1:
        middle = (low + high) // 2
        branch.mapping = dict(entries[:middle])
        same = _attempt(root, shape) == _Refusal(said)
        low, high = (low, middle) if same else (middle, high)
    branch.mapping = dict(entries)
    return entries[low][0]


def _attempt(root: Branch, shape: type[T]) -> T | _Refusal:
    try:
        return msgspec.convert(root.data(), shape)
    except msgspec.ValidationError as reason:
        return _Refusal(str(reason))


def _read_otherwise(branch: Branch, complaint: Complaint) -> bool:
    """Take a plain scalar as the text or number that the shape wants: `1e-9`, a net called 0."""
    types = complaint.types
    scalar = branch.mapping is None and branch.sequence is None
    if types is None or not scalar or branch.quoted or branch.instead is not None:
        return False
    wanted, got = types
    if "str" in wanted and got in ("int", "float", "bool"):
        branch.instead = branch.text
        return True
    return False


def _problem(
    trail: Trail, complaint: Complaint, shape: type, pruned: set[tuple[Span, str | int]]
) -> Problem | None:
    branch = trail[-1][1]
    if complaint.missing_key is not None and (branch.span, complaint.missing_key) in pruned:
        return None  # it was there, and is reported already
    path = tuple(step for step, _ in trail[1:])
    what, remedy = explain(complaint, path, shape)
    return error(_place(trail, complaint), what, remedy)


def _place(trail: Trail, complaint: Complaint) -> Span:
    branch = trail[-1][1]
    if complaint.unknown_key is not None:
        inner = branch.child(complaint.unknown_key)
        return inner.key_span if inner else branch.key_span
    if complaint.missing_key is not None:
        return branch.key_span
    faulty = _faulty_key(branch, complaint)
    return faulty.key_span if faulty else branch.span


def _faulty_key(branch: Branch, complaint: Complaint) -> Branch | None:
    if not complaint.about_key:
        return None
    return branch.child(complaint.words.partition("'")[2].rpartition("'")[0])


def _prune(trail: Trail, complaint: Complaint, pruned: set[tuple[Span, str | int]]) -> bool:
    """Take the faulty entry out; False where that is the whole file."""
    branch = trail[-1][1]
    if complaint.unknown_key is not None:
        branch.remove(complaint.unknown_key)
        return True
    if complaint.about_key:
        before = len(branch.mapping or {})
        branch.remove(complaint.words.partition("'")[2].rpartition("'")[0])
        return len(branch.mapping or {}) < before
    if len(trail) < 2:
        return False
    step, parent = trail[-1][0], trail[-2][1]
    parent.remove(step)
    pruned.add((parent.span, step))
    return True

"""YAML as a tree of marked branches: every scalar, list and mapping knows where it stands."""

import re
from typing import Any

import yaml

from rulecheck.reading.text import SourceText
from rulecheck.values import Problem, Span, error
from rulecheck.values.record import Mutable, field

DEEPEST = 60
LARGEST = 200_000
"""Branches after aliases are expanded; far beyond any honest file."""

_NOTHING = ("", "~", "null", "Null", "NULL")
_TRUTH = {"true": True, "True": True, "TRUE": True, "false": False, "False": False, "FALSE": False}
_WHOLE = re.compile(r"[-+]?(?:0|[1-9][0-9]*)\Z")
_FRACTION = re.compile(r"[-+]?(?:[0-9]+\.[0-9]*|\.[0-9]+|[0-9]+(?=[eE]))(?:[eE][-+]?[0-9]+)?\Z")
_MOST_DIGITS = 300
_QUOTING = ("'", '"', "|", ">")
_PRINTABLE = "\t\n\x20-\x7e\x85\xa0-\ud7ff\ue000-\ufefe\uff00-\ufffd\U00010000-\U0010ffff"
_UNPRINTABLE = re.compile(f"[^{_PRINTABLE}]")


class _PlainLoader(yaml.CSafeLoader):
    """Leaves every scalar as text: `on`, `012` and `1:30` mean what they look like."""


_PlainLoader.yaml_implicit_resolvers = {}


class Branch(Mutable):
    """One node: a scalar's text, or children by key or position; the key's own mark too."""

    span: Span
    key_span: Span
    text: str = ""
    quoted: bool = False
    mapping: "dict[str, Branch] | None" = None
    sequence: "list[Branch] | None" = None
    instead: str | float | None = None
    """What stands for the scalar where the shape asked for another reading of its text."""

    def data(self) -> Any:
        """The value as plain Python data."""
        if self.mapping is not None:
            return {key: child.data() for key, child in self.mapping.items()}
        if self.sequence is not None:
            return [child.data() for child in self.sequence]
        if self.instead is not None:
            return self.instead
        return self.text if self.quoted else _scalar(self.text)

    def child(self, step: str | int) -> "Branch | None":
        if self.mapping is not None:
            return self.mapping.get(str(step))
        if self.sequence is not None and isinstance(step, int) and step < len(self.sequence):
            return self.sequence[step]
        return None

    def remove(self, step: str | int) -> None:
        if self.mapping is not None:
            self.mapping.pop(str(step), None)
        elif self.sequence is not None and isinstance(step, int):
            del self.sequence[step]

    def copy(self) -> "Branch":
        """A tree that can be pruned without touching this one."""
        mapping, sequence = self.mapping, self.sequence
        return Branch(
            self.span,
            self.key_span,
            self.text,
            self.quoted,
            None if mapping is None else {key: child.copy() for key, child in mapping.items()},
            None if sequence is None else [child.copy() for child in sequence],
        )


def _scalar(text: str) -> str | int | float | bool | None:
    if text in _NOTHING:
        return None
    if text in _TRUTH:
        return _TRUTH[text]
    if len(text) < _MOST_DIGITS and _WHOLE.match(text):
        return int(text)
    return float(text) if _FRACTION.match(text) else text


class _Growth(Mutable):
    """What is collected while a tree is built."""

    file: str
    problems: list[Problem] = field(default_factory=list)
    size: int = 0


def grow(source: SourceText) -> tuple[Branch | None, tuple[Problem, ...]]:
    """The tree of a file, and what is wrong with it as YAML; an empty file is an empty mapping."""
    start = Span(source.file, 1)
    try:
        flaw = _unprintable(source) or _too_deep(source)
        node = None if flaw else _PlainLoader(source.text).get_single_node()
    except yaml.MarkedYAMLError as reason:
        return None, (_syntax(source.file, reason),)
    except (yaml.YAMLError, RecursionError) as reason:
        return None, (error(start, f"not YAML: {reason}", "check how the file was made"),)
    if flaw is not None:
        return None, (flaw,)
    if node is None or (isinstance(node, yaml.ScalarNode) and not node.value):
        return Branch(start, start, mapping={}), ()
    growth = _Growth(source.file, list(source.notes))
    root = _branch(node, None, (), growth)
    return root, tuple(growth.problems)


def _unprintable(source: SourceText) -> Problem | None:
    match = _UNPRINTABLE.search(source.text)
    if match is None:
        return None
    before = source.text[: match.start()]
    column = match.start() - before.rfind("\n")
    span = Span(source.file, before.count("\n") + 1, column)
    return error(span, f"control character {match[0]!r}", "YAML takes none; delete it")


def _too_deep(source: SourceText) -> Problem | None:
    depth = nodes = 0
    for event in yaml.parse(source.text, Loader=_PlainLoader):
        if isinstance(event, yaml.CollectionStartEvent):
            depth += 1
        elif isinstance(event, yaml.CollectionEndEvent):
            depth -= 1
        nodes += isinstance(event, yaml.NodeEvent)
        if nodes > LARGEST:
            what = f"more than {LARGEST} entries"
            return error(_mark(source.file, event), what, "split the file in two")
        if depth > DEEPEST:
            return error(
                _mark(source.file, event),
                f"nested more than {DEEPEST} deep",
                "no file of this kind is; check how it was made",
            )
    return None


def _syntax(file: str, reason: yaml.MarkedYAMLError) -> Problem:
    mark = reason.problem_mark or reason.context_mark
    span = Span(file, mark.line + 1, mark.column + 1) if mark else Span(file, 1)
    words = ", ".join(part for part in (reason.context, reason.problem) if part)
    return error(span, f"not YAML: {words}", "check indentation, quotes and brackets here")


def _mark(file: str, node: yaml.Node | yaml.Event) -> Span:
    mark = node.start_mark
    return Span(file, mark.line + 1, mark.column + 1) if mark else Span(file, 1)


def _branch(node: yaml.Node, key: Span | None, above: tuple[int, ...], growth: _Growth) -> Branch:
    span = _mark(growth.file, node)
    branch = Branch(span, key or span)
    growth.size += 1
    if id(node) in above or growth.size > LARGEST:
        if growth.size <= LARGEST + 1:
            growth.problems.append(error(span, "an alias repeats without end", "write it out"))
        return branch
    if not node.tag.startswith("tag:yaml.org,2002:"):
        growth.problems.append(error(span, f"the tag {node.tag} is not used here", "delete it"))
    within = (*above, id(node))
    if isinstance(node, yaml.MappingNode):
        branch.mapping = _mapping(node, within, growth)
    elif isinstance(node, yaml.SequenceNode):
        branch.sequence = [_branch(item, None, within, growth) for item in node.value]
    elif isinstance(node, yaml.ScalarNode):
        branch.text, branch.quoted = node.value, node.style in _QUOTING
    return branch


def _mapping(node: yaml.MappingNode, within: tuple[int, ...], growth: _Growth) -> dict[str, Branch]:
    children: dict[str, Branch] = {}
    for key, value in node.value:
        span = _mark(growth.file, key)
        if not isinstance(key, yaml.ScalarNode):
            growth.problems.append(error(span, "a list or mapping as a key", "write one word"))
        elif key.value in children:
            first = children[key.value].key_span
            what = f"key '{key.value}' stands here a second time"
            remedy = f"keep one; the first is at line {first.line}, column {first.column}"
            growth.problems.append(error(span, what, remedy))
        else:
            children[key.value] = _branch(value, span, within, growth)
    return children

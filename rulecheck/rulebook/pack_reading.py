"""Read one pack: the file's entries become rules with parsed conditions, every flaw located."""

import difflib
import math
from collections.abc import Mapping

from rulecheck.facts import TABLE_WORDS, VOCABULARY
from rulecheck.reading import SourceText, YamlReading, read_yaml
from rulecheck.rulebook.message import read_template
from rulecheck.rulebook.pack_file import ChangeEntry, PackFile, ParameterEntry, RuleEntry
from rulecheck.rulebook.parsing import parse_condition
from rulecheck.rulebook.places import place_in_text
from rulecheck.rulebook.rulebook import Example, Rule
from rulecheck.rulebook.scope import OTHER, Parameter, Row
from rulecheck.rulebook.tree import Flaw, Node
from rulecheck.values import (
    Dimension,
    NotAQuantity,
    Problem,
    Quantity,
    Span,
    error,
    read_quantity,
)
from rulecheck.values.record import Mutable, Record, field

Path = tuple[str | int, ...]
FEWEST_EXAMPLES = 2


class Change(Record):
    """What a pack changes in an earlier pack's rule."""

    rule: str
    reason: str
    level: str | None
    off: bool
    parameters: Mapping[str, Parameter]
    span: Span


class Pack(Record):
    name: str
    file: str
    parameters: Mapping[str, Parameter]
    new_values: Mapping[str, Parameter]
    rules: tuple[Rule, ...]
    changes: tuple[Change, ...]
    problems: tuple[Problem, ...]
    version: str = ""


class PackReader(Mutable):
    """Collects the problems of one file while its entries are converted."""

    source: SourceText
    reading: YamlReading[PackFile]
    problems: list[Problem] = field(default_factory=list)

    def fail(self, path: Path, what: str, remedy: str) -> None:
        self.problems.append(error(self.reading.span(path), what, remedy))

    def fail_inside(self, path: Path, text: str, flaw: Flaw) -> None:
        """A flaw within a text, at its own place in the file."""
        span = place_in_text(self.source, self.start(path), text, flaw.at)
        self.problems.append(error(span, flaw.what, flaw.remedy))

    def start(self, path: Path) -> Span:
        """Where the value itself starts, behind its key."""
        branch = self.reading.root
        for step in path:
            branch = branch.child(step) if branch else None
        return branch.span if branch else self.reading.span(path)

    def condition(self, path: Path, text: str | None) -> Node | None:
        if text is None:
            return None
        node = parse_condition(text)
        if isinstance(node, Flaw):
            self.fail_inside(path, text, node)
            return None
        return node


def read_pack(source: SourceText) -> Pack:
    """The pack as far as it could be read, and every mistake in it but those of names and units."""
    reading = read_yaml(source, PackFile)
    if reading.value is None:
        return Pack(source.file, source.file, {}, {}, (), (), reading.problems)
    entries = reading.value
    reader = PackReader(source, reading)
    rules = [_rule(reader, entries.pack, n, entry) for n, entry in enumerate(entries.rules)]
    return Pack(
        entries.pack,
        source.file,
        _parameters(reader, ("parameters",), entries.parameters),
        _parameters(reader, ("set",), entries.set),
        tuple(rule for rule in rules if rule is not None),
        tuple(_change(reader, n, entry) for n, entry in enumerate(entries.change)),
        (*reading.problems, *reader.problems),
        str(entries.version),
    )


def _parameters(
    reader: PackReader, path: Path, entries: Mapping[str, ParameterEntry]
) -> dict[str, Parameter]:
    found = {}
    for name, entry in entries.items():
        parameter = _parameter(reader, (*path, name), name, entry)
        if parameter is not None:
            found[name] = parameter
    return found


def _parameter(
    reader: PackReader, path: Path, name: str, entry: ParameterEntry
) -> Parameter | None:
    where = (*path, "value")
    if not entry.source.strip():
        reader.fail(path, f"parameter '{name}' has no source", "add 'source: ...'")
    rows = entry.value if isinstance(entry.value, dict) else {OTHER: entry.value}
    if OTHER not in rows and path[0] != "set":
        reader.fail(where, f"the table of '{name}' has no row '{OTHER}'", f"add '{OTHER}: ...'")
        return None
    for word in rows:
        if word not in (*TABLE_WORDS, OTHER):
            close = difflib.get_close_matches(word, TABLE_WORDS, 1)
            hint = f"did you mean '{close[0]}'?" if close else "rows are for kinds and dielectrics"
            reader.fail((*where, word), f"no part is of kind '{word}'", hint)
    quantities = {word: _quantity(reader, where, raw) for word, raw in rows.items()}
    known = {word: quantity for word, quantity in quantities.items() if quantity is not None}
    dimensions = {quantity.dimension for quantity in known.values()}
    if len(dimensions) > 1:
        reader.fail(where, f"the rows of '{name}' differ in unit", "give all the same unit")
    if len(known) < len(rows) or len(dimensions) != 1:
        return None
    read = {word: Row(quantity.value, entry.source) for word, quantity in known.items()}
    return Parameter(name, read, dimensions.pop(), entry.meaning, reader.reading.span(path))


def _quantity(reader: PackReader, path: Path, raw: str | int | float) -> Quantity | None:
    if isinstance(raw, int | float):
        if math.isfinite(raw):
            return Quantity(float(raw), Dimension.NUMBER)
        reader.fail(path, "the value is beyond what a number can hold", "write what is meant")
        return None
    quantity = read_quantity(raw)
    if isinstance(quantity, NotAQuantity):
        reader.fail(path, quantity.why, "write a number with its unit, such as 0.8 or 60 V")
        return None
    return quantity


def _rule(reader: PackReader, pack: str, number: int, entry: RuleEntry) -> Rule | None:
    path: Path = ("rules", number)
    _check_texts(reader, path, entry)
    requires = reader.condition((*path, "requires"), entry.requires)
    applies = reader.condition((*path, "applies"), entry.applies)
    graver = entry.graver
    when = reader.condition((*path, "graver", "when"), graver.when if graver else None)
    pieces, flaws = read_template(entry.message)
    for flaw in flaws:
        reader.fail_inside((*path, "message"), entry.message, flaw)
    nodes = {n: reader.condition((*path, "values", n), text) for n, text in entry.values.items()}
    failed = (entry.applies and applies is None) or (graver and when is None)
    if requires is None or failed or entry.subject not in VOCABULARY:
        return None
    return Rule(
        entry.id,
        entry.subject,
        entry.level,
        applies,
        requires,
        when,
        graver.level if graver else entry.level,
        pieces,
        {name: node for name, node in nodes.items() if node is not None},
        entry.why,
        entry.remedy,
        entry.source,
        _parameters(reader, (*path, "parameters"), entry.parameters),
        _examples(reader, path, entry),
        pack,
        reader.reading.span((*path, "id")),
        _texts(entry),
        {key: reader.start(_path_of(path, key)) for key in _texts(entry)},
    )


def _path_of(rule: Path, key: str) -> Path:
    """The YAML path of a rule's text: `values.needs` and `graver` lie a step deeper."""
    if key == "graver":
        return (*rule, "graver", "when")
    first, _, rest = key.partition(".")
    return (*rule, first, rest) if rest else (*rule, first)


def _texts(entry: RuleEntry) -> dict[str, str]:
    written = {"applies": entry.applies, "requires": entry.requires, "message": entry.message}
    if entry.graver:
        written["graver"] = entry.graver.when
    texts = {name: text for name, text in written.items() if text is not None}
    return {**texts, **{f"values.{name}": text for name, text in entry.values.items()}}


def _check_texts(reader: PackReader, path: Path, entry: RuleEntry) -> None:
    """What makes a rule its own manual page may not be empty."""
    needed = {
        "id": entry.id,
        "message": entry.message,
        "why": entry.why,
        "remedy": entry.remedy,
        "source": entry.source,
    }
    for key, text in needed.items():
        if not text.strip():
            reader.fail((*path, key), f"rule '{entry.id}' has an empty '{key}'", "write it")
    if entry.subject not in VOCABULARY:
        kinds = ", ".join(VOCABULARY)
        reader.fail((*path, "subject"), f"'{entry.subject}' is no subject", f"use one of {kinds}")
    if len(entry.examples) < FEWEST_EXAMPLES:
        count = len(entry.examples)
        what = f"rule '{entry.id}' has {count} of at least {FEWEST_EXAMPLES} examples"
        reader.fail((*path, "examples"), what, "add one that keeps the rule and one that breaks it")


def _examples(reader: PackReader, path: Path, entry: RuleEntry) -> tuple[Example, ...]:
    return tuple(
        Example(
            example.netlist,
            example.sheet,
            example.parts,
            example.expect,
            example.of,
            example.shows,
            reader.reading.span((*path, "examples", number)),
        )
        for number, example in enumerate(entry.examples)
    )


def _change(reader: PackReader, number: int, entry: ChangeEntry) -> Change:
    path: Path = ("change", number)
    if not entry.reason.strip():
        reader.fail((*path, "reason"), f"a change of '{entry.rule}' without a reason", "write it")
    return Change(
        entry.rule,
        entry.reason,
        entry.level,
        entry.off,
        _parameters(reader, (*path, "parameters"), entry.parameters),
        reader.reading.span((*path, "rule")),
    )

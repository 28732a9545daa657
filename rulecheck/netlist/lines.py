"""Physical lines become logical ones: comments off, continuations joined, blocks skipped."""

import re
from bisect import bisect_right

from rulecheck.reading import SourceText
from rulecheck.values import USUAL, Limits, Problem, Span, error, note, raise_limit
from rulecheck.values.record import Mutable, Record, field

_BEGINNING = 200
"""Characters of a line that tell what kind of line it is."""
_COMMENT_SIGNS = "*;#$%"
_CONTROL = re.compile(r"[\x00-\x08\x0b\x0c\x0e-\x1f\x7f]")
_DOLLAR = re.compile(r"(?<=\s)\$(?=\s|\Z)")
_QUOTED = re.compile(r"\"[^\"]*\"")
_STRUCTURAL = re.compile(
    r"\s*\.(?:subckt|model|params?|lib|include|inc|func|global|ends|macro)\b", re.IGNORECASE
)
_TITLE_CARD = re.compile(r"\s*\.title\b\s*", re.IGNORECASE)
_END = re.compile(r"\.end\s*\Z", re.IGNORECASE)
_CARD_LIKE = re.compile(r"\s*[RCLDQMVIXK][0-9]+\s+\S+\s+\S+", re.IGNORECASE)


class LogicalLine(Record):
    """A card with its continuations joined, and where each stretch of it stands in the file."""

    text: str
    file: str
    marks: tuple[tuple[int, int, int], ...]
    """(offset in the text, line, column) of each physical line, in order."""
    flaw: Problem | None = None
    """Why it is not to be read; the text is then its beginning alone."""

    def span(self, offset: int = 0) -> Span:
        mark = self.marks[bisect_right(self.marks, (offset, 1 << 60, 0)) - 1]
        return Span(self.file, mark[1], mark[2] + offset - mark[0])


class Lines(Record):
    title: str
    cards: tuple[LogicalLine, ...]
    problems: tuple[Problem, ...]


class _Block(Record):
    """A stretch of lines that is not circuit."""

    start: re.Pattern[str]
    end: re.Pattern[str]
    what: str
    must_close: bool


_BLOCKS = (
    _Block(re.compile(r"\.control\b", re.I), re.compile(r"\.endc\b", re.I), "script block", True),
    _Block(
        re.compile(r"\.(?:prot(?:ect)?|encrypt\w*)\b", re.I),
        re.compile(r"\.(?:unprot(?:ect)?|end_?encrypt\w*)\b", re.I),
        "encrypted block",
        True,
    ),
    _Block(
        re.compile(r"[$*#]+\s*\$?(?:\w*enc\w*start\b|(?:begin|start)\W+\w*encr\w*\s*\Z)", re.I),
        re.compile(
            r"[$*#]+\s*\$?(?:\w*enc\w*(?:finish|end|stop)\b|(?:end|finish)\W+\w*encr)", re.I
        ),
        "encrypted block",
        False,
    ),
)


class _Joiner(Mutable):
    """Collects logical lines while the physical ones go by."""

    file: str
    cards: list[LogicalLine] = field(default_factory=list)
    problems: list[Problem] = field(default_factory=list)
    longest: int = USUAL["card-characters"]
    unclosed: set[int] = field(default_factory=set)
    """Of which block, by its place in the table, no end follows any more."""
    pieces: list[str] = field(default_factory=list)
    marks: list[tuple[int, int, int]] = field(default_factory=list)
    length: int = 0

    def begin(self, text: str, line: int, column: int) -> None:
        self.flush()
        self.pieces = [text]
        self.marks = [(0, line, column)]
        self.length = len(text)

    def attach(self, text: str, line: int, column: int) -> None:
        self.marks.append((self.length + 1, line, column))
        self.pieces.append(text)
        self.length += len(text) + 1

    def flush(self) -> None:
        if self.pieces:
            text, marks = " ".join(self.pieces), tuple(self.marks)
            flaw = None
            if len(text) > self.longest:
                span = Span(self.file, marks[0][1], marks[0][2])
                what = f"a card of more than {self.longest} characters is not read"
                flaw = error(span, what, raise_limit("card-characters"))
                text = text[:_BEGINNING]
            self.cards.append(LogicalLine(text, self.file, marks, flaw))
        self.pieces = []


def split_lines(source: SourceText, top: bool, limits: Limits = USUAL) -> Lines:
    """Logical lines of a file; in a top-level deck the first physical line is the title."""
    rows = _CONTROL.sub(" ", source.text).split("\n")
    joiner = _Joiner(source.file, longest=limits["card-characters"])
    title, number = "", 0
    if top and rows and not _STRUCTURAL.match(rows[0]):
        title, number = _title(rows[0], joiner), 1
    while number < len(rows):
        stripped = rows[number].strip()
        block = _block_at(stripped, joiner)
        if block is not None:
            number = _skip_block(block, rows, number, joiner)
        elif _END.match(stripped):
            _report_tail(rows, number, joiner)
            break
        else:
            _take(rows[number], stripped, number + 1, joiner)
        number += 1
    joiner.flush()
    return Lines(title, tuple(joiner.cards), tuple(joiner.problems))


def _title(row: str, joiner: _Joiner) -> str:
    if _CARD_LIKE.match(row):
        remedy = "put a title line above it if it is an element"
        what = "the first line of a netlist is its title, and is not read as a card"
        joiner.problems.append(note(Span(joiner.file, 1), what, remedy))
    return _TITLE_CARD.sub("", row, count=1).strip().lstrip("*").strip()


def _take(row: str, stripped: str, number: int, joiner: _Joiner) -> None:
    if not stripped or stripped[0] in _COMMENT_SIGNS:
        return
    text = without_comment(stripped)
    column = row.index(stripped[0]) + 1
    if stripped[0] not in "+)":
        joiner.begin(text, number, column)
    elif not joiner.pieces:
        span = Span(joiner.file, number, column)
        what = f"'{stripped[0]}' continues a card, and there is none above"
        joiner.problems.append(error(span, what, "delete the line, or restore the card above it"))
    elif stripped[0] == "+":
        rest = text[1:].lstrip()
        joiner.attach(rest, number, column + len(text) - len(rest))
    else:
        span = Span(joiner.file, number, column)
        what = "a closing parenthesis on a line of its own is taken as part of the card above"
        joiner.problems.append(note(span, what, "begin the line with '+'"))
        joiner.attach(text, number, column)


def without_comment(text: str) -> str:
    """The line without what follows `;`, or a `$` that stands alone."""
    if ";" not in text and "$" not in text:
        return text
    masked = _QUOTED.sub(lambda match: "x" * len(match[0]), text)
    cut = masked.find(";")
    if cut >= 0:
        masked = masked[:cut]
    dollar = _DOLLAR.search(masked)
    return text[: dollar.start() if dollar else len(masked)].rstrip()


def _block_at(stripped: str, joiner: _Joiner) -> _Block | None:
    if not stripped or stripped[0] not in ".$*#":
        return None
    head = stripped[:_BEGINNING]  # the patterns' time grows with the square of the length
    for place, block in enumerate(_BLOCKS):
        if place not in joiner.unclosed and block.start.match(head):
            return block
    return None


def _skip_block(block: _Block, rows: list[str], number: int, joiner: _Joiner) -> int:
    """The number of the block's last row; the rest of the file where it is never closed."""
    span = Span(joiner.file, number + 1)
    for last in range(number + 1, len(rows)):
        if block.end.match(rows[last].strip()[:_BEGINNING]):
            what = f"{block.what} of {last - number - 1} lines skipped"
            joiner.problems.append(note(span, what))
            return last
    if not block.must_close:
        joiner.unclosed.add(_BLOCKS.index(block))
        return number
    what = f"this {block.what} is never closed, so that the rest of the file is not read"
    joiner.problems.append(error(span, what, "add its end card"))
    return len(rows)


def _report_tail(rows: list[str], number: int, joiner: _Joiner) -> None:
    for later in range(number + 1, len(rows)):
        stripped = rows[later].strip()
        if stripped and stripped[0] not in _COMMENT_SIGNS:
            what = f"what follows the .end card of line {number + 1} is not read"
            joiner.problems.append(note(Span(joiner.file, later + 1), what))
            return

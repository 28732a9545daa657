"""Independent sources: DC value and waveform, with and without parentheses."""

from collections.abc import Sequence

from rulecheck.netlist.assignments import key_name
from rulecheck.netlist.draft import Amount, Draft, DraftWave, Outcome, Reading
from rulecheck.netlist.fields import (
    amount_at,
    behind,
    net_words,
    pair_amount,
    plain_and_pairs,
    read_pairs,
    take_amount,
    with_decimal_commas,
    written,
)
from rulecheck.netlist.formula import Formula
from rulecheck.netlist.numbers import read_number
from rulecheck.netlist.syntax import GROUP, MARK, PAIR, QUOTED, WORD, Item
from rulecheck.netlist.terminals import terminal_error
from rulecheck.values import error
from rulecheck.values.record import replace

# Keyword as written -> kind; the first argument of each is its value at time zero,
# but for a piecewise one, where it is the second.
_WAVEFORMS = {
    "sin": "sin",
    "sine": "sin",
    "pulse": "pulse",
    "pul": "pulse",
    "pwl": "pwl",
    "exp": "exp",
    "sffm": "sffm",
    "am": "am",
    "trnoise": "noise",
    "trrandom": "noise",
}
_KEYWORDS = frozenset({"dc", "ac", "tran", "distof1", "distof2", *_WAVEFORMS})
_EXPRESSIONS = frozenset({"r", "v", "i", "table", "tbl", "value"})
_MOST_WORDS = 1000
"""Keywords, values and waveforms of one source; a waveform counts as one, however long."""
_LISTS_END = frozenset({"file", "endrepeat", "r", "td"})
_REPEATED = frozenset({"repeat", "forever", "for"})
"""Words before a piecewise list that repeats; `for` takes a count."""


def read_source(letter: str, reading: Reading) -> Outcome:
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    if len(words) < 2:
        return terminal_error(letter, len(words), reading.span)
    nets = (words[0].text, words[1].text)
    rest = behind(plain, words[1].end)
    if not any(item.text.lower() in _WAVEFORMS for item in rest):
        rest = with_decimal_commas(rest)
    value, wave = _value_and_wave(reading, rest)
    defined = next((pair for pair in pairs if pair.key.lower() in _EXPRESSIONS), None)
    if wave is None and defined is not None:
        wave = DraftWave("behavioural", (), reading.text[defined.start :].strip())
    parameters = dict(read_pairs(reading, pairs, _EXPRESSIONS))
    if value is None and not isinstance(parameters.get("dc", ""), str):
        value = _number(parameters.pop("dc"))
    if value is None and wave is not None:
        value = _at_time_zero(wave)
    elif value is None and not _bare_text(rest):
        value = 0.0
    elif value is None and letter == "I" and not reading.name[1:2].isdigit():
        return None  # a connector called IN, not a current source
    return Draft(
        reading.name,
        letter,
        reading.span,
        nets,
        written(reading.text, rest),
        value,
        tuple(parameters.items()),
        waveform=wave,
    )


def _number(amount: Amount | str) -> Amount:
    return None if isinstance(amount, str) else amount


def _value_and_wave(reading: Reading, rest: list[Item]) -> tuple[Amount, DraftWave | None]:
    value: Amount = None
    wave: DraftWave | None = None
    left = [item for item in rest]
    for _ in range(_MOST_WORDS):
        if not left:
            break
        word = left[0].text.lower() if left[0].kind == WORD else ""
        if word in _WAVEFORMS:
            wave, left = _wave(reading, word, left)
        elif word == "ac":
            left = _without_amounts(reading, left[1:])
        elif word in _KEYWORDS:
            left = left[1:]
        else:
            amount, after = take_amount(reading, left)
            if amount is not None and value is None:
                value = amount
            left = after if amount is not None else left[1:]
    return value, wave


def _without_amounts(reading: Reading, items: list[Item]) -> list[Item]:
    """Without magnitude and phase of a small-signal analysis."""
    for _ in range(2):
        if items and items[0].kind == WORD and items[0].text.lower() in _KEYWORDS:
            break
        items = take_amount(reading, items)[1]
    return items


def _bare_text(rest: Sequence[Item]) -> bool:
    """Whether some word stands in the place of a value and is none: it is unknown, not zero."""
    return any(
        item.kind == QUOTED
        or (
            item.kind == WORD
            and item.text.lower() not in _KEYWORDS
            and read_number(item.text) is None
        )
        for item in rest
    )


def _wave(reading: Reading, word: str, items: list[Item]) -> tuple[DraftWave, list[Item]]:
    kind = _WAVEFORMS[word]
    if len(items) > 1 and items[1].kind == GROUP:
        arguments, rest = list(items[1].inner), items[2:]
        end = items[1].end
    else:
        arguments, rest = _open_arguments(items[1:])
        end = arguments[-1].end if arguments else items[0].end
    text = reading.text[items[0].start : end]
    amounts, relative = _amounts(reading, arguments, kind == "pwl")
    wave = DraftWave(kind, amounts, text, relative)
    if kind == "pwl":
        pairs = [item for item in (*reading.card.items, *_opened(arguments)) if item.kind == PAIR]
        wave = _with_repeat(reading, wave, pairs)
    return wave, rest


def _open_arguments(items: list[Item]) -> tuple[list[Item], list[Item]]:
    """Arguments without parentheses go on up to the next keyword."""
    for position, item in enumerate(items):
        if item.kind == WORD and item.text.lower() in _KEYWORDS:
            return items[:position], items[position:]
    return items, []


def _amounts(
    reading: Reading, arguments: list[Item], piecewise: bool
) -> tuple[tuple[Amount, ...], frozenset[int]]:
    """The numbers of a waveform; none at all where one cannot be read."""
    left = _opened(arguments)
    left = _behind_repeat(left) if piecewise else left
    amounts: list[Amount] = []
    relative: set[int] = set()
    position = 0
    while position < len(left):
        first = left[position]
        if first.kind == PAIR or first.text.lower() in _LISTS_END:
            break
        amount, position = amount_at(reading, left, position)
        if amount is None:
            what = f"'{first.text}' is no number for a waveform"
            problem = error(reading.card.span(first), what, "write a number or {expression}")
            reading.notes.append(problem)
            return (), frozenset()
        if piecewise and len(amounts) % 2 == 0 and first.text.startswith("+"):
            relative.add(len(amounts))
        amounts.append(amount)
    return tuple(amounts), frozenset(relative)


def _behind_repeat(items: list[Item]) -> list[Item]:
    """What stands behind `repeat forever` or `repeat for 10`."""
    while items and items[0].text.lower() in _REPEATED:
        items = items[2:] if items[0].text.lower() == "for" else items[1:]
    return items


def _with_repeat(reading: Reading, wave: DraftWave, pairs: Sequence[Item]) -> DraftWave:
    """A piecewise list with what `r=`, `td=` or `repeat` says of it."""
    own = {key_name(pair.key): pair_amount(reading, pair) for pair in pairs}
    repeat, delay = own.get("r"), own.get("td")
    words = wave.text.lower().replace("(", " ").split()
    start: Amount = 0.0 if "repeat" in words else None
    if isinstance(repeat, float | int | Formula):
        start = None if isinstance(repeat, float | int) and repeat < 0.0 else repeat
    shift = None if isinstance(delay, str) else delay
    return replace(wave, repeats_from=start, delay=shift)


def _opened(arguments: list[Item]) -> list[Item]:
    """Without commas, and the pairs of a piecewise list out of their parentheses."""
    result: list[Item] = []
    for item in arguments:
        if item.kind == GROUP:
            result.extend(inner for inner in item.inner if inner.kind != MARK)
        elif item.kind != MARK:
            result.append(item)
    return result


def _at_time_zero(wave: DraftWave) -> Amount:
    position = 1 if wave.kind == "pwl" else 0
    return wave.amounts[position] if len(wave.amounts) > position else None

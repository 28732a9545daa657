"""Controlled and behavioural sources: E, G, F, H and B."""

from rulecheck.netlist.assignments import formula_at
from rulecheck.netlist.draft import Amount, Draft, DraftWave, Outcome, Reading
from rulecheck.netlist.fields import (
    net_words,
    pair_formula,
    plain_and_pairs,
    read_pairs,
    take_amount,
    written,
)
from rulecheck.netlist.numbers import read_number
from rulecheck.netlist.syntax import BRACED, GROUP, MARK, PAIR, QUOTED, WORD, Item
from rulecheck.netlist.terminals import terminal_error
from rulecheck.values import error

BEHAVIOURAL = "behavioural"
_WORDS = frozenset({
    "value", "vol", "cur", "table", "laplace", "freq", "chebyshev", "poly", "pwl", "delay",
    "and", "or", "nand", "nor",
})  # fmt: skip
_EXPRESSIONS = frozenset({"v", "i", "r", "value", "vol", "cur", "table", "laplace", "q"})


def read_behavioural(letter: str, reading: Reading) -> Outcome:
    """B: the rest of the card is an expression, kept as written."""
    words = net_words(reading, _before_expression(reading))
    key = _expression_key(reading)
    if key is None:
        return None
    if len(words) != 2:
        return terminal_error(letter, len(words), reading.span)
    return _behavioural(letter, reading, words, key)


def _expression_key(reading: Reading) -> Item | None:
    items = reading.card.items
    first = 2 if len(items) > 1 and items[1].kind == GROUP else 3
    return next(
        (
            item
            for position, item in enumerate(items)
            if (item.kind == PAIR and item.key.lower() in _EXPRESSIONS)
            or (item.kind == WORD and position >= first and item.text.lower() in _WORDS)
        ),
        None,
    )


def _before_expression(reading: Reading) -> list[Item]:
    key = _expression_key(reading)
    items = reading.card.items[1:]
    return list(items[: items.index(key)] if key is not None else items)


def _behavioural(letter: str, reading: Reading, words: list[Item], key: Item) -> Draft:
    wave = DraftWave(BEHAVIOURAL, (), reading.text[key.start :].strip())
    pairs = [
        item
        for item in reading.card.items[1:]
        if item.kind == PAIR and item.key.lower() not in _EXPRESSIONS
    ]
    return Draft(
        reading.name,
        letter,
        reading.span,
        (words[0].text, words[1].text),
        wave.text,
        _constant(reading, key),
        read_pairs(reading, [pair for pair in pairs if pair.start < key.start]),
        waveform=wave,
        value_may_fail=True,
    )


def _constant(reading: Reading, key: Item) -> Amount:
    """The expression, which has a value if it depends on no voltage or current."""
    if key.kind == PAIR:
        if key.key.lower() in ("v", "i", "value", "vol", "cur"):
            if key.value_kind in (BRACED, QUOTED):
                return pair_formula(reading, key)
            return formula_at(reading.card.line, key.value_start, len(reading.text))
        return None
    items = reading.card.items
    following = items[items.index(key) + 1 :]
    values = [item for item in following if item.kind in (BRACED, QUOTED)]
    if key.text.lower() in ("value", "vol", "cur") and len(values) == 1:
        return formula_at(reading.card.line, values[0].start, values[0].end)
    return None


def read_voltage_controlled(letter: str, reading: Reading) -> Outcome:
    """E, G: controlling nets and a gain, or an expression, polynomial, table or transfer."""
    key = _expression_key(reading)
    if key is not None:
        words = net_words(reading, _before_expression(reading))
        if len(words) < 2:
            return terminal_error(letter, len(words), reading.span)
        draft = _behavioural(letter, reading, words, key)
        return _with_polynomial_controls(draft, reading, key)
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    if len(words) < 2:
        return terminal_error(letter, len(words), reading.span)
    rest = [item for item in plain if item.start >= words[1].end and item.kind != MARK]
    if rest and rest[0].kind in (BRACED, QUOTED):
        return _behavioural(letter, reading, words, rest[0])
    return _linear(letter, reading, plain, words, pairs)


def _linear(
    letter: str, reading: Reading, plain: list[Item], words: list[Item], pairs: list[Item]
) -> Outcome:
    gain_items = [item for item in plain if len(words) > 3 and item.start >= words[3].end]
    gain_items = [item for item in gain_items if item.kind != MARK]
    gain, _ = take_amount(reading, gain_items)
    if gain is None:
        if len(words) < 5 and not any(read_number(word.text) is not None for word in words):
            return None
        what = "no controlling nets and gain can be read"
        return error(reading.span, what, "write NAME NET NET NET NET GAIN, or VALUE={...}")
    return Draft(
        reading.name,
        letter,
        reading.span,
        (words[0].text, words[1].text),
        written(reading.text, gain_items),
        gain,
        read_pairs(reading, pairs),
        controls=(words[2].text, words[3].text),
        controlled_by_nets=True,
    )


def _with_polynomial_controls(draft: Draft, reading: Reading, key: Item) -> Draft:
    """The first 2n words behind POLY(n) are nets."""
    names = _polynomial_names(reading, key, 2)
    return _controlled(draft, names, by_nets=True)


def _controlled(draft: Draft, names: tuple[str, ...], by_nets: bool) -> Draft:
    return Draft(
        draft.name,
        draft.letter,
        draft.span,
        draft.nets,
        draft.text,
        draft.value,
        draft.parameters,
        waveform=draft.waveform,
        controls=names,
        controlled_by_nets=by_nets,
        value_may_fail=draft.value_may_fail,
    )


def _polynomial_names(reading: Reading, key: Item, per_input: int) -> tuple[str, ...]:
    items = reading.card.items
    following = list(items[items.index(key) + 1 :])
    if key.text.lower() != "poly" or not following or following[0].kind != GROUP:
        return ()
    order = read_number(following[0].text.strip())
    if order is None:
        return ()
    words = net_words(reading, [item for item in following[1:] if item.kind != PAIR])
    return tuple(word.text for word in words[: int(order.value) * per_input])


def read_current_controlled(letter: str, reading: Reading) -> Outcome:
    """F, H: a source's name and a gain; a fuse or mounting hole has neither."""
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    if len(words) < 3:
        return None
    key = _expression_key(reading)
    if key is not None and key.start >= words[1].end:
        draft = _behavioural(letter, reading, words, key)
        return _controlled(draft, _polynomial_names(reading, key, 1), by_nets=False)
    rest = [item for item in plain if item.start >= words[2].end and item.kind != MARK]
    gain, _ = take_amount(reading, rest)
    if gain is None or words[2].text[:1].lower() != "v":
        return None
    return Draft(
        reading.name,
        letter,
        reading.span,
        (words[0].text, words[1].text),
        written(reading.text, rest),
        gain,
        read_pairs(reading, pairs),
        controls=(words[2].text,),
    )

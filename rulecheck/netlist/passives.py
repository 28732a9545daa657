"""Resistors, capacitors, inductors, and the coupling between inductors."""

import re
from itertools import pairwise

from rulecheck.netlist.draft import Amount, Draft, Outcome, Reading
from rulecheck.netlist.fields import (
    behind,
    fuse,
    net_words,
    pair_amount,
    plain_and_pairs,
    read_pairs,
    take_amount,
    with_decimal_commas,
    written,
)
from rulecheck.netlist.numbers import read_number
from rulecheck.netlist.syntax import MARK, WORD, Item
from rulecheck.netlist.terminals import terminal_error
from rulecheck.values import error

_BARE = re.compile(r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)")
_SCALE = re.compile(r"(?:meg|[tgkmunpµμ])(?:ohms?|[FHΩΩ])?", re.IGNORECASE)

# Values that many take for another one, by letter.
_TRAPS = {
    "R": (
        re.compile(r"[+]?[0-9.]+M(?:ohm|Ω|Ω)?\Z"),
        "'{0}' is read as {1:g} ohm: M is milli in a netlist",
        "write Meg for a million",
    ),
    "C": (
        re.compile(r"[+]?[0-9.]+[fF]\Z"),
        "'{0}' is read as {1:g} F: F is femto in a netlist",
        "leave the unit out for a farad",
    ),
}


def read_passive(letter: str, reading: Reading) -> Outcome:
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    if len(words) < 2:
        return terminal_error(letter, len(words), reading.span)
    rest = with_decimal_commas(behind(plain, words[1].end))
    if _is_package(reading, [word for word in fuse(reading.text, rest) if word.kind == WORD]):
        return None
    nets = (words[0].text, words[1].text)
    model, value, left = _model_and_value(letter, reading, rest)
    parameters = dict(read_pairs(reading, pairs, frozenset({letter.lower()})))
    parameters |= _multiplicity(left, parameters)
    if value is None:
        value = _value_of_pair(letter, reading, pairs)
    return Draft(
        reading.name,
        letter,
        reading.span,
        nets,
        written(reading.text, rest),
        value,
        tuple(parameters.items()),
        model,
    )


def _is_package(reading: Reading, words: list[Item]) -> bool:
    """More pins than two: the words before the last are nets that occur elsewhere."""
    if len(words) < 2 or not reading.is_net(words[0].text) or reading.is_model(words[0].text):
        return False
    numeric = [read_number(word.text) is not None for word in words[:2]]
    return not numeric[0] or all(numeric)


def _model_and_value(
    letter: str, reading: Reading, rest: list[Item]
) -> tuple[str, Amount, list[Item]]:
    model = ""
    left = list(rest)
    if left and left[0].kind == WORD and reading.is_model(left[0].text):
        model, left = left[0].text, left[1:]
    left = _with_scale(reading, left)
    item = left[0] if left else None
    value, left = take_amount(reading, left)
    if isinstance(value, float) and item is not None:
        _warn_of_trap(letter, reading, item, value)
    if not model and left and left[0].kind == WORD and reading.is_model(left[0].text):
        model, left = left[0].text, left[1:]
    return model, value, left


def _with_scale(reading: Reading, items: list[Item]) -> list[Item]:
    """`10 k`, `4.7 uF`: a scale behind a blank belongs to the number before it."""
    if len(items) < 2 or items[0].kind != WORD or not _BARE.fullmatch(items[0].text):
        return items
    scale = items[1]
    if not _SCALE.fullmatch(scale.text) or reading.is_model(scale.text):
        return items
    whole = items[0].text + scale.text
    reading.remark(items[0], f"'{items[0].text} {scale.text}' is read as {whole}")
    return [Item(WORD, items[0].start, scale.end, whole), *items[2:]]


def _warn_of_trap(letter: str, reading: Reading, item: Item, value: float) -> None:
    trap = _TRAPS.get(letter)
    if trap is not None and trap[0].match(item.text):
        reading.remark(item, trap[1].format(item.text, value), trap[2])


def _multiplicity(left: list[Item], parameters: dict[str, Amount | str]) -> dict[str, Amount | str]:
    """`x 3`: three in parallel, as `m=3` says."""
    for word, following in pairwise(left):
        number = read_number(following.text)
        if word.text.lower() == "x" and number is not None:
            stated = parameters.get("m", 1.0)
            return {"m": number.value * stated} if isinstance(stated, float) else {}
    return {}


def _value_of_pair(letter: str, reading: Reading, pairs: list[Item]) -> Amount:
    for pair in pairs:
        if pair.key.lower() in (letter.lower(), "value"):
            amount = pair_amount(reading, pair)
            return None if isinstance(amount, str) else amount
    return None


def read_coupling(letter: str, reading: Reading) -> Outcome:
    """`K1 L1 L2 L3 0.98`; a relay of the same letter is something else."""
    plain, pairs = plain_and_pairs(reading)
    names: list[str] = []
    rest = [item for item in plain if item.kind != MARK]
    while rest and rest[0].kind == WORD and _names_inductor(rest[0].text):
        names.append(rest.pop(0).text)
    if len(names) < 2:
        return None
    if len({name.lower() for name in names}) < len(names):
        return error(reading.span, "a coupling names one inductor twice", "name each one once")
    value, left = take_amount(reading, rest)
    for pair in pairs:
        if value is None and pair.key.lower() in ("k", "coupling"):
            amount = pair_amount(reading, pair)
            value = None if isinstance(amount, str) else amount
    if value is None:
        if rest:
            return None
        return error(reading.span, "no coefficient of coupling", "write NAME L1 L2 COEFFICIENT")
    return Draft(
        reading.name,
        letter,
        reading.span,
        (),
        written(reading.text, left),
        value,
        read_pairs(reading, pairs, frozenset({"k", "coupling"})),
        controls=tuple(names),
    )


def _names_inductor(word: str) -> bool:
    return word.rpartition(".")[2][:1].lower() == "l"

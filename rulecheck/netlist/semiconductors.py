"""Cards that name a model behind their nets: diodes, transistors, switches, instances."""

import re

from rulecheck.netlist.assignments import key_name
from rulecheck.netlist.draft import Amount, Draft, Outcome, Reading
from rulecheck.netlist.fields import net_words, pair_formula, plain_and_pairs, read_pairs
from rulecheck.netlist.numbers import read_number
from rulecheck.netlist.syntax import BRACED, Item
from rulecheck.netlist.terminals import ROWS, terminal_error

_BARE_NUMBER = re.compile(r"[0-9]*\.?[0-9]+(?:[eE][+-]?[0-9]+)?")
_STATES = frozenset({"on", "off"})


def read_diode(letter: str, reading: Reading) -> Outcome:
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    known = _known_model(reading, words, 2)
    count = known if known is not None else _net_count(reading, words)
    if count < 2:
        return terminal_error(letter, count, reading.span)
    if count > 2:
        return None
    model, extras = _model_and_extras(words[count:], known is not None)
    return Draft(
        reading.name,
        letter,
        reading.span,
        tuple(word.text for word in words[:count]),
        model,
        None,
        _with_area(read_pairs(reading, pairs), extras),
        model,
    )


def _known_model(reading: Reading, words: list[Item], least: int) -> int | None:
    """Where the model stands, behind at least that many nets; too early only as the last word.

    A net may have the name of a model.
    """
    models = [k for k, word in enumerate(words) if k and reading.is_model(word.text)]
    late = next((k for k in models if k >= least), None)
    return models[-1] if late is None and models and models[-1] == len(words) - 1 else late


def _net_count(reading: Reading, words: list[Item]) -> int:
    """Two, and as many more words before the last as are nets elsewhere."""
    count = min(2, len(words))
    while count < len(words) - 1 and reading.is_net(words[count].text):
        count += 1
    return count


def _model_and_extras(words: list[Item], known: bool) -> tuple[str, list[Item]]:
    """The model; what is behind it, which is part of an unknown part's text if it is words."""
    if not words:
        return "", []
    extras = [word for word in words[1:] if _is_extra(word)]
    if known or len(extras) == len(words) - 1:
        return words[0].text, extras
    return " ".join(word.text for word in words), []


def _is_extra(word: Item) -> bool:
    """An area factor or an initial state behind the model."""
    return word.text.lower() in _STATES or _BARE_NUMBER.fullmatch(word.text) is not None


def _with_area(
    parameters: tuple[tuple[str, Amount | str], ...], extras: list[Item]
) -> tuple[tuple[str, Amount | str], ...]:
    numbers = [number.value for word in extras if (number := read_number(word.text))]
    return (*parameters, ("area", numbers[0])) if numbers else parameters


def read_transistor(letter: str, reading: Reading) -> Outcome:
    """Q, M, Z: the model is the last word, or the first that names a known model."""
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    row = ROWS[letter]
    known = _known_model(reading, words, row.least)
    if known is not None:
        nets, model, extras = words[:known], words[known].text, words[known + 1 :]
    else:
        nets, model, extras = _guess_model(reading, words, row.least)
    count = len(nets)
    if not row.least <= count <= row.most:
        fits_elsewhere = known is None and (count > row.most or letter in "MZ")
        return None if fits_elsewhere else terminal_error(letter, count, reading.span)
    if letter == "M" and count == 3 and nets:
        what = "a MOSFET with 3 nets is taken with its bulk on its source"
        reading.remark(nets[0], what)
    return Draft(
        reading.name,
        letter,
        reading.span,
        tuple(word.text for word in nets),
        model,
        None,
        _with_area(read_pairs(reading, pairs), [word for word in extras if _is_extra(word)]),
        model,
    )


def _guess_model(
    reading: Reading, words: list[Item], least: int
) -> tuple[list[Item], str, list[Item]]:
    """The last word names the part, but for an area factor and for a card of nets alone."""
    end = len(words)
    while end > least + 1 and _is_extra(words[end - 1]) and not reading.is_net(words[end - 1].text):
        end -= 1
    if end >= least and reading.is_net(words[end - 1].text):
        return words[:end], "", words[end:]
    if not end:
        return [], "", []
    return words[: end - 1], words[end - 1].text, words[end:]


def read_modelled(letter: str, reading: Reading) -> Outcome:
    """J, O, U, A: these letters also name board parts, so only a known model makes them fit."""
    plain, _ = plain_and_pairs(reading)
    row = ROWS[letter]
    known = _known_model(reading, net_words(reading, plain), row.least)
    if known is None:
        return None
    if letter == "A":
        return read_code_model(letter, reading)
    if not row.least <= known <= row.most:
        return None if letter == "U" else terminal_error(letter, known, reading.span)
    return read_transistor(letter, reading)


def read_code_model(letter: str, reading: Reading) -> Draft:
    """Nets may stand in square brackets, several to a port."""
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    nets = (word.text.strip("[]~") for word in words[:-1])
    return Draft(
        reading.name,
        letter,
        reading.span,
        tuple(net for net in nets if net and not net.startswith("%")),
        words[-1].text,
        None,
        read_pairs(reading, pairs),
        words[-1].text,
    )


def read_line(letter: str, reading: Reading) -> Outcome:
    """A transmission line has an impedance or a delay; other T parts are transformers."""
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    if not {"z0", "zo", "td", "nl"} & {pair.key.lower() for pair in pairs}:
        return None
    if len(words) != 4:
        return terminal_error(letter, len(words), reading.span)
    nets = tuple(word.text for word in words)
    return Draft(reading.name, letter, reading.span, nets, parameters=read_pairs(reading, pairs))


def read_switch(letter: str, reading: Reading) -> Outcome:
    """S: two ends, two controlling nets, a model; a push button of that letter has no model."""
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    known = _known_model(reading, words, 4)
    if known is not None and known != 4:
        return terminal_error(letter, known, reading.span)
    if known is None and (len(words) < 5 or not reading.name[1:2].isdigit()):
        return None
    model = words[4].text
    return Draft(
        reading.name,
        letter,
        reading.span,
        (words[0].text, words[1].text),
        model,
        None,
        read_pairs(reading, pairs),
        model,
        controls=(words[2].text, words[3].text),
        controlled_by_nets=True,
    )


def read_current_switch(letter: str, reading: Reading) -> Outcome:
    """W: two ends, the source whose current controls it, a model."""
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, plain)
    if len(words) < 4 or words[2].text[:1].lower() != "v":
        return None
    model = words[3].text
    return Draft(
        reading.name,
        letter,
        reading.span,
        (words[0].text, words[1].text),
        model,
        None,
        read_pairs(reading, pairs),
        model,
        controls=(words[2].text,),
    )


def read_instance(letter: str, reading: Reading) -> Outcome:
    """X: the subcircuit is the last word before the first key=value."""
    plain, pairs = plain_and_pairs(reading)
    words = net_words(reading, [item for item in plain if item.kind != BRACED])
    if not words:
        return terminal_error(letter, 0, reading.span)
    last = len(words) - 1
    if not reading.is_subcircuit(words[last].text):
        known = [k for k, word in enumerate(words) if k and reading.is_subcircuit(word.text)]
        last = known[-1] if known else last
    name = words[last].text
    return Draft(
        reading.name,
        letter,
        reading.span,
        tuple(word.text for word in words[:last]),
        name,
        None,
        read_pairs(reading, pairs),
        subcircuit=name,
        overrides=tuple((key_name(pair.key), pair_formula(reading, pair)) for pair in pairs),
    )

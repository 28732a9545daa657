"""Split a card into nets, value words and parameters."""

from collections.abc import Sequence

from rulecheck.netlist.assignments import formula_at, key_name
from rulecheck.netlist.draft import Amount, Reading
from rulecheck.netlist.formula import Formula
from rulecheck.netlist.numbers import Number, read_number
from rulecheck.netlist.syntax import BRACED, GROUP, MARK, PAIR, QUOTED, WORD, Item

_LONGEST_SHEET_NAME = 4


def plain_and_pairs(reading: Reading) -> tuple[list[Item], list[Item]]:
    """The items behind the name: those before any keyword such as `PARAMS:`, and the pairs."""
    items = reading.card.items[1:]
    pairs = [item for item in items if item.kind == PAIR]
    plain: list[Item] = []
    for item in items:
        if item.kind == WORD and item.text.endswith(":") and len(item.text) > 1:
            break
        if item.kind != PAIR:
            plain.append(item)
    return plain, pairs


def fuse(text: str, items: Sequence[Item]) -> list[Item]:
    """Items with no blank between become one word (`Net-(Q1-D)`); commas separate."""
    result: list[Item] = []
    for item in items:
        last = result[-1] if result else None
        if item.kind == MARK:
            result.append(item)
        elif last is not None and last.kind != MARK and last.end == item.start:
            whole = text[last.start : item.end]
            result[-1] = Item(WORD, last.start, item.end, whole)
        else:
            result.append(item)
    return [item for item in result if item.kind != MARK]


def behind(items: Sequence[Item], end: int) -> list[Item]:
    """The items behind the nets, without a comma between."""
    rest = [item for item in items if item.start >= end]
    while rest and rest[0].kind == MARK:
        rest.pop(0)
    return rest


def with_decimal_commas(items: Sequence[Item]) -> list[Item]:
    """In the place of a value a comma between digits is a decimal one."""
    result: list[Item] = []
    for item in items:
        if len(result) > 1 and _decimal_comma(result[-2], result[-1], item):
            whole = Item(WORD, result[-2].start, item.end, f"{result[-2].text},{item.text}")
            result[-2:] = [whole]
        else:
            result.append(item)
    return result


def _decimal_comma(whole: Item, comma: Item, decimals: Item) -> bool:
    return (
        comma.text == ","
        and whole.end == comma.start
        and comma.end == decimals.start
        and whole.text.lstrip("+-").isdigit()
        and decimals.text[:1].isdigit()
    )


def net_words(reading: Reading, items: Sequence[Item]) -> list[Item]:
    """Words in node position: fused, groups that stand alone opened, blanks in names mended."""
    words: list[Item] = []
    for item in fuse(reading.text, items):
        words.extend(word for word in item.inner if word.kind != MARK) if (
            item.kind == GROUP
        ) else words.append(item)
    return mend_blanks(reading, words)


def mend_blanks(reading: Reading, words: list[Item]) -> list[Item]:
    """`/Main Supply/BUS`: a hierarchical net name of which the sheet's name holds a blank."""
    mended: list[Item] = []
    position = 0
    while position < len(words):
        end = _name_end(reading, words, position)
        if end is None:
            mended.append(words[position])
            position += 1
            continue
        word = words[position]
        whole = reading.text[word.start : words[end].end]
        remark = f"'{whole}' is taken as one net, of which the sheet's name holds a blank"
        reading.remark(word, remark, "rename the sheet without a blank")
        mended.append(Item(WORD, word.start, words[end].end, whole))
        position = end + 1
    return mended


def _name_end(reading: Reading, words: list[Item], start: int) -> int | None:
    """Where a name that begins here and holds blanks ends; None where none begins."""
    word = words[start]
    if not word.text.startswith("/") or "/" in word.text[1:]:
        return None
    for end in range(start + 1, min(start + _LONGEST_SHEET_NAME, len(words))):
        if words[end].text.startswith("/") or reading.is_model(words[end].text):
            return None
        if "/" in words[end].text and not _is_amount(words[end]):
            return end
    return None


def _is_amount(item: Item) -> bool:
    return item.kind in (BRACED, GROUP) or read_number(item.text) is not None


def written(text: str, items: Sequence[Item]) -> str:
    """The items as the card has them; a lone quoted text without its quotes."""
    if len(items) == 1 and items[0].kind == QUOTED:
        return items[0].text
    pieces: list[str] = []
    end = -1
    for item in items:
        glued = item.start == end
        piece = text[item.start : item.end]
        if glued and pieces:
            pieces[-1] += piece
        else:
            pieces.append(piece)
        end = item.end
    return " ".join(pieces)


def take_amount(reading: Reading, items: Sequence[Item]) -> tuple[Amount, list[Item]]:
    """The number or expression at the head of the items, and the rest; None takes nothing."""
    amount, end = amount_at(reading, items, 0)
    return amount, list(items[end:])


def amount_at(reading: Reading, items: Sequence[Item], start: int) -> tuple[Amount, int]:
    """The number or expression that begins at that item, and where the rest begins."""
    if start >= len(items):
        return None, start
    end = start + 1
    while end < len(items) and items[end].kind != MARK and items[end].start == items[end - 1].end:
        end += 1
    run = items[start:end]
    whole = reading.text[run[0].start : run[-1].end] if len(run) > 1 else _own_text(reading, run[0])
    if any(item.kind == BRACED for item in run) or run[0].kind == GROUP:
        return formula_at(reading.card.line, run[0].start, run[-1].end), end
    if run[0].kind == QUOTED:
        if whole.startswith('"'):
            return None, start
        return formula_at(reading.card.line, run[0].start, run[-1].end), end
    amount = _word_amount(reading, run[0], whole)
    return amount, start if amount is None else end


def _own_text(reading: Reading, item: Item) -> str:
    return item.text if item.kind == WORD else reading.text[item.start : item.end]


def _word_amount(reading: Reading, item: Item, whole: str) -> Amount:
    number = read_number(whole)
    if number is not None:
        remark_number(reading, item, number)
        return number.value
    if reading.is_parameter(whole) and not reading.is_model(whole):
        reading.remark(item, f"'{whole}' is taken as the parameter of that name", "write {...}")
        return formula_at(reading.card.line, item.start, item.start + len(whole))
    return None


def remark_number(reading: Reading, item: Item, number: Number) -> None:
    if number.remark:
        reading.remark(item, number.remark)


def read_pairs(
    reading: Reading, pairs: Sequence[Item], leave_out: frozenset[str] = frozenset()
) -> tuple[tuple[str, Amount | str], ...]:
    """Parameters of the card: lower-case names with underscores, numbers where they are."""
    found: dict[str, Amount | str] = {}
    for pair in pairs:
        name = key_name(pair.key).replace("-", "_")
        if name not in leave_out:
            found[name] = pair_amount(reading, pair)
    return tuple(found.items())


def pair_amount(reading: Reading, pair: Item) -> Amount | str:
    number = read_number(pair.text) if pair.value_kind == WORD else None
    if number is not None:
        remark_number(reading, pair, number)
        return number.value
    if pair.value_kind == BRACED or (pair.value_kind == WORD and _computes(reading, pair.text)):
        return pair_formula(reading, pair)
    single = reading.text[pair.value_start : pair.value_start + 1] == "'"
    return pair_formula(reading, pair) if single and pair.value_kind == QUOTED else pair.text


def _computes(reading: Reading, text: str) -> bool:
    return "{" in text or reading.is_parameter(text)


def pair_formula(reading: Reading, pair: Item) -> Formula:
    return formula_at(reading.card.line, pair.value_start, pair.end)

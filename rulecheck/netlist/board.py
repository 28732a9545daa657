"""Elements of a board whose letter is no device letter, or clashes with one."""

import re

from rulecheck.netlist.draft import Draft, Reading
from rulecheck.netlist.fields import (
    fuse,
    mend_blanks,
    net_words,
    plain_and_pairs,
    read_pairs,
    written,
)
from rulecheck.netlist.numbers import read_number
from rulecheck.netlist.syntax import GROUP, Item

UNTOLD = "?"
_PREFIX = re.compile(r"[A-Za-z]*")

# Designators of more than one letter that begin like a device letter and mean something else.
CLASHING = frozenset({
    "ANT", "BAT", "BR", "BT", "BTN", "BZ", "CB", "CN", "CON", "CONN", "CR", "DISP", "DNP",
    "FAN", "FB", "FD", "FID", "FL", "FS", "FUSE", "GDT", "GND", "HDR", "HS", "IC",
    "ICSP", "IN", "INP", "ISO", "JP", "KEY", "LCD", "LD", "LED", "LOGO", "LS", "MCU", "MH",
    "MIC", "MK", "MOD", "MOT", "MOV", "MP", "MTG", "NTC", "PCB", "PS", "PTC", "PWR", "REL",
    "RLY", "RN",
    "RT", "RV", "SB", "SCR", "SJ", "SP", "SPK", "SW", "TH", "TP", "TR", "TVS", "VAR", "VR",
    "ZD",
})  # fmt: skip
_AUTOMATIC = re.compile(r"(?:net-|unconnected|nc[-_0-9]|no_?connect|/|n\$?[0-9])", re.IGNORECASE)


def clashes(name: str) -> bool:
    """Whether the designator, such as TP or CN, is more than its first letter."""
    match = _PREFIX.match(name)
    return match is not None and match[0].upper() in CLASHING


def is_certain(draft: Draft, reading: Reading) -> bool:
    """Whether a card with a clashing designator shows by value or model what it is."""
    has_value = draft.value is not None and draft.letter not in "VI"
    if draft.subcircuit or draft.letter == "T":
        return True
    if draft.letter in "VI":
        has_value = draft.waveform is not None or read_number(draft.text.split(" ")[-1]) is not None
    controlled = bool(draft.controls) and draft.letter not in "FH"
    return has_value or reading.is_model(draft.model) or controlled


def read_board_part(reading: Reading) -> Draft:
    """Nets as they come; the value text is the last word, or what is no net at the end."""
    plain, pairs = plain_and_pairs(reading)
    words = _words(reading, plain)
    count = _count_nets(reading, words)
    nets = tuple(word.text for word in words[:count])
    tail = [item for item in fuse(reading.text, plain) if _behind(item, words, count)]
    return Draft(
        reading.name,
        UNTOLD,
        reading.span,
        nets,
        written(reading.text, tail),
        None,
        read_pairs(reading, pairs),
    )


def _words(reading: Reading, plain: list[Item]) -> list[Item]:
    """Groups are opened at the front only: behind a net they belong to the value text."""
    fused = fuse(reading.text, plain)
    front = next((k for k, item in enumerate(fused) if item.kind != GROUP), len(fused))
    return [*net_words(reading, fused[:front]), *mend_blanks(reading, fused[front:])]


def _behind(item: Item, words: list[Item], count: int) -> bool:
    return count < len(words) and item.end > words[count].start


def _count_nets(reading: Reading, words: list[Item]) -> int:
    """All but the last word, unless that one is a net too; text in several words is seen by its
    signs."""
    if not words:
        return 0
    texts = [word.text for word in words]
    for position, word in enumerate(words):
        if position and (word.kind == GROUP or word.text.startswith("@")):
            return position - 1
        if position and "@" in word.text:
            return position
    if all(reading.is_net(text) or _AUTOMATIC.match(text) for text in texts):
        return len(words)
    return len(words) - 1

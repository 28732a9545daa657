"""Text from files without the signs that would steer a terminal or hide what is written."""

import re
import unicodedata

_COLOUR = re.compile(r"\x1b\[[0-9;]*m")


def harmless(text: str, colored: bool) -> str:
    """A whole report without a sign that steers a terminal or turns the order of what follows.

    The codes are those that JSON knows, too. Colour codes stay where the report may have them.
    """
    if text.isascii() and text.replace("\n", "").isprintable():
        return text
    if not colored:
        return "".join(map(shown, text))
    pieces = [harmless(piece, False) for piece in _COLOUR.split(text)]
    codes = [*_COLOUR.findall(text), ""]
    return "".join(piece + code for piece, code in zip(pieces, codes, strict=True))


def shown(sign: str) -> str:
    """The sign itself, or its code where it is one that cannot be seen."""
    if sign.isprintable() or sign in "\n\t" or unicodedata.category(sign) == "Zs":
        return sign
    return f"\\u{ord(sign):04x}" if ord(sign) <= 0xFFFF else f"\\U{ord(sign):08x}"

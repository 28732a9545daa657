"""Text from a file made safe for a line of output: no control signs, seven bits where asked."""

from rulecheck.report.look import Look
from rulecheck.values import shown

_SUBSTITUTES = str.maketrans({"…": "..", "±": "+-", "→": "->", "µ": "u", "Ω": "ohm", "·": "-"})


def visible(text: str, look: Look) -> str:
    """Control signs but line ends become their codes; with `look.ascii` no sign above 126 stays."""
    clean = text if text.isprintable() else "".join(map(shown, text))
    if not look.ascii:
        return clean
    return clean.translate(_SUBSTITUTES).encode("ascii", "backslashreplace").decode("ascii")


def one_line(text: str, look: Look) -> str:
    return visible(" ".join(text.split()), look)

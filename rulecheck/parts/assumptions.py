"""Readings that the user may overrule, gathered so that equal ones make one sentence.

D3 read as a zener diode (ZD12)
D7 read as a zener diode (ZD12)      ->  "D3 and D7 read as a zener diode (ZD12)"
"""

from rulecheck.values import natural_key
from rulecheck.values.record import Mutable, field


class Assumptions(Mutable):
    """Names by sentence, in the order in which the sentences first came up."""

    names: dict[str, list[str]] = field(default_factory=dict)

    def add(self, name: str, sentence: str) -> None:
        if sentence:
            self.names.setdefault(sentence, []).append(name)

    def sentences(self) -> tuple[str, ...]:
        return tuple(f"{_listed(names)} {sentence}" for sentence, names in self.names.items())


def _listed(names: list[str]) -> str:
    ordered = sorted(names, key=natural_key)
    if len(ordered) == 1:
        return ordered[0]
    return f"{', '.join(ordered[:-1])} and {ordered[-1]}"

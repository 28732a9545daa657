"""A key of a YAML file as a manual page, with an example at its place in the file."""

from collections.abc import Mapping, Sequence

from rulecheck.reading.keys import EACH, NO_WORD, Key, Words
from rulecheck.report.manual_page import Block, ManualPage

_EXAMPLE_VALUE = "..."


def key_page(same: Sequence[Key], keys: Mapping[str, Key], words: Words, file: str) -> ManualPage:
    """The page of a key, which may stand at several places and mean the same there.

    `file` is what the file is called: `a stage sheet`; `keys` are all of it by place.
    """
    key = same[0]
    word = words.get(key.place, NO_WORD)
    inner = tuple(k.name for k in keys.values() if _is_below(k.path, key.path))
    rows = (
        ("", word.sentence),
        ("place", ", ".join(other.place for other in same)),
        *((("given", "always"),) if key.required else ()),
        ("value", key.form),
        *((("keys", ", ".join(inner)),) if inner else ()),
    )
    lines = example_lines(key, keys, words)
    return ManualPage(key.name, f"key of {file}", rows, (Block("example", tuple(lines)),))


def example_lines(key: Key, keys: Mapping[str, Key], words: Words) -> list[str]:
    """The key with a value, below the keys that lead to it, beside those that must be there."""
    lines: list[str] = []
    lead = rest = ""
    for depth, step in enumerate(key.path, 1):
        path = key.path[:depth]
        above = words.get(".".join(path[:-1]))
        if step == EACH and above is not None and not above.called:
            lead, rest = f"{rest}- ", f"{rest}  "
            continue
        for entry in keys.values():
            if entry.required and entry.path[:-1] == path[:-1] and entry.path != path:
                lines.append(f"{lead}{entry.name}: {_value(entry, keys, words)}")
                lead = rest
        name = above.called if step == EACH and above is not None else step
        last = depth == len(key.path)
        lines.append(f"{lead}{name}:{f' {_value(key, keys, words)}' if last else ''}")
        lead = rest = f"{rest}  "
    return lines


def _value(key: Key, keys: Mapping[str, Key], words: Words) -> str:
    word = words.get(key.place, NO_WORD)
    if word.example:
        return word.example
    inner = [k for k in keys.values() if _is_below(k.path, key.path)]
    wanted = [k for k in inner if k.required] or inner[:1]
    if not wanted:
        return _EXAMPLE_VALUE
    entries = ", ".join(f"{k.name}: {_value(k, keys, words)}" for k in wanted)
    entry = f"{{{entries}}}"
    if wanted[0].path[-2] != EACH:
        return entry
    return f"{{{word.called}: {entry}}}" if word.called else f"[{entry}]"


def _is_below(path: tuple[str, ...], above: tuple[str, ...]) -> bool:
    return path[:-1] in (above, (*above, EACH))

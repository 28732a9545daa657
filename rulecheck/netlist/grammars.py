"""The door to the parser generator: grammars of the program, each compiled once a process."""

from functools import cache

from lark import Lark, Transformer

from rulecheck.reading import packaged


def compile_grammar(name: str, transformer: Transformer) -> Lark:  # type: ignore[type-arg]
    """An LALR parser whose rules are reduced by the transformer as it goes."""
    return Lark(
        _grammar("", name)[1],
        parser="lalr",
        lexer="contextual",
        transformer=transformer,
        maybe_placeholders=False,
        propagate_positions=False,
        import_paths=[_grammar],
    )


@cache
def _grammar(_: str | None, name: str) -> tuple[str, str]:
    return name, (packaged("grammar") / name).read_text(encoding="utf-8")

"""The grammars and rules of the program are found wherever it is installed."""

from rulecheck.reading import packaged


def test_the_grammars_are_there() -> None:
    names = {entry.name for entry in packaged("grammar").iterdir()}
    assert {"card.lark", "value.lark", "expression.lark"} <= names


def test_the_rules_are_a_folder() -> None:
    assert packaged("rules").is_dir()

"""argparse with this program's manners: one line an error, and a guess at what was meant."""

import argparse
import difflib
from collections.abc import Iterable, Sequence
from typing import Any, NoReturn


class _Formatter(argparse.RawDescriptionHelpFormatter):
    """Leaves the indented names of commands room on the line of their help."""

    def add_argument(self, action: argparse.Action) -> None:
        super().add_argument(action)
        if isinstance(action, argparse._SubParsersAction):
            self._action_max_length += self._indent_increment


class Parser(argparse.ArgumentParser):
    """A parser whose help keeps its lines, and whose errors say what to do."""

    def __init__(self, **settings: Any) -> None:
        settings.setdefault("formatter_class", _Formatter)
        super().__init__(allow_abbrev=False, **settings)

    def parse_args(  # type: ignore[override]
        self, args: Sequence[str] | None = None, namespace: argparse.Namespace | None = None
    ) -> argparse.Namespace:
        values, unknown = self.parse_known_args(args, namespace)
        if unknown:
            asked = self.of_command(getattr(values, "command", ""))
            asked.error(f"'{unknown[0]}' is nothing it takes{asked._guess(unknown[0])}")
        return values

    def error(self, message: str) -> NoReturn:
        """One line and status 2."""
        self.exit(2, f"rulecheck: error: {message}; `{self.prog} --help` shows how to call it\n")

    def _check_value(self, action: argparse.Action, value: Any) -> None:
        choices = [str(choice) for choice in action.choices or ()]
        if not choices or str(value) in choices:
            return
        what = "command" if action.dest == "command" else "/".join(action.option_strings)
        lead = f"there is no {what} '{value}'" if what else f"there is no '{value}'"
        raise argparse.ArgumentError(
            None, f"{lead}{did_you_mean(str(value), choices)}: it is one of {', '.join(choices)}"
        )

    def of_command(self, name: str) -> "Parser":
        """The parser of that command; this one where there is none."""
        commands: dict[str, Parser] = {}
        for action in self._actions:
            if isinstance(action, argparse._SubParsersAction):
                commands.update(action.choices)
        return commands.get(name, self)

    def _guess(self, unknown: str) -> str:
        options = [name for action in self._actions for name in action.option_strings]
        return did_you_mean(unknown.partition("=")[0], options) if unknown[:1] == "-" else ""


def did_you_mean(word: str, known: Iterable[str]) -> str:
    """` (did you mean 'lint'?)`, or nothing where nothing is close."""
    close = difflib.get_close_matches(word, list(known), 1)
    return f" (did you mean '{close[0]}'?)" if close else ""

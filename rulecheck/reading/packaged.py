"""The grammars and rule packs that travel with the program."""

from importlib.resources import files
from importlib.resources.abc import Traversable
from pathlib import Path
from typing import Literal


def packaged(kind: Literal["grammar", "rules"]) -> Traversable:
    """The folder of that kind: inside an installed wheel, or at the top of a checkout.

    Raises FileNotFoundError where the installation is incomplete.
    """
    inside = files("rulecheck") / "_data" / kind
    if inside.is_dir():
        return inside
    beside = Path(__file__).resolve().parents[2] / kind
    if beside.is_dir():
        return beside
    raise FileNotFoundError(f"the folder {kind} of the program is missing: install it again")

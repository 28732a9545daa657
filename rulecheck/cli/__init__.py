"""The command line. Only the arguments are read here; a command's own module does its work."""

from rulecheck.cli.entry import main

__all__ = ["main"]

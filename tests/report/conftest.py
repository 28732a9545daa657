"""The demo serves the tests of the documents too."""

from tests.command.conftest import hut, written_demo

__all__ = ["hut", "written_demo"]

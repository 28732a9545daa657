"""The demo, written once for all tests of the commands."""

import shutil
from pathlib import Path

import pytest

from tests.command.running import run


@pytest.fixture(scope="session")
def written_demo(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("demo") / "hut"
    done = run("demo", folder, folder=folder.parent)
    assert (done.returncode, done.stderr) == (0, "")
    return folder


@pytest.fixture
def hut(written_demo: Path, tmp_path: Path) -> Path:
    """A copy of the demo that a test may change."""
    return Path(shutil.copytree(written_demo, tmp_path / "hut"))

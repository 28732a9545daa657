"""Shell completion: the scripts are sound, complete what there is, and go where shells look."""

import importlib.util
import shutil
import subprocess

import pytest

from rulecheck.cli.arguments import SHELLS
from rulecheck.cli.completion_command import completion_file
from tests.command.running import clean_environment, run

_COMPLETE = """
source "$1"; shift
handler=$(complete -p rulecheck | sed 's/.*-F \\([^ ]*\\).*/\\1/')
COMP_WORDS=("$@"); COMP_CWORD=$(($# - 1)); COMPREPLY=()
"$handler"
printf '%s\\n' "${COMPREPLY[@]}"
"""


@pytest.fixture(scope="module")
def scripts(tmp_path_factory):
    folder = tmp_path_factory.mktemp("completion")
    for shell in SHELLS:
        done = run("completion", shell, "-o", folder / shell, folder=folder)
        assert (done.returncode, done.stderr) == (0, "")
    return folder


@pytest.mark.parametrize("shell", SHELLS)
def test_the_script_is_one_that_the_shell_reads(shell, scripts):
    if shutil.which(shell) is None:
        pytest.skip(f"{shell} is not here")
    subprocess.run([shell, "-n", scripts / shell], check=True)


@pytest.mark.parametrize(
    ("words", "completed"),
    [
        (["li"], ["lint"]),
        (["lint", "--fail-at", ""], ["error", "warning", "note"]),
        (["quadrants", "pump-n"], ["pump-npc.cir", "pump-npc-faulty.cir"]),
        (["rules", "reverse-current-p"], ["reverse-current-path"]),
        (["help", "line-v"], ["line-voltage"]),
        (["completion", ""], ["bash", "zsh", "fish"]),
    ],
)
def test_bash_completes_commands_options_files_and_words(words, completed, scripts, written_demo):
    bash = shutil.which("bash")
    if bash is None:
        pytest.skip("bash is not here")
    done = subprocess.run(
        [bash, "-c", _COMPLETE, "bash", scripts / "bash", "rulecheck", *words],
        cwd=written_demo,
        env=clean_environment(),
        capture_output=True,
        encoding="utf-8",
        check=False,
    )
    assert set(completed) <= set(done.stdout.split())


@pytest.mark.parametrize("shell", SHELLS)
def test_the_script_is_installed_where_the_shell_looks_for_it(shell, tmp_path):
    home = {"HOME": str(tmp_path), "XDG_DATA_HOME": "", "XDG_CONFIG_HOME": ""}
    done = run("completion", shell, "--install", folder=tmp_path, environment=home)
    place = completion_file(shell, home)
    assert (done.returncode, done.stderr) == (0, "")
    assert done.stdout.startswith(f"Wrote {place}\n")
    assert "rulecheck" in place.read_text(encoding="utf-8")


def test_without_the_library_it_says_what_to_install(monkeypatch, tmp_path):
    monkeypatch.setattr(importlib.util, "find_spec", lambda name: None)
    done = run("completion", "bash", folder=tmp_path)
    assert done.returncode == 2
    assert "pip install shtab" in done.stderr

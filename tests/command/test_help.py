"""`help`: every rule, fact, parameter and key has a page, and its example is a true one."""

import pytest
import yaml

from rulecheck.cli.file_shapes import FILE_SHAPES
from rulecheck.cli.manual import manual
from rulecheck.cli.packs import load_rulebook
from rulecheck.facts import VOCABULARY
from rulecheck.reading import SourceText, json_schema, read_yaml
from rulecheck.reading.keys import keys_of, put_words
from rulecheck.report.key_page import example_lines
from rulecheck.report.look import Look
from rulecheck.report.manual_page import render
from tests.command.running import run
from tests.report.examples import rendered

KEYS = [(name, key) for name, file in FILE_SHAPES.items() for key in keys_of(file.shape)]


@pytest.fixture(scope="module")
def rulebook():
    return load_rulebook(())


@pytest.fixture(scope="module")
def entries(rulebook):
    return manual(rulebook)


def test_every_rule_fact_parameter_and_key_has_a_page(entries, rulebook):
    words = {word for _, found_by, _ in entries for word in found_by}
    assert {rule.id for rule in rulebook.rules} <= words
    assert set(rulebook.parameters) <= words
    for term in VOCABULARY.values():
        own = {f"{term.name}.{entry.name}" for entry in (*term.fields, *term.links)}
        assert {term.name, *own} <= words
    assert {key.place for _, key in KEYS} <= words


@pytest.mark.parametrize("name", FILE_SHAPES)
def test_every_key_has_its_words_and_no_word_is_left_over(name):
    file = FILE_SHAPES[name]
    assert {key.place for key in keys_of(file.shape)} == set(file.words)


@pytest.mark.parametrize("name", FILE_SHAPES)
def test_the_example_of_every_key_is_accepted(name):
    file = FILE_SHAPES[name]
    keys = {key.place: key for key in keys_of(file.shape)}
    for key in keys.values():
        text = "\n".join(example_lines(key, keys, file.words))
        reading = read_yaml(SourceText(f"{key.place}.yaml", text), file.shape)
        assert [problem.line() for problem in reading.problems] == [], text
        assert found(yaml.load(text, yaml.BaseLoader), key.path), text


def found(content, path):
    if not path:
        return True
    if path[0] == "*":
        inner = content.values() if isinstance(content, dict) else content
        return any(found(entry, path[1:]) for entry in inner)
    return path[0] in content and found(content[path[0]], path[1:])


def test_an_editor_gets_the_same_words_with_the_schema():
    file = FILE_SHAPES["sheet"]
    schema = put_words(json_schema(file.shape), file.words)
    port = schema["$defs"]["PortEntry"]["properties"]
    assert port["supplies"]["description"] == file.words["ports.*.supplies"].sentence
    assert port["between"]["examples"] == ["[BAT, PGND]"]


@pytest.mark.parametrize("width", [60, 80])
def test_the_pages_keep_to_the_width_but_for_examples(width, entries):
    text = rendered(render, [page for _, _, page in entries], Look(width))
    prose = [line for line in text.splitlines() if not line.startswith("      ")]
    assert max(map(len, prose)) <= width


@pytest.mark.parametrize(
    ("word", "said"),
    [
        ("lint", "example:  rulecheck lint"),
        ("reverse-current-path", "on every position, pack position"),
        ("derate.blocking", "used by  blocking-rating"),
        ("blocks-forward", "fact of a position, V"),
        ("position", "subject that rules judge"),
        ("dead time", "key of a stage sheet"),
        ("Test_Voltage", "barriers.*.test-voltage"),
        ("ports.between", "between: [BAT, PGND]"),
        ("ports.*.between", "between: [BAT, PGND]"),
        ("", "each of these words has a page"),
    ],
)
def test_a_word_is_found_by_any_of_its_names(word, said, tmp_path):
    done = run("help", *word.split(), folder=tmp_path)
    assert (done.returncode, done.stderr) == (0, "")
    assert said in done.stdout


@pytest.mark.parametrize(
    ("slip", "meant"),
    [("revers-current-path", "reverse-current-path"), ("betwen", "between"), ("lnt", "lint")],
)
def test_a_slip_is_answered_with_what_was_meant(slip, meant, tmp_path):
    done = run("help", slip, folder=tmp_path)
    assert done.returncode == 2
    assert f"'{meant}'" in done.stderr
    assert len(done.stderr.splitlines()) == 1


def test_the_rules_of_the_project_have_pages_too(hut):
    assert "on every part, pack hut" in run("help", "spare-on-the-shelf", folder=hut).stdout

"""`schema` prints what an editor needs: it takes every shipped file and refuses mistakes."""

import json
import re
from pathlib import Path

import jsonschema
import pytest
import yaml

from tests.command.running import ROOT, run

DEMO = ROOT / "rulecheck" / "demo_data"
SHIPPED = [
    *(("sheet", path) for path in sorted(DEMO.glob("*.stage.yaml"))),
    *(("parts", path) for path in sorted(DEMO.glob("*.parts.yaml"))),
    *(("rules", path) for path in sorted(DEMO.glob("*.rules.yaml"))),
    *(("rules", path) for path in sorted((ROOT / "rules").rglob("*.rules.yaml"))),
    ("project", DEMO / "rulecheck.yaml"),
]


class PlainLoader(yaml.SafeLoader):
    """YAML 1.2 as editors read it: a day, `yes` and `no` are texts."""


PlainLoader.yaml_implicit_resolvers = {
    first: [
        (tag, pattern) for tag, pattern in resolvers if tag.endswith((":int", ":float", ":null"))
    ]
    for first, resolvers in yaml.SafeLoader.yaml_implicit_resolvers.items()
}
PlainLoader.add_implicit_resolver(
    "tag:yaml.org,2002:bool", re.compile(r"(?:true|false)\Z"), list("tf")
)


@pytest.fixture(scope="module")
def schemas(tmp_path_factory: pytest.TempPathFactory) -> dict[str, dict[str, object]]:
    folder = tmp_path_factory.mktemp("schemas")
    names = ("sheet", "parts", "rules", "project")
    return {name: json.loads(run("schema", name, folder=folder).stdout) for name in names}


@pytest.mark.parametrize(("name", "path"), SHIPPED, ids=lambda value: Path(str(value)).name)
def test_a_shipped_file_is_accepted(name, path, schemas):
    content = yaml.load(path.read_text(encoding="utf-8"), PlainLoader)
    jsonschema.validate(content, schemas[name])


@pytest.mark.parametrize(
    ("name", "text"),
    [
        ("sheet", "prots: {}"),
        ("sheet", "ports: {bus: {between: BUS}}"),
        ("sheet", "ports: {bus: {volts: 4}}"),
        ("sheet", "switching: {frequency: [1, 2, {}]}"),
        ("parts", "parts: {X: {kind: mosfett}}"),
        ("parts", "parts: {X: {kind: mosfet, ratings: {volts: 100 V}}}"),
        ("parts", "parts: []"),
        ("rules", "rules: []"),
        ("rules", "{pack: p, rules: [{id: x}]}"),
        ("rules", "{pack: p, change: [{rule: x, reason: y, level: fatal}]}"),
        ("project", "netlist: [a.cir]"),
        ("project", "fail-at: never"),
        ("project", "deviations: [{rule: x, subject: y, reason: z}]"),
    ],
)
def test_a_mistake_is_refused(name, text, schemas):
    with pytest.raises(jsonschema.ValidationError):
        jsonschema.validate(yaml.load(text, PlainLoader), schemas[name])


def test_a_schema_can_be_written_to_a_file(tmp_path):
    assert run("schema", "sheet", "-o", "sheet.json", folder=tmp_path).returncode == 0
    assert "properties" in (tmp_path / "sheet.json").read_text(encoding="utf-8")

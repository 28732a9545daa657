"""`rulecheck schema NAME`: the JSON Schema of one of the YAML files, for an editor."""

import json

from rulecheck.cli.complaints import complain
from rulecheck.cli.output import Document, write_documents
from rulecheck.cli.project import ProjectFile
from rulecheck.cli.request import Request
from rulecheck.parts import PartDataFile
from rulecheck.reading import json_schema
from rulecheck.rulebook import PackFile
from rulecheck.stage import SheetFile

SHAPES = {
    "sheet": SheetFile,
    "parts": PartDataFile,
    "rules": PackFile,
    "project": ProjectFile,
}


def run(request: Request) -> int:
    """Print the schema, or write it to each file named by `-o`."""
    text = json.dumps(json_schema(SHAPES[request.names[0]]), indent=1) + "\n"
    problems = write_documents(Document(text, output.file) for output in request.outputs)
    return complain(problems) if problems else 0

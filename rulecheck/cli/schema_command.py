"""`rulecheck schema NAME`: the JSON Schema of one of the YAML files, for an editor."""

import json

from rulecheck.cli.complaints import complain
from rulecheck.cli.file_shapes import FILE_SHAPES
from rulecheck.cli.output import Document, write_documents
from rulecheck.cli.request import Request
from rulecheck.reading import json_schema
from rulecheck.reading.keys import put_words


def run(request: Request) -> int:
    """Print the schema, or write it to each file named by `-o`."""
    file = FILE_SHAPES[request.names[0]]
    schema = put_words(json_schema(file.shape), file.words)
    text = json.dumps(schema, indent=1) + "\n"
    problems = write_documents(Document(text, output.file) for output in request.outputs)
    return complain(problems) if problems else 0

"""Which renderer serves which format, by the name of its module.

The modules are named, not imported, so that a run loads the one renderer it uses: JSON never
pays for the terminal library.
"""

LINT = {
    "table": "rulecheck.report.lint_table",
    "lines": "rulecheck.report.lint_lines",
    "json": "rulecheck.report.lint_json",
    "sarif": "rulecheck.report.lint_sarif",
    "junit": "rulecheck.report.lint_junit",
    "markdown": "rulecheck.report.lint_markdown",
}
QUADRANTS = {
    "table": "rulecheck.report.quadrant_table",
    "json": "rulecheck.report.quadrant_json",
    "csv": "rulecheck.report.quadrant_csv",
    "markdown": "rulecheck.report.quadrant_markdown",
}
BY_SUFFIX = {
    ".json": "json",
    ".sarif": "sarif",
    ".xml": "junit",
    ".md": "markdown",
    ".csv": "csv",
}
"""The format of `-o FILE` where no `--format` says it."""

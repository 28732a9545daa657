"""`rulecheck quadrants NETLIST`: the table of positions."""

from rulecheck.cli.analysing import Answer, analyse_one, finish
from rulecheck.cli.complaints import complain
from rulecheck.cli.formats import QUADRANTS
from rulecheck.cli.renderers import documents
from rulecheck.cli.request import Request
from rulecheck.pipeline import Unusable
from rulecheck.report import quadrant_result


def run(request: Request) -> int:
    """Print the table in each format asked for; a missing quadrant is no failure here."""
    return answer(request).status


def answer(request: Request) -> Answer:
    """The same, with the files that were read."""
    analysis = analyse_one(request)
    if isinstance(analysis, Unusable):
        return Answer(complain(analysis.problems, request.limits))
    result = quadrant_result(analysis.stage, analysis.capabilities, analysis.demands)
    reports = documents(result, request, QUADRANTS, "table")
    status = finish(reports, analysis.inputs, analysis.problems, limits=request.limits)
    return Answer(status, analysis.inputs)

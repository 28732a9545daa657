"""`rulecheck rules`: list the rules in force, print one, its vocabulary, or try the examples."""

import difflib

from rulecheck.cli.analysing import finish
from rulecheck.cli.complaints import complain, refuse
from rulecheck.cli.output import Document
from rulecheck.cli.packs import load_rulebook
from rulecheck.cli.project import find_project
from rulecheck.cli.renderers import look_at, rendered
from rulecheck.cli.request import Request
from rulecheck.cli.trials import Trials, trials_text, try_packs
from rulecheck.facts import vocabulary_text
from rulecheck.report.manual_page import render
from rulecheck.report.rule_page import rule_page
from rulecheck.rulebook import Rulebook, rules_text
from rulecheck.values import error, errors_of


def run(request: Request) -> int:
    """0; 1 where an example says something else than it should; 2 where a pack is at fault."""
    project = find_project(request.project, request.limits)
    if errors_of(project.problems):
        return complain(project.problems, request.limits)
    packs = tuple(dict.fromkeys((*project.packs, *request.rules)))
    if request.try_packs:
        return _try(request, request.names)
    if request.facts:
        return finish(_documents(vocabulary_text(), request), (*packs, project.file), ())
    rulebook = load_rulebook(packs, limits=request.limits)
    if not isinstance(rulebook, Rulebook):
        return complain(rulebook, request.limits)
    shown = _shown(request, rulebook)
    if isinstance(shown, int):
        return shown
    return finish(shown, (*packs, project.file), ())


def _documents(text: str, request: Request) -> list[Document]:
    return [Document(text, output.file) for output in request.outputs]


def _shown(request: Request, rulebook: Rulebook) -> list[Document] | int:
    """The list of all rules, or the page of the one named; a status where there is none."""
    if not request.names:
        return _documents(rules_text(rulebook), request)
    wanted = request.names[0]
    rule = next((rule for rule in rulebook.rules if rule.id == wanted), None)
    if rule is None:
        return _no_such_rule(wanted, rulebook)
    page = rule_page(rule, rulebook)
    return [
        Document(rendered((page,), render, look_at(request, output.file)), output.file, True)
        for output in request.outputs
    ]


def _no_such_rule(wanted: str, rulebook: Rulebook) -> int:
    off = next((off for off in rulebook.switched_off if off.rule == wanted), None)
    if off is not None:
        what = f"rule '{wanted}' is switched off: {off.reason}"
        return complain((error(off.span, what, f"pack {off.pack} does it"),))
    close = difflib.get_close_matches(wanted, [rule.id for rule in rulebook.rules], 1)
    remedy = f"did you mean '{close[0]}'?" if close else "`rulecheck rules` lists all of them"
    return refuse(f"no rule is called '{wanted}'", remedy)


def _try(request: Request, packs: tuple[str, ...]) -> int:
    trials = try_packs(packs, request.limits)
    if not isinstance(trials, Trials):
        return complain(trials, request.limits)
    documents = _documents(trials_text(trials), request)
    return finish(documents, packs, (), 0 if trials.passed else 1)

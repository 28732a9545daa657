"""`rulecheck rules`: list the rules in force, print one, its vocabulary, or try the examples."""

import difflib

from rulecheck.cli.analysing import finish
from rulecheck.cli.complaints import complain
from rulecheck.cli.output import Document
from rulecheck.cli.packs import load_rulebook
from rulecheck.cli.project import find_project
from rulecheck.cli.request import Request
from rulecheck.cli.trials import Trials, trials_text, try_packs
from rulecheck.facts import vocabulary_text
from rulecheck.rulebook import Rulebook, rule_text, rules_text
from rulecheck.values import Problem, Span, error, errors_of


def run(request: Request) -> int:
    """0; 1 where an example says something else than it should; 2 where a pack is at fault."""
    project = find_project(request.project, request.limits)
    if errors_of(project.problems):
        return complain(project.problems, request.limits)
    packs = tuple(dict.fromkeys((*project.packs, *request.rules)))
    if request.try_packs:
        return _try(request, request.names)
    text = vocabulary_text() if request.facts else _rules_text(request, packs)
    if not isinstance(text, str):
        return complain(text, request.limits)
    return finish(_documents(text, request), (*packs, project.file), ())


def _documents(text: str, request: Request) -> list[Document]:
    return [Document(text, output.file) for output in request.outputs]


def _rules_text(request: Request, packs: tuple[str, ...]) -> str | tuple[Problem, ...]:
    rulebook = load_rulebook(packs, limits=request.limits)
    if not isinstance(rulebook, Rulebook):
        return rulebook
    if not request.names:
        return rules_text(rulebook)
    wanted = request.names[0]
    rule = next((rule for rule in rulebook.rules if rule.id == wanted), None)
    if rule is not None:
        return rule_text(rule, rulebook)
    return (_no_such_rule(wanted, rulebook),)


def _no_such_rule(wanted: str, rulebook: Rulebook) -> Problem:
    off = next((off for off in rulebook.switched_off if off.rule == wanted), None)
    if off is not None:
        return error(off.span, f"rule '{wanted}' is switched off: {off.reason}", "switch it on")
    close = difflib.get_close_matches(wanted, [rule.id for rule in rulebook.rules], 1)
    remedy = f"did you mean '{close[0]}'?" if close else "`rulecheck rules` lists all of them"
    return error(Span("rules", 1), f"no rule is called '{wanted}'", remedy)


def _try(request: Request, packs: tuple[str, ...]) -> int:
    trials = try_packs(packs, request.limits)
    if not isinstance(trials, Trials):
        return complain(trials, request.limits)
    documents = _documents(trials_text(trials), request)
    return finish(documents, packs, (), 0 if trials.passed else 1)

"""Load packs in order: later ones add rules, change levels and parameters, switch rules off."""

import difflib
import hashlib
from collections.abc import Iterable, Sequence

from rulecheck.reading import SourceText
from rulecheck.rulebook.pack_reading import Change, Pack, read_pack
from rulecheck.rulebook.places import place_in_text
from rulecheck.rulebook.ready import Missing, make_ready
from rulecheck.rulebook.rulebook import PackInForce, ReadyRule, Rule, Rulebook, SwitchedOff
from rulecheck.rulebook.scope import OTHER, Parameter
from rulecheck.values import Problem, error
from rulecheck.values.record import Mutable, field, replace


class _Layers(Mutable):
    """The rulebook while pack after pack is laid on it."""

    rules: dict[str, Rule] = field(default_factory=dict)
    parameters: dict[str, Parameter] = field(default_factory=dict)
    switched_off: dict[str, SwitchedOff] = field(default_factory=dict)
    changes: list[str] = field(default_factory=list)
    problems: list[Problem] = field(default_factory=list)


def load_packs(sources: Sequence[SourceText]) -> Rulebook:
    """The rules in force after all packs, in order; every mistake of every pack in `problems`."""
    packs = [read_pack(source) for source in sources]
    layers = _Layers()
    for pack in packs:
        layers.problems += pack.problems
        _lay(layers, pack)
    ready, problems = _make_all_ready(layers, {source.file: source for source in sources})
    found = sorted({*layers.problems, *problems}, key=lambda p: (p.span, p.what))
    rules = tuple(rule for rule in layers.rules.values() if rule.id not in layers.switched_off)
    return Rulebook(
        rules,
        ready,
        layers.parameters,
        tuple(layers.switched_off.values()),
        tuple(layers.changes),
        tuple(found),
        tuple(_in_force(pack, source) for pack, source in zip(packs, sources, strict=True)),
    )


def _in_force(pack: Pack, source: SourceText) -> PackInForce:
    digest = hashlib.sha256(source.text.encode("utf-8")).hexdigest()
    return PackInForce(pack.name, pack.version, source.file, digest)


def _lay(layers: _Layers, pack: Pack) -> None:
    for name, parameter in pack.parameters.items():
        if name in layers.parameters:
            _twice(layers, f"parameter '{name}'", parameter, layers.parameters[name], "set")
        else:
            layers.parameters[name] = parameter
    for name, parameter in pack.new_values.items():
        _set(layers, pack, name, parameter)
    for rule in pack.rules:
        if rule.id in layers.rules:
            _twice(layers, f"rule '{rule.id}'", rule, layers.rules[rule.id], "change")
        else:
            layers.rules[rule.id] = rule
    for change in pack.changes:
        _change(layers, pack, change)


def _twice(
    layers: _Layers, what: str, second: Rule | Parameter, first: Rule | Parameter, key: str
) -> None:
    remedy = f"the first stands at {first.span}; rename this one, or use `{key}:`"
    layers.problems.append(error(second.span, f"{what} stands here a second time", remedy))


def _set(layers: _Layers, pack: Pack, name: str, new: Parameter) -> None:
    old = layers.parameters.get(name)
    if old is None:
        remedy = _nearest(name, layers.parameters)
        layers.problems.append(error(new.span, f"no earlier pack has a parameter '{name}'", remedy))
        return
    layers.parameters[name] = _with_new_value(layers, old, new)
    sources = ", ".join(dict.fromkeys(row.source for row in new.rows.values()))
    layers.changes.append(f"{pack.name} sets {name} ({sources})")


def _with_new_value(layers: _Layers, old: Parameter, new: Parameter) -> Parameter:
    """The new rows; a table without a row `other` leaves all that it does not name as it was."""
    if new.dimension is not old.dimension:
        what = f"'{new.name}' is in {old.dimension.value or 'plain numbers'}"
        layers.problems.append(error(new.span, what, f"the first stands at {old.span}"))
        return old
    rows = new.rows if OTHER in new.rows else {**old.rows, **new.rows}
    return replace(new, rows=rows, meaning=new.meaning or old.meaning)


def _change(layers: _Layers, pack: Pack, change: Change) -> None:
    rule = layers.rules.get(change.rule)
    if rule is None:
        remedy = _nearest(change.rule, layers.rules)
        what = f"no earlier pack has a rule '{change.rule}'"
        layers.problems.append(error(change.span, what, remedy))
        return
    if change.off:
        off = SwitchedOff(change.rule, change.reason, pack.name, change.span)
        layers.switched_off[change.rule] = off
        return
    layers.switched_off.pop(change.rule, None)
    parameters = dict(rule.parameters)
    for name, new in change.parameters.items():
        if name in parameters:
            parameters[name] = _with_new_value(layers, parameters[name], new)
        else:
            what = f"rule '{rule.id}' has no parameter '{name}'"
            layers.problems.append(error(new.span, what, _nearest(name, parameters)))
    level = change.level or rule.level
    graver = change.level or rule.graver_level
    layers.rules[rule.id] = replace(rule, level=level, graver_level=graver, parameters=parameters)
    layers.changes.append(f"{pack.name} changes {rule.id}: {change.reason}")


def _nearest(name: str, known: Iterable[str]) -> str:
    close = difflib.get_close_matches(name, list(known), 1)
    return f"did you mean '{close[0]}'?" if close else "`rulecheck rules` lists all of them"


def _make_all_ready(
    layers: _Layers, sources: dict[str, SourceText]
) -> tuple[tuple[ReadyRule, ...], list[Problem]]:
    ready: list[ReadyRule] = []
    problems: list[Problem] = []
    for rule in layers.rules.values():
        made = make_ready(rule, layers.parameters)
        if isinstance(made, ReadyRule):
            if rule.id not in layers.switched_off:
                ready.append(made)
        else:
            problems += [_located(sources, rule, missing) for missing in made]
    return tuple(ready), problems


def _located(sources: dict[str, SourceText], rule: Rule, missing: Missing) -> Problem:
    source = sources.get(rule.span.file)
    start = rule.places.get(missing.key, rule.span)
    text = rule.texts.get(missing.key, "")
    span = place_in_text(source, start, text, missing.flaw.at) if source and text else start
    return error(span, missing.flaw.what, missing.flaw.remedy)

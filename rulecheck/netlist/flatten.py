"""Expand instances: every element with its path, its nets in place, its parameters computed."""

from collections.abc import Mapping

from rulecheck.netlist.circuit import GROUND, Element, Subcircuit, Waveform
from rulecheck.netlist.definition import Deck, Definition
from rulecheck.netlist.draft import Amount, Draft, DraftWave
from rulecheck.netlist.drafting import Drafts, read_drafts
from rulecheck.netlist.formula import Formula
from rulecheck.netlist.models import find_model
from rulecheck.netlist.scope import Fault, Scope, compute
from rulecheck.values import USUAL, Limits, Problem, Span, Unknown, error, raise_limit
from rulecheck.values.record import Mutable, field


class _Place(Mutable):
    """Where a definition is being expanded."""

    scope: Scope
    path: str
    """The instance's name; empty at the top level."""
    nets: dict[str, str]
    """Net names so far, by lower case: ports first."""
    chain: tuple[Span, ...]
    within: tuple[Definition, ...]
    multiplicity: float = 1.0
    """How many of it stand in parallel, by the `m` of the enclosing instances."""
    names: dict[str, str] = field(default_factory=dict)
    """First spelling of element names, by lower case."""

    def full(self, name: str) -> str:
        return f"{self.path}.{name}" if self.path else name


class Flattening(Mutable):
    """What is collected while a deck is expanded."""

    deck: Deck
    limits: Limits
    most_elements: int
    elements: list[Element] = field(default_factory=list)
    unread: list[str] = field(default_factory=list)
    problems: list[Problem] = field(default_factory=list)
    subcircuits: dict[str, Subcircuit] = field(default_factory=dict)
    drafts: dict[int, Drafts] = field(default_factory=dict)
    globals: dict[str, str] = field(default_factory=dict)


def flatten(deck: Deck, limits: Limits = USUAL) -> Flattening:
    """The flat list of elements of a deck, instances kept before their contents.

    Beyond the limit of elements there are none at all: a part of a circuit is another circuit.
    """
    result = Flattening(deck, limits, limits["elements"])
    place = _Place(Scope(deck.top), "", {GROUND: GROUND}, (), (deck.top,))
    _expand(place, result)
    if len(result.elements) > result.most_elements:
        what = f"the netlist has more than {result.most_elements} elements"
        result.problems.append(error(Span(deck.file, 1), what, raise_limit("elements")))
        result.elements.clear()
    return result


def _expand(place: _Place, result: Flattening) -> None:
    drafts = _drafts(place.scope, result)
    result.unread.extend(place.full(name) for name in drafts.unread)
    place.names = {draft.name.lower(): draft.name for draft in drafts.drafts}
    for draft in drafts.drafts:
        if len(result.elements) > result.most_elements:
            return
        if draft.subcircuit:
            _instance(draft, place, result)
        else:
            result.elements.append(_element(draft, place, result))


def _drafts(scope: Scope, result: Flattening) -> Drafts:
    key = id(scope.definition)  # definitions live as long as the deck
    if key not in result.drafts:
        result.drafts[key] = read_drafts(scope)
        result.problems.extend(result.drafts[key].problems)
    return result.drafts[key]


def _net(word: str, place: _Place, result: Flattening) -> str:
    lower = word.lower()
    found = place.nets.get(lower)
    if found is not None:
        return found
    if (place.path and lower in result.deck.global_nets) or lower in result.deck.global_nets:
        found = result.globals.setdefault(lower, word)
    else:
        found = place.full(word)
    place.nets[lower] = found
    return found


def _element(draft: Draft, place: _Place, result: Flattening) -> Element:
    scope = place.scope
    name = place.full(draft.name)
    parameters = {key: _settled(value, draft, scope, result) for key, value in draft.parameters}
    own = parameters.get("m", 1.0)
    if place.multiplicity != 1.0 and draft.letter != "K" and isinstance(own, float):
        parameters["m"] = own * place.multiplicity
    return Element(
        name,
        draft.letter,
        tuple(_net(net, place, result) for net in draft.nets),
        _value(draft.value, name, draft, scope, result),
        draft.text,
        draft.span,
        parameters,
        find_model(draft.model, scope, result.problems) if draft.model else None,
        _waveform(draft.waveform, scope, result) if draft.waveform else None,
        _controls(draft, place, result),
        place.path,
        place.chain,
    )


def _controls(draft: Draft, place: _Place, result: Flattening) -> tuple[str, ...]:
    if draft.controlled_by_nets:
        return tuple(_net(net, place, result) for net in draft.controls)
    return tuple(_control(name, draft, place, result) for name in draft.controls)


def _control(name: str, draft: Draft, place: _Place, result: Flattening) -> str:
    """The full name of an element at the same level, as first written."""
    found = place.names.get(name.lower())
    if found is None and "." not in name:
        what = f"'{draft.name}' refers to element '{name}', which is not there"
        result.problems.append(error(draft.span, what, "correct the name, or add the element"))
    return place.full(found or name)


def _value(
    amount: Amount, name: str, draft: Draft, scope: Scope, result: Flattening
) -> float | Unknown:
    if isinstance(amount, float | int):
        return float(amount)
    if isinstance(amount, Formula):
        outcome = compute(amount, scope)
        if not isinstance(outcome, Fault):
            return outcome
        if outcome.problem is not None and not draft.value_may_fail:
            result.problems.append(outcome.problem)
    return Unknown(f"value of {name}", f"a number on the card of {name} ({draft.span})")


def _settled(value: Amount | str, draft: Draft, scope: Scope, result: Flattening) -> float | str:
    if isinstance(value, Formula):
        outcome = compute(value, scope)
        if not isinstance(outcome, Fault):
            return outcome
        if outcome.problem is not None and not draft.value_may_fail:
            result.problems.append(outcome.problem)
        return value.text
    return "" if value is None else value


def _waveform(wave: DraftWave, scope: Scope, result: Flattening) -> Waveform:
    values: list[float] = []
    for position, amount in enumerate(wave.amounts):
        outcome = compute(amount, scope) if isinstance(amount, Formula) else amount
        if isinstance(outcome, Fault) or outcome is None:
            if isinstance(outcome, Fault) and outcome.problem is not None:
                result.problems.append(outcome.problem)
            return Waveform(wave.kind, (), wave.text)
        before = values[position - 2] if position in wave.relative and position >= 2 else 0.0
        values.append(float(outcome) + before)
    delay = _number(wave.delay, scope)
    if delay:
        values[::2] = [time + delay for time in values[::2]]
    start = _number(wave.repeats_from, scope)
    repeats_from = None if start is None else start + (delay or 0.0)
    return Waveform(wave.kind, tuple(values), wave.text, repeats_from)


def _number(amount: Amount, scope: Scope) -> float | None:
    outcome = compute(amount, scope) if isinstance(amount, Formula) else amount
    return None if isinstance(outcome, Fault) or outcome is None else float(outcome)


def _instance(draft: Draft, place: _Place, result: Flattening) -> None:
    found = place.scope.definition_of(draft.subcircuit.lower())
    if found is None:
        result.elements.append(_element(draft, place, result))
        return
    definition, home = found
    nets = _port_nets(draft, definition, place, result)
    problem = nets if isinstance(nets, Problem) else _too_much(draft, definition, place, result)
    if problem is not None:
        result.problems.append(problem)
        result.unread.append(place.full(draft.name))
        return
    assert not isinstance(nets, Problem)
    subcircuit = Subcircuit(definition.name, definition.ports, definition.span)
    result.subcircuits.setdefault(definition.name.lower(), subcircuit)
    element = _element(draft, place, result)
    result.elements.append(element)
    overrides = {name: (formula, place.scope) for name, formula in draft.overrides}
    inner = _Place(
        Scope(definition, home, overrides),
        place.full(draft.name),
        {GROUND: GROUND, **nets},
        (*place.chain, draft.span),
        (*place.within, definition),
        _multiplicity(element, definition),
    )
    _expand(inner, result)


def _multiplicity(element: Element, definition: Definition) -> float:
    """The instance's `m`, unless the definition has a parameter of that name."""
    stated = element.parameters.get("m", 1.0)
    return stated if isinstance(stated, float) and "m" not in definition.parameters else 1.0


def _port_nets(
    draft: Draft, definition: Definition, place: _Place, result: Flattening
) -> Mapping[str, str] | Problem:
    """The caller's net for each port; optional ports fall back on their own net."""
    ports = (*definition.ports, *definition.optional_ports)
    given = len(draft.nets)
    if not len(definition.ports) <= given <= len(ports):
        what = (
            f"'{draft.name}' has {given} nets, and subcircuit '{definition.name}' "
            f"({definition.span}) has {len(ports)} ports: {' '.join(ports) or 'none'}"
        )
        return error(draft.span, what, "give each port one net")
    nets = {
        port.lower(): _net(net, place, result) for port, net in zip(ports, draft.nets, strict=False)
    }
    for port in ports[given:]:
        standing_for = definition.optional_ports[port]
        nets[port.lower()] = result.globals.setdefault(standing_for.lower(), standing_for)
    return nets


def _too_much(
    draft: Draft, definition: Definition, place: _Place, result: Flattening
) -> Problem | None:
    """A subcircuit that contains itself, or instances within each other without sensible end."""
    if definition in place.within[1:]:
        start = place.within.index(definition)
        names = [inner.name for inner in place.within[start:]]
        path = " -> ".join([*names, definition.name])
        what = f"subcircuit '{definition.name}' contains itself ({path})"
        return error(draft.span, what, "take the instance out of its own definition")
    deepest = result.limits["subcircuit-depth"]
    if len(place.within) > deepest:
        what = f"'{draft.name}' stands within {deepest} instances, and is not expanded"
        return error(draft.span, what, raise_limit("subcircuit-depth"))
    return None

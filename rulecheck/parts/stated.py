"""Gather the figures of one part: the card's own win over part data, part data over the model.

M1 d g s s FET blocking=100       ratings.blocking 100 V, stated by the card
.model FET VDMOS(Vds=120 Qg=90n)  gate.charge 90 nC, stated by model FET
"""

import math
from collections.abc import Iterable, Mapping

from rulecheck.netlist import Element
from rulecheck.parts.figures import APPLICABLE, BY_PATH, MODEL_FIGURES, Figure, figure_named
from rulecheck.parts.part import Datum, Kind
from rulecheck.parts.part_data import StatedPart
from rulecheck.values import Interval, Problem, error
from rulecheck.values.record import Mutable, Record, field, replace


class Statements(Record):
    data: Mapping[str, Datum]
    facts: Mapping[str, str]
    problems: tuple[Problem, ...] = ()


class _Card(Mutable):
    data: dict[str, Datum] = field(default_factory=dict)
    facts: dict[str, str] = field(default_factory=dict)
    problems: list[Problem] = field(default_factory=list)


def gather(
    element: Element, kind: Kind, part: StatedPart | None, figures: Mapping[str, float]
) -> Statements:
    """All figures of an element; `figures` are those that its value text states."""
    card = _read_card(element, kind)
    texts = {path: _datum(element, BY_PATH[path], value) for path, value in figures.items()}
    model = dict(_read_model(element, kind))
    data = {**model, **texts, **(part.data if part else {}), **card.data}
    facts = {**(part.facts if part else {}), **card.facts}
    return Statements(dict(sorted(data.items())), facts, tuple(card.problems))


def multiplied(data: Mapping[str, Datum], times: float) -> dict[str, Datum]:
    """Figures of so many devices in parallel."""
    return {
        path: replace(datum, value=_times(datum.value, times)) if BY_PATH[path].scales else datum
        for path, datum in data.items()
    }


def _times(value: float | Interval, times: float) -> float | Interval:
    return value.scaled(times) if isinstance(value, Interval) else value * times


def _read_card(element: Element, kind: Kind) -> _Card:
    card = _Card()
    for name, raw in element.parameters.items():
        figure = figure_named(kind, name.replace("_", "-"))
        if figure is not None:
            _read_parameter(element, figure, raw, card)
    return card


def _read_parameter(element: Element, figure: Figure, raw: float | str, card: _Card) -> None:
    if figure.words:
        _read_word(element, figure, raw, card)
    elif isinstance(raw, str):
        what = f"{figure.name}={raw} of {element.name} is no number"
        remedy = f"write a number in {figure.dimension.value}, without blanks"
        card.problems.append(error(element.span, what, remedy))
    else:
        card.data[figure.path] = _datum(element, figure, raw)


def _read_word(element: Element, figure: Figure, raw: float | str, card: _Card) -> None:
    word = str(raw).strip("\"'").lower()
    if word in figure.words:
        card.facts[figure.path] = word
        return
    what = f"{figure.name}={raw} of {element.name} is not known"
    card.problems.append(error(element.span, what, f"use one of {', '.join(figure.words)}"))


def _datum(element: Element, figure: Figure, value: float) -> Datum:
    both_signs = figure.path == "ratings.gate"
    stated = Interval(-abs(value), abs(value)) if both_signs else value
    return Datum(stated, figure.dimension, "card", element.span)


def _read_model(element: Element, kind: Kind) -> Iterable[tuple[str, Datum]]:
    """The first parameter that states a path counts, so go through them last to first."""
    model = element.model
    if model is None:
        return
    names = MODEL_FIGURES.get(model.type, {})
    for name, path in reversed(tuple(names.items())):
        value = model.parameters.get(name)
        if isinstance(value, str) or value is None or path not in APPLICABLE[kind]:
            continue
        if math.isfinite(value) and value != 0.0:
            origin = f"model {model.name}"
            yield path, Datum(abs(value), BY_PATH[path].dimension, origin, model.span)

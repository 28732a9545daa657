"""Stiff quantities by name, and the boxes that their ranges form.

A raw variable is the voltage of a voltage branch or the current of a current branch. The mean of
an inductor's current may be a form in other variables; then the box of the current and that form,
widened by the ripple, both bound it, and a form's range is what both leave.
"""

import cmath
import math
from collections.abc import Iterable, Mapping

from rulecheck.values import AffineForm, Interval, point
from rulecheck.values.record import Record, field

EVERYTHING = Interval(-math.inf, math.inf)
_ZERO = 1e-7


class PhaseSet(Record):
    """Variables of one symmetrical set, in phase order, with one amplitude."""

    names: tuple[str, ...]
    amplitude: float

    def reach(self, coefficients: Mapping[str, float]) -> float:
        """The amplitude of a linear combination of the set.

        |a + b e^-j120 + c e^+j120| V for three phases: line to line is sqrt(3), not 2.
        """
        step = cmath.exp(-2j * cmath.pi / len(self.names))
        total = sum(coefficients.get(n, 0.0) * step**k for k, n in enumerate(self.names))
        size = abs(total)
        return size * self.amplitude if size > _ZERO else 0.0


class Box(Record):
    """Ranges of the variables, and what ties them to each other."""

    ranges: Mapping[str, Interval]
    means: Mapping[str, AffineForm] = field(default_factory=dict)
    ripples: Mapping[str, float] = field(default_factory=dict)
    phase_sets: tuple[PhaseSet, ...] = ()
    unsettled: frozenset[str] = frozenset()
    """Variables of which not even the sign is known: an infinite end there says nothing."""

    def range_of(self, form: AffineForm) -> Interval:
        """Bounds of a form; an infinite end where a magnitude is not known."""
        direct = self._over_boxes(form, 0.0)
        if not any(name in self.means for name in form.names):
            return direct
        slack = sum(abs(c) * self.ripples.get(n, 0.0) for n, c in form.terms if n in self.means)
        through_means = self._over_boxes(form.substitute(self.means), slack)
        return direct.meet(through_means) or direct

    def _over_boxes(self, form: AffineForm, slack: float) -> Interval:
        total = Interval(form.constant - slack, form.constant + slack)
        rest = dict(form.terms)
        for phases in self.phase_sets:
            mine = {n: rest.pop(n) for n in phases.names if n in rest}
            if mine:
                total += self._phase_range(phases, mine)
        for name, coefficient in rest.items():
            total += self.ranges[name].scaled(coefficient)
        return total

    def _phase_range(self, phases: PhaseSet, mine: Mapping[str, float]) -> Interval:
        reach = phases.reach(mine)
        both = Interval(-reach, reach)
        boxes = point(0.0)
        for name, coefficient in mine.items():
            boxes += self.ranges[name].scaled(coefficient)
        return both.meet(boxes) or both

    def corner_of(self, form: AffineForm, high: bool) -> tuple[tuple[str, float], ...]:
        """Values of the variables at which the form is largest (or smallest), for the report."""
        base = form.substitute(self.means)
        return tuple(
            (name, self.ranges[name].high if (c > 0) == high else self.ranges[name].low)
            for name, c in base.terms
        )

    def is_zero(self, form: AffineForm) -> bool:
        """True where the form vanishes whatever the variables are."""
        if abs(form.constant) > _ZERO:
            return False
        rest = {n: c for n, c in form.terms if abs(c) > _ZERO}
        for phases in self.phase_sets:
            mine = {n: rest.pop(n) for n in phases.names if n in rest}
            if mine and phases.reach(mine) > _ZERO * max(phases.amplitude, 1.0):
                return False
        return not rest

    def with_ranges(self, changed: Mapping[str, Interval]) -> "Box":
        return Box(
            {**self.ranges, **changed}, self.means, self.ripples, self.phase_sets, self.unsettled
        )

    def names_with(self, names: Iterable[str]) -> frozenset[str]:
        """Those of the names that are variables here, and the variables they rest on."""
        return frozenset(self.only(set(names) & self.ranges.keys()).ranges)

    def only(self, names: Iterable[str]) -> "Box":
        """The part of the box that these variables and their means need."""
        wanted = set(names)
        for name in tuple(wanted):
            if name in self.means:
                wanted |= set(self.means[name].names)
        sets = tuple(s for s in self.phase_sets if wanted & set(s.names))
        wanted |= {name for s in sets for name in s.names}
        return Box(
            {n: self.ranges[n] for n in sorted(wanted)},
            {n: self.means[n] for n in sorted(wanted) if n in self.means},
            {n: self.ripples[n] for n in sorted(wanted) if n in self.ripples},
            sets,
            self.unsettled & wanted,
        )

    def says_nothing(self, form: AffineForm) -> tuple[str, ...]:
        """The unsettled variables that leave an end of the form's range open."""
        base = {*form.names, *form.substitute(self.means).names}
        return tuple(sorted(n for n in base & self.unsettled if not self.ranges[n].bounded))


def tightened(box: Box, at_least_zero: Iterable[AffineForm]) -> Box | None:
    """Narrow the box by inequalities `form >= 0`; None where nothing is left.

    Plain interval propagation: every bound stays an outer bound.
    """
    forms = [f for f in at_least_zero if not f.is_zero]
    for _ in range(4):
        before = box.ranges
        for form in forms:
            if box.range_of(form).high < -_tolerance(box, form):
                return None
            box = _narrowed(box, form)
        if box.ranges == before:
            break
    return box


def bounded_by(box: Box, form: AffineForm, at_least_zero: Iterable[AffineForm]) -> Interval:
    """The range of a form under inequalities that speak of several variables at once.

    A form is at most itself plus any positive multiple of something that is at least zero; the
    multiples tried are those that cancel a variable (one step of elimination).
    """
    span = box.range_of(form)
    for inequality in at_least_zero:
        if len(inequality.terms) < 2:
            continue
        for name, coefficient in inequality.terms:
            own = dict(form.terms).get(name, 0.0)
            if own == 0.0:
                continue
            factor = -own / coefficient
            there = box.range_of(form + inequality.scaled(factor))
            limit = Interval(-math.inf, there.high) if factor > 0 else Interval(there.low, math.inf)
            span = span.meet(limit) or span
    return span


def _tolerance(box: Box, form: AffineForm) -> float:
    sizes = [box.ranges[n].magnitude for n in form.names]
    finite = [s for s in sizes if math.isfinite(s)]
    return 1e-7 * max([1.0, *finite])


def _narrowed(box: Box, form: AffineForm) -> Box:
    changed: dict[str, Interval] = {}
    for name, coefficient in form.terms:
        rest = box.range_of(form - AffineForm.of({name: coefficient}))
        # coefficient * x + rest >= 0 for some value of the rest
        bound = -rest.high / coefficient
        if not math.isfinite(bound):
            continue
        allowed = Interval(bound, math.inf) if coefficient > 0 else Interval(-math.inf, bound)
        own = box.ranges[name]
        kept = own.meet(allowed)
        if kept is None:
            kept = point(own.high if coefficient > 0 else own.low)
        if kept != own:
            changed[name] = kept
    return box.with_ranges(changed) if changed else box

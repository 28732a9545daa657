"""Try readings of the stage until one works: as drawn, with duty, leakages wired, cores clamped."""

from rulecheck.demand.analysis import Worked, work_out
from rulecheck.demand.duty import with_duty
from rulecheck.demand.peak_charged import find_peaks, with_peaks
from rulecheck.demand.voltages import name_of
from rulecheck.demand.wired import (
    separate_coupled,
    wire_leakages,
    without_followers,
    without_magnetising,
)
from rulecheck.stage import Branch, BranchKind, Stage

FOLLOWING_CAPACITANCE = 10e-6
"""Farad; common practice: a filter capacitor behind a mains rectifier is smaller, a reservoir
larger."""


def first_that_works(stage: Stage) -> tuple[Worked, tuple[str, ...]]:
    stage, assumed = separate_coupled(stage)
    best = work_out(stage)
    stage, more = with_duty(best)
    if more:
        best, assumed = work_out(stage), assumed + more
    for reading in (_following, _wired, _clamped):
        if not any(_unclear(best)):
            break
        other, sentences = reading(best, stage)
        if not sentences:
            continue
        tried = work_out(other)
        if _unclear(tried) < _unclear(best):
            best, assumed = tried, assumed + sentences
            stage = other if reading is _following else stage
    peaks = find_peaks(best, work_out)
    if not peaks:
        return best, assumed
    pulsed = frozenset(name for peak in peaks for name in peak.diodes)
    stage = with_peaks(best.stage, peaks)
    return work_out(stage, pulsed), (*assumed, *(peak.sentence for peak in peaks))


def _following(worked: Worked, stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    return without_followers(stage, _followers(worked))


def _wired(worked: Worked, stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    return wire_leakages(stage)


def _clamped(worked: Worked, stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    return without_magnetising(stage)


def _unclear(worked: Worked) -> tuple[int, int]:
    """What a reading leaves open, then how much it has to take from the drawn devices."""
    open_points = len(worked.failures) + len(worked.connecting)
    return open_points, len(worked.reading.amended)


def _followers(worked: Worked) -> tuple[str, ...]:
    """Small capacitors behind groups of diodes that only connect voltages."""
    nets = {
        net
        for index in worked.connecting
        if not worked.topology.clusters[index].gated
        for link in worked.topology.clusters[index].positions
        if link.position
        for net in (link.position.start, link.position.end)
    }
    return tuple(
        branch.name
        for branch in worked.stage.branches
        if branch.kind is BranchKind.VOLTAGE
        and branch.part
        and {branch.start, branch.end} & nets
        and worked.voltages.forms[branch.name].names == (name_of(branch),)
        and _is_small(branch)
    )


def _is_small(branch: Branch) -> bool:
    return branch.value is not None and branch.value <= FOLLOWING_CAPACITANCE

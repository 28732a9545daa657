"""Try readings of the stage until one works: as drawn, with duty, leakages wired, cores clamped."""

from rulecheck.demand.analysis import Worked, work_out
from rulecheck.demand.duty import with_duty
from rulecheck.demand.peak_charged import find_peaks, with_peaks
from rulecheck.demand.wired import wire_leakages, without_followers, without_magnetising
from rulecheck.stage import Stage


def first_that_works(stage: Stage) -> tuple[Worked, tuple[str, ...]]:
    worked = work_out(stage)
    stage, assumed = with_duty(worked)
    best = work_out(stage) if assumed else worked
    for reading in (_following, _wired, _clamped):
        if not _unclear(best):
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
    return wire_leakages(stage) if worked.failures else (stage, ())


def _clamped(worked: Worked, stage: Stage) -> tuple[Stage, tuple[str, ...]]:
    return without_magnetising(stage) if worked.failures else (stage, ())


def _unclear(worked: Worked) -> int:
    return len(worked.failures) + len(worked.connecting)


def _followers(worked: Worked) -> tuple[str, ...]:
    """Capacitors that nobody states, behind groups of diodes that only connect voltages."""
    nets = {
        net
        for index in worked.connecting
        if not worked.topology.clusters[index].gated
        for link in worked.topology.clusters[index].positions
        if link.position
        for net in (link.position.start, link.position.end)
    }
    return tuple(b.name for b in worked.voltages.undetermined if b.part and {b.start, b.end} & nets)

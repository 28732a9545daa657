"""What is not known is never passed, and one stage does not hide another's faults."""

from hypothesis import given
from hypothesis import strategies as st

from tests.kit.small_stages import FEW, PortLine, SmallStage, bridges, legs, stages, verdicts


@FEW
@given(stages(), st.data())
def test_taking_a_datum_away_never_turns_a_finding_into_holds(
    stage: SmallStage, data: st.DataObject
) -> None:
    """A run that refuses the input says so, which is no silent pass either."""
    less = data.draw(st.sampled_from(stage.data()))
    study = less.study()
    if not study.usable:
        return
    before, after = verdicts(stage.study()), verdicts(study)
    lost = {finding for finding in before if finding not in after}
    assert not lost


def far(name: str) -> str:
    return f"{name[0]}{int(name[1:]) + 500}"


@FEW
@given(legs(), bridges())
def test_a_stage_beside_another_leaves_its_findings_as_they_were(
    one: SmallStage, other: SmallStage
) -> None:
    moved = other.renamed(far, lambda net: net if net == "0" else f"{net}_far")
    ports = tuple(PortLine(f"{port.name}_far", port.ends, port.items) for port in moved.ports)
    both = SmallStage(one.cards + moved.cards, one.ports + ports)
    alone, beside = verdicts(one.study()), verdicts(both.study())
    own = {card.name for card in one.cards}
    assert {f: v for f, v in alone.items() if f[1] in own} == {
        f: v for f, v in beside.items() if f[1] in own
    }

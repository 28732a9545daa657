"""Turning a stage over, and splitting its devices."""

from dataclasses import replace
from typing import Any

from hypothesis import given
from hypothesis import strategies as st

from tests.kit.small_stages import (
    FEW,
    Card,
    SmallStage,
    coil,
    ideal,
    legs,
    positions,
    stages,
    verdicts,
)

REFLECTED = {"I": "III", "II": "IV", "III": "I", "IV": "II"}


@FEW
@given(stages())
def test_a_stage_upside_down_asks_and_offers_the_same(stage: SmallStage) -> None:
    before, after = positions(stage.study()), positions(stage.turned().study())
    assert list(before) == list(after)
    for name, entry in before.items():
        turned = after[name]
        for key in ("demand", "capability", "covered"):
            assert turned[key] == entry[key], name
        assert turned["parts"] == entry["parts"]


@FEW
@given(legs())
def test_ports_of_the_other_polarity_reflect_the_demand(stage: SmallStage) -> None:
    """With switches of all four quadrants nothing in the devices prefers a polarity."""
    cards: tuple[Card, ...] = (
        ideal("S1", "BUS", "SW"),
        ideal("S2", "SW", "0"),
        coil("L1", "BAT", "SW"),
    )
    plain = replace(stage, cards=cards)
    ends = (replace(port, ends=(port.ends[1], port.ends[0])) for port in plain.ports)
    over = replace(plain, ports=tuple(ends))
    before, after = positions(plain.study()), positions(over.study())
    for name, entry in before.items():
        assert oriented(after[name]) == reflected(oriented(entry)), name


def oriented(entry: dict[str, Any]) -> dict[str, Any]:
    """The demand as from the net that comes first in the alphabet."""
    asked = {key: entry["demand"][key] for key in ("off_voltage", "on_current", "quadrants")}
    return asked if entry["from"] < entry["to"] else reflected(asked)


def reflected(asked: dict[str, Any]) -> dict[str, Any]:
    return {
        "off_voltage": [-end if end else 0.0 for end in reversed(asked["off_voltage"])],
        "on_current": [-end if end else 0.0 for end in reversed(asked["on_current"])],
        "quadrants": sorted((REFLECTED[q] for q in asked["quadrants"]), key=list(REFLECTED).index),
    }


@FEW
@given(stages(), st.data())
def test_two_equal_devices_in_parallel_keep_the_quadrants(
    stage: SmallStage, data: st.DataObject
) -> None:
    """The pair carries twice the current of one and blocks no more."""
    devices = [card for card in stage.cards if card.name[0] in "MQD"]
    device = data.draw(st.sampled_from(devices)) if devices else None
    if device is None:
        return
    twin = replace(device, name=f"{device.name}7")
    before, after = (
        positions(stage.study()),
        positions(stage.with_card(device, device, twin).study()),
    )
    assert list(before) == list(after)
    for name, entry in before.items():
        assert after[name]["demand"] == entry["demand"]
        assert after[name]["covered"] == entry["covered"]
        for key in ("quadrants", "blocks", "class"):
            assert after[name]["capability"][key] == entry["capability"][key]


@FEW
@given(stages(), st.data())
def test_raising_a_rating_adds_no_finding(stage: SmallStage, data: st.DataObject) -> None:
    rated = [(card, key) for card in stage.cards for key in card.ratings]
    if not rated:
        return
    card, key = data.draw(st.sampled_from(rated))
    more = {**card.ratings, key: card.ratings[key] * data.draw(st.sampled_from([1.5, 4.0]))}
    raised = stage.with_card(card, replace(card, ratings=more))
    before, after = verdicts(stage.study()), verdicts(raised.study())
    new = {finding for finding in after if finding not in before}
    assert not new, (card.name, key)
    assert not [f for f, v in after.items() if v == "broken" and before[f] != "broken"]

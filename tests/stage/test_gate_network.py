"""Resistances of gate networks, against a general-purpose graph library and by hand."""

import itertools
import math

import networkx as nx
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.stage.gate_network import Network, OneWay, Resistive, carrying, resistance

NETS = ("out", "gate", "a", "b", "c")
OHMS = st.sampled_from([1.0, 2.2, 4.7, 6.8, 10.0, 22.0, 100.0])
PAIRS = st.sampled_from(list(itertools.combinations(NETS, 2)))
RESISTORS = st.lists(st.tuples(PAIRS, OHMS), min_size=1, max_size=8)
DIODES = st.lists(st.tuples(PAIRS, st.booleans()), max_size=3)


def network(resistors: list, diodes: list) -> Network:
    return Network(
        tuple(Resistive(f"R{n}", ends, ohms) for n, (ends, ohms) in enumerate(resistors)),
        tuple(
            OneWay(f"D{n}", *(ends if forward else ends[::-1]))
            for n, (ends, forward) in enumerate(diodes)
        ),
    )


def by_library(resistors: list, closed: list[tuple[str, str]]) -> float:
    """networkx.resistance_distance, with the ends of closed diodes made one net."""
    joined = nx.utils.UnionFind(NETS)
    for one, other in closed:
        joined.union(one, other)
    start, end = joined["out"], joined["gate"]
    if start == end:
        return 0.0
    graph = nx.MultiGraph()
    graph.add_nodes_from((start, end))
    for (one, other), ohms in resistors:
        if joined[one] != joined[other]:
            graph.add_edge(joined[one], joined[other], ohms=ohms)
    part = graph.subgraph(nx.node_connected_component(graph, start))
    if end not in part:
        return math.inf
    return float(nx.resistance_distance(part, start, end, weight="ohms", invert_weight=True))


@settings(max_examples=60, deadline=None)
@given(RESISTORS)
def test_resistors_alone_agree_with_the_graph_library(resistors: list) -> None:
    expected = by_library(resistors, [])
    found = resistance(network(resistors, []), ["out"], ["gate"])
    assert found == pytest.approx(expected, rel=1e-6)


@settings(max_examples=60, deadline=None)
@given(RESISTORS, DIODES)
def test_diodes_leave_the_least_resistance_of_all_ways_they_may_conduct(
    resistors: list, diodes: list
) -> None:
    """Closing a diode against its direction is never needed: of the consistent choices of open
    and closed diodes the network's answer is one, found here by trying all."""
    found = resistance(network(resistors, diodes), ["out"], ["gate"])
    answers = [
        by_library(resistors, [_ends(d) for d in chosen])
        for chosen in itertools.chain.from_iterable(
            itertools.combinations(diodes, n) for n in range(len(diodes) + 1)
        )
    ]
    assert any(found == pytest.approx(answer, rel=1e-6, abs=1e-6) for answer in answers)
    assert found <= answers[0] * (1 + 1e-9)


def _ends(diode: tuple) -> tuple[str, str]:
    ends, forward = diode
    return ends if forward else ends[::-1]


SPLIT = Network(
    (Resistive("R1", ("out", "gate"), 22.0), Resistive("R2", ("out", "k"), 6.8)),
    (OneWay("D1", "gate", "k"),),
)


def test_a_diode_steers_one_direction() -> None:
    assert resistance(SPLIT, ["out"], ["gate"]) == 22.0
    assert resistance(SPLIT, ["gate"], ["out"]) == pytest.approx(22.0 * 6.8 / 28.8)


def test_the_resistors_that_carry_are_named() -> None:
    assert carrying(SPLIT, ["out"], ["gate"]) == ("R1",)
    assert carrying(SPLIT, ["gate"], ["out"]) == ("R1", "R2")


def test_no_way_is_an_infinite_resistance() -> None:
    assert resistance(SPLIT, ["elsewhere"], ["gate"]) == math.inf

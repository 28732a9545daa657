"""Potentials of nets relative to each other, and the relations that the network imposes."""

from hypothesis import given
from hypothesis import strategies as st

from rulecheck.demand.offsets import Offsets
from rulecheck.demand.ties import build_ties
from rulecheck.values import AffineForm, variable

NETS = [f"N{k}" for k in range(7)]
TIES = st.lists(st.tuples(st.sampled_from(NETS), st.sampled_from(NETS)), max_size=12)


@given(TIES, st.randoms(use_true_random=False))
def test_differences_are_those_of_one_potential(
    pairs: list[tuple[str, str]], random: object
) -> None:
    potentials = {net: AffineForm.of({f"v{k}": 1.0}) for k, net in enumerate(NETS)}
    offsets = Offsets()
    for first, second in pairs:
        offsets.tie(first, second, potentials[first] - potentials[second])
    for first in NETS:
        for second in NETS:
            found = offsets.difference(first, second)
            if found is not None:
                assert found == potentials[first] - potentials[second]


@given(TIES)
def test_nets_hang_together_exactly_where_ties_connect_them(pairs: list[tuple[str, str]]) -> None:
    offsets = Offsets()
    groups = {net: {net} for net in NETS}
    for first, second in pairs:
        offsets.tie(first, second, AffineForm())
        merged = groups[first] | groups[second]
        for net in merged:
            groups[net] = merged
    for first in NETS:
        for second in NETS:
            tied = offsets.difference(first, second) is not None
            assert tied == (second in groups[first])


def test_ties_reduce_what_they_force_to_zero() -> None:
    star = variable("i(L1)") + variable("i(L2)") + variable("i(L3)")
    series = variable("i(L3)") - variable("i(L4)")
    ties = build_ties([star, series])
    assert ties.reduced(star).is_zero
    assert ties.reduced(variable("i(L1)") + variable("i(L2)") + variable("i(L4)")).is_zero
    assert not ties.reduced(variable("i(L1)")).is_zero
    assert not ties.reduced(variable("i(L1)") - variable("i(L2)")).is_zero

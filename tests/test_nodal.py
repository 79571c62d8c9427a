"""The node solver against NumPy's dense solver and hand sums."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue
from triage.physics.nodal import EARTH, solve

NAMES = [EARTH, "a", "b", "c", "d"]

part = st.one_of(st.floats(1e-9, 1), st.floats(1e-9, 1).map(lambda b: 1j * b))
ties = st.lists(
    st.tuples(st.sampled_from(NAMES), st.sampled_from(NAMES), part).filter(lambda t: t[0] != t[1]),
    max_size=8,
)


def by_numpy(network, volts):
    """The same network with node a held at `volts`, every node leaking 1 uS to earth."""
    matrix = np.zeros((4, 4), complex)
    for first, second, admittance in network:
        i, j = NAMES.index(first) - 1, NAMES.index(second) - 1
        for k, m in ((i, j), (j, i)):
            if k >= 0:
                matrix[k, k] += admittance
                if m >= 0:
                    matrix[k, m] -= admittance
    right = -matrix[1:, 0] * volts
    return np.concatenate([[volts], np.linalg.solve(matrix[1:, 1:], right)])


@given(ties, st.floats(1, 400))
def test_random_networks_agree_with_numpy(network, volts):
    network = [*network, *((name, EARTH, 1e-6 + 0j) for name in NAMES[1:])]
    found = solve(network, [("a", EARTH, volts)])
    expected = by_numpy(network, volts)
    assert [found.voltages[n] for n in NAMES[1:]] == pytest.approx(expected, rel=1e-6, abs=1e-6)


@given(ties, st.floats(1, 400))
def test_what_leaves_the_source_arrives_at_earth(network, volts):
    network = [*network, *((name, EARTH, 1e-6 + 0j) for name in NAMES[1:])]
    found = solve(network, [("a", EARTH, volts)])
    into_earth = sum(
        found.voltages[b if a == EARTH else a] * y for a, b, y in network if EARTH in (a, b)
    )
    assert found.currents[0] == pytest.approx(into_earth, rel=1e-6, abs=1e-9)


def test_a_short_is_a_source_of_no_voltage():
    found = solve([("a", "b", 1e-3)], [("a", EARTH, 10), ("b", EARTH, 0)])
    assert found.currents[0] == pytest.approx(0.01)
    assert found.currents[1] == pytest.approx(-0.01)


def test_what_nothing_ties_to_earth_is_left_undefined():
    found = solve([("a", "b", 1e-3), ("c", EARTH, 1e-3)], [("a", "b", 10)])
    assert set(found.voltages) == {EARTH, "c"}
    assert found.currents == (0,)
    with pytest.raises(InvalidValue, match="'a'"):
        found.between("a", EARTH)


def test_an_admittance_of_nothing_is_no_path():
    assert "a" not in solve([("a", EARTH, 0)], []).voltages


def test_a_loop_of_sources_is_refused():
    with pytest.raises(InvalidValue, match="loop"):
        solve([], [("a", EARTH, 10), ("a", EARTH, 11)])


def test_the_wheatstone_bridge_balances():
    # hand sum: equal ratios leave no voltage over the bridge
    arms = [
        ("top", "l", 1 / 100),
        ("l", EARTH, 1 / 200),
        ("top", "r", 1 / 300),
        ("r", EARTH, 1 / 600),
    ]
    found = solve([*arms, ("l", "r", 1 / 50)], [("top", EARTH, 9)])
    assert abs(found.between("l", "r")) < 1e-12
    assert found.voltages["l"] == pytest.approx(6)

"""Measuring networks: weights and impedances against hand sums and another formula."""

from math import pi, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import BadTable, OutOfRange
from triage.physics.networks import network_impedance, weight


# R2 / sqrt(1 + (f/fc)^2), fc = 1 / (2 pi C (R1 + R2)) = 964.6 Hz; ngspice gives the same digits.
@pytest.mark.parametrize(
    ("hertz", "expected"),
    [
        (10, 0.99995), (50, 0.99866), (60, 0.99807), (100, 0.99467), (400, 0.92372),
        (1e3, 0.69424), (5e3, 0.18942), (1e4, 0.09601), (1e5, 0.00965), (4e5, 0.00241),
        (1e6, 0.00097),
    ],
)  # fmt: skip
def test_the_medical_network_is_a_low_pass_at_one_kilohertz(hertz, expected):
    assert weight(hertz, "medical") == pytest.approx(expected, abs=1e-5)
    corner = 1 / (2 * pi * 15e-9 * 11e3)
    assert weight(hertz, "medical") == pytest.approx(1 / sqrt(1 + (hertz / corner) ** 2))


# IEC 60990 figure 4 with its printed parts; figure 5 with recalled parts.
@pytest.mark.parametrize(
    ("hertz", "ohms", "reaction", "let_go"),
    [
        (50, 1990.0, 0.997, 0.995), (60, 1985.7, 0.996, 0.993), (100, 1961.0, 0.990, 0.982),
        (500, 1434.4, 0.809, 0.718), (1e3, 978.6, 0.567, 0.451), (2e3, 675.3, 0.326, 0.228),
        (1e4, 508.6, 0.0687, 0.0198), (1e5, 500.1, 0.0069, 0.0002),
    ],
)  # fmt: skip
def test_the_general_networks(hertz, ohms, reaction, let_go):
    assert abs(network_impedance(hertz, "unweighted")) == pytest.approx(ohms, rel=1e-4)
    assert weight(hertz, "reaction") == pytest.approx(reaction, abs=5e-4)
    assert weight(hertz, "let_go") == pytest.approx(let_go, abs=5e-4)


def test_a_safety_analyser_hardly_reads_electrosurgery():
    assert 0.100 * weight(400e3, "medical") == pytest.approx(0.24e-3, rel=0.01)


@given(st.floats(0, 1e6), st.floats(0, 1e6), st.sampled_from(["medical", "reaction", "let_go"]))
def test_a_higher_frequency_never_weighs_more(first, second, network):
    low, high = sorted((first, second))
    assert weight(high, network) <= weight(low, network) <= 1


def test_without_stages_every_frequency_weighs_one():
    assert weight(1e5, "unweighted") == 1


@pytest.mark.parametrize("hertz", [-1, 1.1e6, float("nan")])
def test_a_frequency_the_parts_are_not_specified_for_is_refused(hertz):
    with pytest.raises(OutOfRange):
        weight(hertz, "medical")


def test_a_network_nobody_knows_is_refused():
    with pytest.raises(BadTable):
        network_impedance(50, "figure 9")

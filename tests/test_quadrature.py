"""Node sets and the normal law against SciPy and NumPy."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import integrate, stats

from triage.errors import InvalidValue
from triage.quadrature import (
    gauss_hermite,
    gauss_legendre,
    normal_cdf,
    normal_density,
    normal_quantile,
    split_normal,
)


@pytest.mark.parametrize("order", [1, 2, 3, 6, 12, 16, 33, 64])
def test_hermite_nodes_are_those_of_numpy(order):
    places, weights = np.polynomial.hermite_e.hermegauss(order)
    found = np.array(gauss_hermite(order))
    assert found[:, 1] == pytest.approx(places, abs=1e-11)
    assert found[:, 0] == pytest.approx(weights / weights.sum(), abs=1e-12)


@pytest.mark.parametrize("order", [1, 2, 5, 8, 24])
def test_legendre_nodes_are_those_of_numpy(order):
    places, weights = np.polynomial.legendre.leggauss(order)
    found = np.array(sorted(gauss_legendre(order), key=lambda node: node[1]))
    assert found[:, 1] == pytest.approx(places, abs=1e-13)
    assert found[:, 0] == pytest.approx(weights / 2, abs=1e-13)


@given(st.floats(-8, 8))
def test_the_normal_law_is_that_of_scipy(z):
    assert normal_cdf(z) == pytest.approx(stats.norm.cdf(z), rel=1e-12)
    assert normal_density(z) == pytest.approx(stats.norm.pdf(z), rel=1e-12)


@given(st.floats(1e-12, 1 - 1e-12))
def test_the_normal_quantile_is_that_of_scipy(p):
    assert normal_quantile(p) == pytest.approx(stats.norm.ppf(p), abs=1e-9)


@pytest.mark.parametrize("p", [0, 1, -0.1, float("nan")])
def test_no_quantile_exists_outside_zero_and_one(p):
    with pytest.raises(InvalidValue):
        normal_quantile(p)


def test_a_node_set_needs_a_node():
    with pytest.raises(InvalidValue):
        gauss_hermite(0)


@given(st.lists(st.floats(-4, 4), max_size=3))
def test_split_nodes_integrate_bent_functions_exactly(kinks):
    def bent(z):
        return z + sum(abs(z - k) for k in kinks)

    expected, _ = integrate.quad(
        lambda z: bent(z) * stats.norm.pdf(z), -9, 9, points=sorted(kinks) or None, limit=200
    )
    found = sum(w * bent(z) for w, z in split_normal(kinks, 12))
    assert found == pytest.approx(expected, abs=1e-9)

"""Node sets and the normal law against SciPy and NumPy."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import stats

from triage.errors import InvalidValue
from triage.quadrature import (
    gauss_hermite,
    normal_cdf,
    normal_density,
    normal_quantile,
)


@pytest.mark.parametrize("order", [1, 2, 3, 6, 12, 16, 33, 64])
def test_hermite_nodes_are_those_of_numpy(order):
    places, weights = np.polynomial.hermite_e.hermegauss(order)
    found = np.array(gauss_hermite(order))
    assert found[:, 1] == pytest.approx(places, abs=1e-11)
    assert found[:, 0] == pytest.approx(weights / weights.sum(), abs=1e-12)


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

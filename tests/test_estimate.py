"""Estimates against adaptive integration, Monte Carlo and closed forms."""

from math import exp, log, sqrt

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import integrate, stats

from triage.errors import InvalidValue
from triage.estimate import Estimate, product, through

SPREADS = st.dictionaries(st.sampled_from("abcd"), st.floats(-1.5, 1.5), max_size=4)
MEDIANS = st.floats(1e-12, 1e12)


def softplus(x: float) -> float:
    return float(np.logaddexp(0, x))


def load_line(order: int) -> Estimate:
    """X Y / (X + Y): 1.5 kV with gsds 2.5 and 5, 2 kV with gsd 2.2."""
    x = Estimate.lognormal(1500, {"i": log(2.5), "r": log(5)}, "V")
    y = Estimate.lognormal(2000, {"v": log(2.2)}, "V")
    share = through(lambda u: -softplus(-u), x.over(y, ""), unit="", order=order)
    return y.times(share, "V")


def exact_load_line(volts: float, spread: float = 0.0, factor: float = 1.0) -> float:
    """P(factor X Y / (X + Y) > volts) by adaptive integration; the factor has a spread."""
    sx, sy = sqrt(log(2.5) ** 2 + log(5) ** 2), log(2.2)

    def inner(v: float) -> float:
        kink = log(v / 2000) / sy  # below it Y alone is already too small

        def density(z: float) -> float:
            y = 2000 * exp(sy * z)
            limit = v * y / (y - v)
            return stats.norm.pdf(z) * stats.norm.cdf(log(1500 / limit) / sx)

        return integrate.quad(density, max(kink + 1e-12, -9), 9, limit=200, epsabs=1e-11)[0]

    if spread == 0:
        return inner(volts / factor)
    return integrate.quad(
        lambda z: stats.norm.pdf(z) * inner(volts / factor * exp(-spread * z)),
        -8, 8, epsabs=1e-9, limit=200,
    )[0]  # fmt: skip


# The load line with no other spread, then as P(felt): Q = C V against 0.2 uC, ln-spread 0.45.
@pytest.mark.parametrize("volts", [50, 200, 500, 1000, 3000, 8000])
def test_the_load_line_agrees_with_adaptive_integration(volts):
    assert load_line(48).probability_above(volts) == pytest.approx(exact_load_line(volts), abs=1e-6)


def test_the_chance_of_feeling_a_load_line_agrees_with_adaptive_integration():
    capacitance = Estimate.lognormal(130e-12, {"c": log(1.35)}, "F")
    charge = product("C", load_line(28), capacitance)
    spread = sqrt(log(1.35) ** 2 + 0.45**2)
    expected = exact_load_line(0.2e-6 / 130e-12, spread)
    assert charge.probit(0.2e-6, 0.45) == pytest.approx(expected, abs=1e-6)


# Static work by others, two million draws: .839 .616 .351 .049 with 4e-3 of doubt.
def test_the_load_line_agrees_with_monte_carlo():
    rng = np.random.default_rng(5)
    z = rng.standard_normal((3, 400_000))
    x, y = 1500 * 2.5 ** z[0] * 5 ** z[1], 2000 * 2.2 ** z[2]
    v = x * y / (x + y)
    for volts in (200, 500, 1000, 3000):
        assert load_line(24).probability_above(volts) == pytest.approx((v > volts).mean(), abs=3e-3)
    assert load_line(24).median == pytest.approx(np.median(v), rel=0.01)
    assert load_line(24).variance_log == pytest.approx(np.log(v).var(), rel=0.01)


@given(MEDIANS, SPREADS, MEDIANS, SPREADS)
def test_medians_multiply_and_loadings_add(m1, s1, m2, s2):
    found = Estimate.lognormal(m1, s1, "V").times(Estimate.lognormal(m2, s2, "A"), "W")
    assert found.median == pytest.approx(m1 * m2)
    expected = sum((s1.get(n, 0) + s2.get(n, 0)) ** 2 for n in "abcd")
    assert found.spread**2 == pytest.approx(expected, abs=1e-12)


@given(MEDIANS, SPREADS)
def test_a_quantity_over_itself_is_one_without_doubt(median, spreads):
    found = Estimate.lognormal(median, spreads, "V")
    ratio = found.over(found, "")
    assert ratio.median == pytest.approx(1)
    assert ratio.variance_log == pytest.approx(0, abs=1e-12)


def test_a_resolved_quantity_over_itself_is_one_without_doubt():
    ratio = load_line(12).over(load_line(12), "")
    assert ratio.variance_log == pytest.approx(0, abs=1e-18)


def test_sources_shared_by_a_resolved_and_a_lognormal_quantity_stay_correlated():
    # ln(V / Y) = -ln(1 + Y / X): by Monte Carlo.
    y = Estimate.lognormal(2000, {"v": log(2.2)}, "V")
    z = np.random.default_rng(6).standard_normal((3, 400_000))
    share = -np.logaddexp(0, log(2000 / 1500) + log(2.2) * z[2] - log(2.5) * z[0] - log(5) * z[1])
    found = load_line(16).over(y, "")
    assert found.mean_log == pytest.approx(share.mean(), abs=0.01)
    assert found.variance_log == pytest.approx(share.var(), rel=0.01)


def test_the_order_of_factors_does_not_matter():
    capacitance = Estimate.lognormal(130e-12, {"c": 0.3, "v": 0.2}, "F")
    one, other = load_line(8).times(capacitance, "C"), capacitance.times(load_line(8), "C")
    assert one.quantile(0.9) == pytest.approx(other.quantile(0.9), rel=1e-9)
    assert one.variance_log == pytest.approx(other.variance_log, rel=1e-12)


def test_two_independent_grids_meet_on_their_product():
    bent = through(lambda x: -abs(x), Estimate.lognormal(1, {"h": 1.0}, ""), unit="")
    both = load_line(8).times(bent, "V")
    # Corners below 1e-8 are dropped, which costs a few parts in a million of the variance.
    expected = load_line(8).variance_log + bent.variance_log
    assert both.variance_log == pytest.approx(expected, rel=1e-5)


def test_grids_that_do_not_fit_keep_mean_variance_and_slopes():
    tilted = through(
        lambda u: -softplus(-u), Estimate.lognormal(1, {"v": 1.0, "r": 1.0}, ""), unit="", order=8
    )
    both = load_line(12).times(tilted, "V")
    z = np.random.default_rng(7).standard_normal((3, 400_000))
    v = np.log(2000) + log(2.2) * z[2]
    line = v - np.logaddexp(0, v - log(1500) - log(2.5) * z[0] - log(5) * z[1])
    total = line - np.logaddexp(0, -(z[2] + z[1]))
    assert both.mean_log == pytest.approx(total.mean(), abs=0.01)
    assert both.variance_log == pytest.approx(total.var(), rel=0.02)


@settings(deadline=None)
@given(st.floats(0.001, 0.999))
def test_a_quantile_is_the_inverse_of_the_chance_of_exceeding(p):
    voltage = load_line(8)
    assert 1 - voltage.probability_above(voltage.quantile(p)) == pytest.approx(p, abs=1e-6)


def test_a_resolved_lognormal_without_width_keeps_its_quantiles():
    whole = through(lambda x: x, Estimate.lognormal(100, {"a": 0.8}, "V"), unit="V", order=24)
    for p in (0.05, 0.5, 0.95):
        expected = 100 * exp(0.8 * stats.norm.ppf(p))
        assert whole.quantile(p) == pytest.approx(expected, rel=0.05)
        assert whole.probability_above(expected) == pytest.approx(1 - p, abs=0.01)


# Q 0.25 uC, gsd 2.3, against 0.16 uC, ln-spread 0.45: 0.6813 in closed form.
def test_the_probit_of_a_lognormal_is_exact():
    charge = Estimate.lognormal(0.25e-6, {"q": log(2.3)}, "C")
    expected = stats.norm.cdf(log(0.25 / 0.16) / sqrt(log(2.3) ** 2 + 0.45**2))
    assert charge.probit(0.16e-6, 0.45) == pytest.approx(expected, abs=1e-12)
    assert charge.probit(0.0, 0.45) == 1.0


# C 130 pF gsd 1.35, V 3 kV gsd 2: energy 0.585 mJ, gsd 4.131.
def test_energy_doubles_the_doubt_of_voltage():
    voltage = Estimate.lognormal(3000, {"v": log(2)}, "V")
    energy = product(
        "J", Estimate.lognormal(130e-12, {"c": log(1.35)}, "F"), voltage.power(2, "V2")
    )
    assert energy.scaled(0.5).median == pytest.approx(0.585e-3)
    assert exp(energy.spread) == pytest.approx(4.131, abs=1e-3)


@given(st.floats(0.3, 3), st.floats(0.3, 3))
def test_the_posterior_of_a_normal_under_a_density_is_the_textbook_one(sigma, noise):
    # Normal prior, normal likelihood centred on ln 2: Gelman and others, Bayesian Data Analysis.
    prior = Estimate.lognormal(1, {"a": sigma}, "V")
    after = prior.given(lambda x: exp(-0.5 * ((x - log(2)) / noise) ** 2), prior)
    share = sigma**2 / (sigma**2 + noise**2)
    if noise > sigma / 1.5:  # the nodes are meant for probits, which are no narrower
        assert after.mean_log == pytest.approx(share * log(2), abs=5e-3)
        assert after.variance_log == pytest.approx(share * noise**2, abs=5e-3 * sigma**2)


def test_the_posterior_given_that_a_charge_was_felt_agrees_with_monte_carlo():
    capacitance = Estimate.lognormal(130e-12, {"c": log(1.35)}, "F")
    voltage = load_line(12)
    charge = voltage.times(capacitance, "C")
    after = voltage.given(lambda x: stats.norm.cdf((x - log(0.2e-6)) / 0.45), charge)
    z = np.random.default_rng(8).standard_normal((5, 400_000))
    x, y = 1500 * 2.5 ** z[0] * 5 ** z[1], 2000 * 2.2 ** z[2]
    v = x * y / (x + y)
    seen = v[130e-12 * 1.35 ** z[3] * v > 0.2e-6 * np.exp(0.45 * z[4])]
    for p in (0.05, 0.5, 0.95):
        assert after.quantile(p) == pytest.approx(np.quantile(seen, p), rel=0.015)


def test_an_impossible_observation_is_refused():
    with pytest.raises(InvalidValue, match="impossible"):
        load_line(8).given(lambda x: 0.0, load_line(8))


@given(MEDIANS, SPREADS.filter(lambda s: any(abs(v) > 0.01 for v in s.values())))
def test_the_shares_of_a_lognormal_are_its_squared_loadings(median, spreads):
    shares = Estimate.lognormal(median, spreads, "V").contributions()
    total = sum(s * s for s in spreads.values())
    assert sum(shares.values()) == pytest.approx(1)
    for name, share in shares.items():
        assert share == pytest.approx(spreads[name] ** 2 / total)


def test_the_shares_of_a_resolved_quantity_sum_to_one():
    shares = load_line(16).contributions()
    assert sum(shares.values()) == pytest.approx(1)
    assert set(shares) == {"i", "r", "v", "interaction"}


def test_an_exact_quantity_has_nothing_to_contribute():
    assert Estimate.exact(5, "V").contributions() == {}


@given(SPREADS, st.sampled_from("abcd"), st.floats(0, 1))
def test_the_variance_of_an_input_never_grows_when_it_is_measured(spreads, name, share):
    def variance(spread: dict[str, float]) -> float:
        found = Estimate.lognormal(1, spread, "V")
        return found.contributions().get(name, 0.0) * found.variance_log

    measured = {**spreads, name: share * spreads.get(name, 0.0)}
    assert variance(measured) <= variance(spreads) + 1e-12


def test_an_epistemic_interval_brackets_the_value():
    found = Estimate.lognormal(1, {"model_doubt": 0.6, "people": 0.5}, "")
    chance = found.chance_above(1.2, ("model_doubt",))
    assert chance.low < chance.value < chance.high
    moved = exp(stats.norm.ppf(0.95) * 0.6)
    assert chance.high == pytest.approx(stats.norm.sf(log(1.2 / moved) / 0.5))


def test_a_resolved_source_cannot_be_called_known():
    with pytest.raises(InvalidValue, match="already resolved: i, r"):
        load_line(8).known(["i", "r"])


@pytest.mark.parametrize("value", [0, -1, float("nan"), float("inf")])
def test_zero_negative_and_unknown_never_become_an_estimate(value):
    with pytest.raises(InvalidValue):
        Estimate.exact(value, "V")
    with pytest.raises(InvalidValue):
        Estimate.exact(1, "V").scaled(value if value != float("inf") else 0)


@pytest.mark.parametrize("value", [100.0, 1e-6])
def test_an_exact_value_exceeds_what_is_below_it_and_nothing_else(value):
    exact = Estimate.exact(value, "V")
    assert exact.probability_above(value / 2) == pytest.approx(1)
    assert exact.probability_above(value * 2) == pytest.approx(0)
    assert exact.quantile(0.9) == pytest.approx(value)


def test_the_same_quantity_at_two_finenesses_still_multiplies():
    fine, coarse = load_line(12), load_line(8)
    both = fine.times(coarse, "V2")
    assert both.mean_log == pytest.approx(2 * fine.mean_log, abs=0.01)
    assert both.variance_log == pytest.approx(4 * fine.variance_log, rel=0.1)


def test_an_unequal_resolved_pair_keeps_its_weights():
    # One half of the nodes of a two-source mixture: weights still sum to 1 after every step.
    both = load_line(12).times(
        through(lambda x: x, Estimate.lognormal(1, {"h": 1.0}, ""), unit=""), "V"
    )
    assert sum(both.weights) == pytest.approx(1, abs=1e-12)


def test_a_spread_that_is_not_a_number_is_refused():
    with pytest.raises(InvalidValue):
        Estimate.lognormal(1, {"a": float("nan")}, "V")


def test_scores_name_the_sources_that_nodes_resolve():
    voltage = load_line(8)
    assert set(voltage.scores) == {"i", "r", "v"}
    spread = sum(w * z * z for w, z in zip(voltage.weights, voltage.scores["r"], strict=True))
    assert 0 < spread < 1

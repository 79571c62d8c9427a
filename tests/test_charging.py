"""Charging and leaking against published steps, bounds and times, SciPy and Monte Carlo."""

from dataclasses import replace
from math import exp, log

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from triage.errors import InvalidValue
from triage.estimate import Estimate
from triage.physics.charging import (
    Charged,
    Mover,
    approach,
    decay_time,
    in_series,
    largest_step_charge,
    leaking,
    load_line,
    moving,
    quick_act,
)

ONE = Estimate.exact(1.0, "")


def mover(**changes: Estimate | tuple[Estimate, ...] | float) -> Mover:
    """A person on vinyl in ordinary shoes, with plain numbers."""
    plain = Mover(
        current=Estimate.lognormal(5e-8, {"charging_current": log(2.5)}, "A"),
        open_voltage=Estimate.lognormal(1500, {"open_circuit_voltage": log(2.5)}, "V"),
        resistances=(
            Estimate.lognormal(5e11, {"floor_resistance": log(4)}, "ohm"),
            Estimate.lognormal(3e11, {"footwear_resistance": log(4)}, "ohm"),
        ),
        capacitance=Estimate.lognormal(130e-12, {"capacitance": log(1.35)}, "F"),
        doubt=Estimate.lognormal(1.0, {"model_doubt": log(1.8)}, ""),
    )
    return replace(plain, **changes)


def exactly(current: float, volts: float, ohms: float, farads: float) -> Mover:
    """A mover without doubt."""
    return Mover(
        current=Estimate.exact(current, "A"),
        open_voltage=Estimate.exact(volts, "V"),
        resistances=(Estimate.exact(ohms, "ohm"),),
        capacitance=Estimate.exact(farads, "F"),
        doubt=ONE,
    )


# Jonassen, Charging by Walking, Compliance Engineering (2001).
def test_one_sole_separates_at_most_four_tenths_of_a_microcoulomb():
    charge = largest_step_charge(0.015)
    assert charge == pytest.approx(4.0e-7, rel=0.01)
    assert 2 * charge == pytest.approx(8e-7, rel=0.01)  # two steps a second
    assert charge / 130e-12 == pytest.approx(3060, rel=0.01)  # first-step rise


def test_the_typical_current_keeps_below_the_published_bound():
    current = mover().current
    assert current.quantile(0.999) == pytest.approx(8e-7, rel=0.1)


# Conference paper (1997): 1e9 ohm to earth is sufficient for walking, read as 100 V.
def test_a_gigaohm_to_earth_keeps_a_typical_walker_below_a_hundred_volts():
    assert load_line(5e-8 * 1e9, 1500) < 100


@given(st.floats(1, 1e9), st.floats(1, 1e5))
def test_the_plateau_is_below_both_its_limits(source, opened):
    plateau = load_line(source, opened)
    assert plateau <= min(source, opened) * (1 + 1e-12)
    assert 1 / plateau == pytest.approx(1 / source + 1 / opened)


# Saito 1963: V = [V] (1 - tau / [tau]) is the same straight line, tau and [tau] in the plateau.
@given(st.floats(1e-9, 1e-6), st.floats(100, 1e4), st.floats(1e7, 1e13))
def test_the_plateau_is_the_published_load_line(current, opened, resistance):
    plateau = load_line(current * resistance, opened)
    assert plateau == pytest.approx(opened * (1 - plateau / (current * resistance)), rel=1e-6)


def test_the_walk_is_the_solution_of_its_circuit():
    current, volts, ohms, farads, seconds = 5e-8, 1500.0, 4e10, 130e-12, 3.0

    def slope(_, v):
        return (current * (1 - v / volts) - v / ohms) / farads

    solved = solve_ivp(slope, (0, seconds), [0.0], rtol=1e-10, atol=1e-9).y[0, -1]
    found = moving(exactly(current, volts, ohms, farads), seconds=seconds)
    assert found.voltage.median == pytest.approx(solved, rel=1e-6)
    pause = moving(exactly(current, volts, ohms, farads), seconds=seconds, pause=2.0)
    assert pause.voltage.median == pytest.approx(solved * exp(-2 / (ohms * farads)), rel=1e-6)
    assert approach(1000, seconds, 1.5) == pytest.approx(1000 * (1 - exp(-2)))


def test_a_walk_with_a_pause_agrees_with_monte_carlo():
    z = np.random.default_rng(3).standard_normal((5, 300_000))
    i, v = 5e-8 * 2.5 ** z[0], 1500 * 2.5 ** z[1]
    r = 5e11 * 4 ** z[2] + 3e11 * 4 ** z[3]
    c = 130e-12 * 1.35 ** z[4]
    plateau = i * r * v / (i * r + v)
    volts = plateau * -np.expm1(-4 * (1 + i * r / v) / (r * c)) * np.exp(-3 / (r * c))
    found = moving(mover(doubt=ONE), seconds=4, pause=3)
    for p in (0.05, 0.5, 0.95):
        assert found.voltage.quantile(p) == pytest.approx(np.quantile(volts, p), rel=0.015)
    assert found.charge.probability_above(0.2e-6) == pytest.approx(
        (c * volts > 0.2e-6).mean(), abs=3e-3
    )
    energy = 0.5 * c * volts**2
    assert found.energy.median == pytest.approx(np.median(energy), rel=0.02)


def test_two_resistances_in_series_agree_with_monte_carlo():
    z = np.random.default_rng(4).standard_normal((2, 400_000))
    r = 5e11 * 4 ** z[0] + 3e11 * 4 ** z[1]
    found = in_series(*mover().resistances, order=12)
    for p in (0.01, 0.05, 0.5, 0.95, 0.99):
        assert found.quantile(p) == pytest.approx(np.quantile(r, p), rel=0.02)


def test_three_resistances_are_to_be_measured_as_a_system():
    with pytest.raises(InvalidValue, match="one or two"):
        in_series(ONE, ONE, ONE)


@settings(max_examples=60, deadline=None)
@given(st.floats(5, 13), st.floats(0, 2), st.one_of(st.none(), st.floats(0.5, 60)))
def test_more_resistance_to_earth_never_lowers_the_middle_voltage(decade, more, seconds):
    def median(ohms: float) -> float:
        path = Estimate.lognormal(ohms, {"floor_resistance": log(4)}, "ohm")
        return moving(mover(resistances=(path,)), seconds=seconds).voltage.median

    assert median(10 ** (decade + more)) >= median(10**decade) * (1 - 1e-4)


@settings(max_examples=30, deadline=None)
@given(st.floats(0, 20), st.floats(0, 20))
def test_a_longer_pause_never_raises_the_voltage(pause, more):
    short, long = (moving(mover(), seconds=10, pause=p).voltage for p in (pause, pause + more))
    assert long.median <= short.median * (1 + 1e-4)


def test_charge_stays_the_same_while_one_foot_is_lifted():
    body = moving(mover(peak_factor=1.22), seconds=None)
    assert body.peak.median == pytest.approx(1.22 * body.voltage.median)
    assert body.charge.median == pytest.approx(
        body.capacitance.scaled(1 / 1.22).times(body.peak, "C").median
    )


# Persons stay far below 350 mJ and 50 uC (TRGS 727 Annex D): 25 kV on 300 pF.
def test_no_person_reaches_the_limit_for_harm():
    body = Charged(Estimate.exact(25e3, "V"), Estimate.exact(300e-12, "F"))
    assert body.energy.median == pytest.approx(93.75e-3)
    assert body.charge.median == pytest.approx(7.5e-6)


def test_a_lifted_foot_shows_tens_of_volts_on_a_good_path():
    path = (Estimate.exact(1e7, "ohm"),)
    lifted = Estimate.lognormal(25, {"contact_voltage": log(2.2)}, "V")
    plain, with_foot = (
        moving(mover(resistances=path, contact=c), seconds=None).voltage.median
        for c in (None, lifted)
    )
    assert plain == pytest.approx(0.5, rel=0.05)
    # The lifted foot is already in it: its peak is not raised a second time.
    peak = moving(mover(resistances=path, contact=lifted, peak_factor=1.22), seconds=None).peak
    assert peak.median == pytest.approx(with_foot)
    assert with_foot == pytest.approx(25.7, rel=0.05)


# Times to fall to 100 V: 1 to 30 min (garment), unmitigated (Talebzadeh and others 2016).
def test_unmitigated_decay_times_are_those_published():
    seconds = [decay_time(v, 100, 4e11 * 3**z, 100e-12) for v, z in ((5e3, -1.6), (1e4, 1.6))]
    assert 20 < seconds[0] < 60
    assert 600 < seconds[1] < 1800


# 10 to 2 kV in 60 s (Okukubo and Sakai 1974), 100 to 130 pF: 2.9 to 3.7e11 ohm.
@pytest.mark.parametrize(("farads", "ohms"), [(130e-12, 2.87e11), (100e-12, 3.73e11)])
def test_the_resistance_behind_a_published_decay(farads, ohms):
    assert decay_time(10e3, 2e3, ohms, farads) == pytest.approx(60, rel=0.01)


def test_the_time_constant_is_resistance_times_capacitance():
    body = moving(exactly(5e-8, 1500, 3e11, 130e-12), seconds=None)
    assert body.time_constant.median == pytest.approx(39)
    assert Charged(ONE, ONE).time_constant is None


def test_a_leak_after_an_act_is_an_exponential():
    body = Charged(Estimate.exact(4000, "V"), Estimate.exact(130e-12, "F"))
    ohms = Estimate.exact(1e10, "ohm")
    left = leaking(body, resistance=ohms, seconds=1.3)
    assert left.voltage.median == pytest.approx(4000 * exp(-1))
    assert leaking(body, resistance=ohms, seconds=0).voltage == body.voltage


def test_good_shoes_leave_nothing_of_an_act_after_a_second():
    body = Charged(Estimate.lognormal(1100, {"q": log(2.2)}, "V"), Estimate.exact(130e-12, "F"))
    path = Estimate.lognormal(4e7, {"floor_resistance": log(4)}, "ohm")
    assert leaking(body, resistance=path, seconds=1).voltage.quantile(0.99) < 100


def test_corona_holds_every_act_below_its_limit():
    charge = Estimate.lognormal(5e-6, {"quick_act_voltage": log(2.5)}, "C")
    body = Estimate.lognormal(130e-12, {"capacitance": log(1.35)}, "F")
    voltage = quick_act(charge, body, doubt=ONE, corona_limit=40e3).voltage
    assert voltage.quantile(0.999) < 40e3
    free = 5e-6 / 130e-12
    assert voltage.median == pytest.approx(free / (1 + free / 40e3), rel=0.02)


def test_an_act_fixes_charge_so_a_larger_body_has_less_voltage():
    charge = Estimate.lognormal(0.75e-6, {"quick_act_voltage": log(2.5)}, "C")
    small, large = (
        quick_act(charge, Estimate.exact(c, "F"), doubt=ONE, corona_limit=40e3)
        for c in (400e-12, 800e-12)
    )
    assert large.voltage.median == pytest.approx(small.voltage.median / 2, rel=0.05)
    assert large.charge.median == pytest.approx(small.charge.median, rel=0.05)


@pytest.mark.parametrize(
    "attempt",
    [
        lambda: largest_step_charge(0),
        lambda: load_line(0, 100),
        lambda: approach(1, -1, 1),
        lambda: decay_time(100, 200, 1e9, 1e-10),
        lambda: decay_time(100, 0, 1e9, 1e-10),
        lambda: moving(mover(), seconds=0),
        lambda: moving(mover(), seconds=1, pause=-1),
        lambda: moving(mover(), seconds=float("nan")),
        lambda: leaking(Charged(ONE, ONE), resistance=ONE, seconds=-1),
    ],
)
def test_what_cannot_be_is_refused(attempt):
    with pytest.raises(InvalidValue):
        attempt()


def test_the_vacuum_permittivity_is_that_of_the_constants():
    from scipy.constants import epsilon_0

    from triage.physics.charging import VACUUM_PERMITTIVITY

    assert pytest.approx(epsilon_0, rel=1e-9) == VACUUM_PERMITTIVITY

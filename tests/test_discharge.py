"""Discharges against conservation laws, circuit solutions and published waveforms."""

from math import log

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad, solve_ivp

from triage.errors import InvalidValue
from triage.estimate import Estimate
from triage.physics.charging import Charged
from triage.physics.discharge import (
    GENERATOR,
    HUMAN_BODY,
    METAL_PATH,
    SKIN_PATH,
    Circuit,
    between,
    contact_discharge,
    duration,
    in_series,
    peak_current,
    specific_energy,
    stored_energy,
    to_earth,
    to_floating,
    voltage_for_energy,
)

FARADS = st.floats(1e-11, 1e-9)
VOLTS = st.floats(-3e4, 3e4)


# Energy and charge of a body, exact to the digits printed: pF, kV, mJ.
@pytest.mark.parametrize(
    ("picofarads", "kilovolts", "millijoules"),
    [(60, 2, 0.12), (90, 3, 0.405), (130, 3, 0.585), (150, 8, 4.8), (300, 20, 60.0)],
)
def test_energy_of_a_charged_body(picofarads, kilovolts, millijoules):
    energy = stored_energy(picofarads * 1e-12, kilovolts * 1e3)
    assert energy == pytest.approx(millijoules * 1e-3)
    assert voltage_for_energy(picofarads * 1e-12, energy) == pytest.approx(kilovolts * 1e3)


# Thermal-protective garments: 13 kV and 15 mJ belong to 178 pF, a body.
def test_the_capacitance_behind_a_published_energy_is_that_of_a_body():
    assert 2 * 15e-3 / 13e3**2 == pytest.approx(177.5e-12, rel=1e-3)
    assert stored_energy(177.5e-12, 13e3) == pytest.approx(15e-3, rel=1e-3)


@given(FARADS, VOLTS, FARADS, VOLTS)
def test_charge_and_energy_balance_between_two_bodies(c1, v1, c2, v2):
    found = between(c1, v1, c2=c2, v2=v2)
    before = stored_energy(c1, v1) + stored_energy(c2, v2)
    after = stored_energy(c1 + c2, found.remaining)
    assert found.energy == pytest.approx(before - after, rel=1e-6, abs=1e-12 * (1 + before))
    assert c1 * v1 - found.charge == pytest.approx(c1 * found.remaining, abs=1e-15)
    assert min(v1, v2) - 1e-6 <= found.remaining <= max(v1, v2) + 1e-6


def test_two_shocks_in_a_row_are_explained_by_what_remains():
    found = between(130e-12, 5000, c2=80e-12, v2=0)
    assert found.energy == pytest.approx(0.6190e-3, rel=1e-3)
    assert found.charge == pytest.approx(0.2476e-6, rel=1e-3)
    assert found.remaining == pytest.approx(3095.24, rel=1e-5)


def test_a_discharge_to_a_floating_object_agrees_with_monte_carlo():
    z = np.random.default_rng(2).standard_normal((3, 300_000))
    v, c1, c2 = 5000 * 2 ** z[0], 130e-12 * 1.35 ** z[1], 80e-12 * 1.5 ** z[2]
    body = Charged(
        Estimate.lognormal(5000, {"v": log(2)}, "V"),
        Estimate.lognormal(130e-12, {"capacitance": log(1.35)}, "F"),
    )
    other = Estimate.lognormal(80e-12, {"object_capacitance": log(1.5)}, "F")
    spark = to_floating(body, other)
    together = c1 * c2 / (c1 + c2)
    for found, drawn in (
        (spark.charge, together * v),
        (spark.energy, together * v**2 / 2),
        (spark.remaining, v * c1 / (c1 + c2)),
        (in_series(body.capacitance, other), together),
    ):
        for p in (0.05, 0.5, 0.95):
            assert found.quantile(p) == pytest.approx(np.quantile(drawn, p), rel=0.02)


def test_a_discharge_to_earth_leaves_nothing():
    body = Charged(Estimate.exact(3000, "V"), Estimate.exact(130e-12, "F"))
    spark = to_earth(body)
    assert spark.remaining is None
    assert spark.energy.median == pytest.approx(0.585e-3)
    assert spark.charge.median == pytest.approx(0.39e-6)


def solved(circuit: Circuit, volts: float, times: np.ndarray) -> np.ndarray:
    """Current of a series circuit by a solver of differential equations."""

    def slope(_, state):
        held, current = state
        lost = held - circuit.resistance * current
        return [-current / circuit.capacitance, lost / circuit.inductance]

    end = (0, times[-1])
    return solve_ivp(
        slope, end, [volts, 0.0], t_eval=times, method="LSODA", rtol=1e-9, atol=1e-9
    ).y[1]


@pytest.mark.parametrize(
    "circuit",
    [HUMAN_BODY, GENERATOR, Circuit(150e-12, 330, 5e-6), Circuit(1e-9, 20, 1e-6),
     Circuit(100e-12, 200, 1e-6)],
)  # fmt: skip
def test_the_current_of_a_circuit_is_that_of_the_solver(circuit):
    times = np.linspace(0, 3e-7, 200)
    expected = solved(circuit, 8000, times)
    found = [circuit.current(8000, t) for t in times]
    assert found == pytest.approx(expected, abs=1e-5 * max(expected))
    assert circuit.peak(8000) == pytest.approx(max(expected), rel=5e-3)


@pytest.mark.parametrize("circuit", [HUMAN_BODY, GENERATOR, Circuit(1e-9, 20, 1e-6)])
def test_all_the_charge_passes(circuit):
    edges = [0, 1e-9, 1e-8, 1e-7, 3e-6]
    charge = sum(
        quad(lambda t: circuit.current(2000, t), a, b, limit=500)[0]
        for a, b in zip(edges, edges[1:], strict=False)
    )
    assert charge == pytest.approx(circuit.capacitance * 2000, rel=1e-3)


# ANSI/ESDA/JEDEC JS-001, short circuit: peak within 10 %, rise 2 to 10 ns (from memory).
@pytest.mark.parametrize(
    ("volts", "amperes"), [(250, 0.17), (500, 0.33), (1000, 0.67), (2000, 1.33), (4000, 2.67)]
)
def test_the_human_body_model_delivers_its_published_peak(volts, amperes):
    assert HUMAN_BODY.peak(volts) == pytest.approx(amperes, rel=0.10)


def test_the_human_body_model_rises_in_two_to_ten_nanoseconds():
    times = np.linspace(0, HUMAN_BODY.peak_time(), 4000)
    current = np.array([HUMAN_BODY.current(1000, t) for t in times]) / HUMAN_BODY.peak(1000)
    rise = times[np.searchsorted(current, 0.9)] - times[np.searchsorted(current, 0.1)]
    assert 2e-9 <= rise <= 10e-9


# IEC 61000-4-2 Ed. 2 (2008), table of levels: kV, first peak, at 30 ns (30 %), at 60 ns (30 %).
@pytest.mark.parametrize(
    ("kilovolts", "first", "at30", "at60"),
    [(2, 7.5, 4, 2), (4, 15, 8, 4), (6, 22.5, 12, 6), (8, 30, 16, 8)],
)
def test_the_generator_delivers_its_published_currents(kilovolts, first, at30, at60):
    assert contact_discharge(kilovolts * 1e3) == pytest.approx((first, at30, at60))
    assert GENERATOR.current(kilovolts * 1e3, 30e-9) == pytest.approx(at30, rel=0.30)
    assert GENERATOR.current(kilovolts * 1e3, 60e-9) == pytest.approx(at60, rel=0.30)


# Sparks simulated with the Rompe-Weizel law, 150 pF, 0.3 uH: kV, A (hand-held metal), A (finger).
@pytest.mark.parametrize(
    ("kilovolts", "metal", "finger"),
    [(1, 2.4, 0.58), (4, 8.4, 2.2), (8, 16.0, 4.2), (15, 28.9, 7.7), (25, 47.1, 12.7)],
)
def test_the_peak_current_fits_simulated_sparks(kilovolts, metal, finger):
    assert peak_current(kilovolts * 1e3, METAL_PATH) == pytest.approx(metal, rel=0.2)
    assert peak_current(kilovolts * 1e3, SKIN_PATH) == pytest.approx(finger, rel=0.1)


# Electrical Safety of Low-Voltage Systems, p. 221: 1 uF, 10 kV, 1 kohm: 3 ms, 0.050 A2s.
def test_specific_energy_of_a_published_example():
    assert specific_energy(1e-6, 1e4, 1000) == pytest.approx(0.050)
    assert duration(1e-6, 1000) == pytest.approx(3e-3)
    peak = 1e4 / 1000
    assert (specific_energy(1e-6, 1e4, 1000) / 3e-3) ** 0.5 == pytest.approx(peak / 6**0.5)


def test_a_body_spark_is_over_in_a_microsecond():
    assert duration(300e-12, 1000) < 1e-6


@pytest.mark.parametrize(
    "attempt",
    [
        lambda: stored_energy(0, 1),
        lambda: voltage_for_energy(1e-10, -1),
        lambda: between(1e-10, 1, c2=0, v2=0),
        lambda: peak_current(1000, -31),
        lambda: duration(float("nan"), 1),
    ],
)
def test_what_cannot_be_is_refused(attempt):
    with pytest.raises(InvalidValue):
        attempt()

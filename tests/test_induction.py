"""Induction against the conservation of charge and Monte Carlo."""

from math import log

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue
from triage.estimate import Estimate
from triage.materials import load
from triage.physics.charging import Charged
from triage.physics.humidity import Humidity
from triage.physics.induction import after_leaving, beside, induced_voltage, voltage_after_leaving

CART = Charged(Estimate.lognormal(2000, {"v": log(2.5)}, "V"), Estimate.exact(90e-12, "F"))
COUPLING = Estimate.lognormal(20e-12, {"coupling": log(2)}, "F")
OWN = Estimate.lognormal(130e-12, {"capacitance": log(1.35)}, "F")


@given(st.floats(-2e4, 2e4), st.floats(1e-13, 1e-10), st.floats(1e-12, 1e-9))
def test_induction_conserves_charge(volts, coupling, own):
    person = induced_voltage(volts, coupling, own)
    assert own * person == pytest.approx(coupling * (volts - person), rel=1e-9, abs=1e-18)
    assert voltage_after_leaving(volts, coupling, own) * own == pytest.approx(-coupling * volts)


@pytest.mark.parametrize("p", [0.05, 0.5, 0.95])
def test_a_person_beside_a_cart_agrees_with_monte_carlo(p):
    z = np.random.default_rng(9).standard_normal((3, 300_000))
    v, m, c = 2000 * 2.5 ** z[0], 20e-12 * 2 ** z[1], 130e-12 * 1.35 ** z[2]
    person, gone = (f(CART, coupling=COUPLING, own=OWN) for f in (beside, after_leaving))
    for found, drawn in (
        (person.voltage, v * m / (m + c)),
        (person.charge, v * m),
        (gone.voltage, v * m / c),
        (gone.charge, v * m),
    ):
        assert found.quantile(p) == pytest.approx(np.quantile(drawn, p), rel=0.02)


def test_the_scalar_and_the_estimate_agree():
    exact = Charged(Estimate.exact(8000, "V"), Estimate.exact(90e-12, "F"))
    sizes = {"coupling": Estimate.exact(20e-12, "F"), "own": Estimate.exact(130e-12, "F")}
    assert beside(exact, **sizes).voltage.median == pytest.approx(
        induced_voltage(8000, 20e-12, 130e-12)
    )
    assert after_leaving(exact, **sizes).voltage.median == pytest.approx(
        -voltage_after_leaving(8000, 20e-12, 130e-12)
    )


def test_a_plastic_handle_gives_less_than_a_metal_one():
    materials = load()
    air = Humidity(0.25)
    from triage.physics.charging import moving

    cart = moving(materials.roller("vinyl", "nylon", air, body="cart"), seconds=None)
    held = moving(materials.roller("vinyl", "nylon", air, body="person_with_cart"), seconds=None)
    person = beside(cart, coupling=materials.coupling(), own=materials.capacitance("standing"))
    assert person.charge.median < held.charge.median / 3


@pytest.mark.parametrize(
    "attempt",
    [lambda: induced_voltage(1, 0, 1e-10), lambda: voltage_after_leaving(1, 1e-12, 0)],
)
def test_what_cannot_be_is_refused(attempt):
    with pytest.raises(InvalidValue):
        attempt()

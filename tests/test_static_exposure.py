"""Static exposure through the public functions: readings win, two bodies share, order holds."""

from dataclasses import replace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from triage.bounds import Reading
from triage.conditions import Conditions, Touch
from triage.errors import InvalidValue
from triage.exposure import widest_conditions
from triage.materials import load
from triage.physics.discharge import between
from triage.physics.humidity import Humidity
from triage.static_exposure import STATIC_CAUSES, Measured, static_exposure, story

M = load()
FLOORS, SHOES, WHEELS = (st.sampled_from([*t]) for t in (M.floors, M.footwear, M.casters))
CAUSES = st.sampled_from(STATIC_CAUSES)
ACTS = st.sampled_from(["rise", "slide_patient", "wipe_plastic"])
EASY = settings(max_examples=40, deadline=None)


def where(**other) -> Conditions:
    values = {
        "humidity": Humidity(0.3, 0.0), "humidity_text": "", "floor": "vinyl",
        "footwear": "ordinary", "casters": "rubber", "steps": None, "pause": 0.0,
        "object_kind": "cart", "voltage": 230.0, "voltage_known": True, "frequency": 50.0,
        "isolated": False, "defaults": (),
    }  # fmt: skip
    return Conditions(**values | other)


def exposed(cause="person_walking", readings=Measured(), **other):  # noqa: B008
    return static_exposure(story(cause, where(**other), readings, widest_conditions()))


@given(CAUSES, FLOORS, SHOES, WHEELS, ACTS, st.floats(0.05, 0.9), st.floats(0.01, 0.3))
@EASY
def test_more_humidity_never_raises_the_median_voltage(cause, floor, shoe, wheel, act, rh, more):
    same = {"floor": floor, "footwear": shoe, "casters": wheel, "touch": Touch(act=act)}
    dry = exposed(cause, humidity=Humidity(rh, 0.0), **same)
    damp = exposed(cause, humidity=Humidity(min(rh + more, 1.0), 0.0), **same)

    assert damp.voltage.median <= dry.voltage.median * (1 + 1e-6)


@given(CAUSES, SHOES, st.floats(5, 13), st.floats(0.05, 3), st.sampled_from([0.0, 1.0, 20.0]))
@EASY
def test_more_resistance_to_earth_never_lowers_the_median_voltage(cause, shoe, at, more, pause):
    def volts(decades: float) -> float:
        ohms = Reading(10**decades, "ohm")
        read = Measured(person_resistance=ohms, object_resistance=ohms)
        return exposed(cause, read, footwear=shoe, pause=pause).voltage.median

    assert volts(at + more) >= volts(at) * (1 - 1e-6)


@pytest.mark.parametrize(("field", "source", "cause"), [
    ("floor", "floor_resistance", "person_walking"),
    ("footwear", "footwear_resistance", "person_walking"),
    ("floor", "floor_resistance", "charged_object"),
    ("casters", "caster_resistance", "charged_object"),
])  # fmt: skip
@given(st.floats(6, 13), FLOORS, SHOES, WHEELS)
@settings(max_examples=15, deadline=None)
def test_a_measured_input_contributes_less_variance_than_the_assumption(
    field, source, cause, decades, floor, shoe, wheel
):
    """At the middle of the assumption, where a reading changes the doubt and nothing else."""
    table, word = {"floor": ("floors", floor), "footwear": ("footwear", shoe),
                   "casters": ("casters", wheel)}[field]  # fmt: skip
    middle = M.resistance(table, word, Humidity(0.3, 0.0)).median
    reading = Reading(middle, "ohm")

    def variance(readings: Measured) -> float:
        volts = exposed(cause, readings, floor=floor, footwear=shoe, casters=wheel).voltage
        return volts.contributions().get(source, 0.0) * volts.variance_log

    before, after = variance(Measured()), variance(Measured(**{field: reading}))
    assert after <= before + 1e-9


@given(CAUSES, FLOORS, SHOES, WHEELS, st.booleans(), st.floats(2, 4), st.floats(0.02, 1))
@EASY
def test_the_chance_of_feeling_rises_with_the_charge(
    cause, floor, shoe, wheel, floats, decades, more
):
    def found(value: float):
        volts = Reading(value, "V")
        read = Measured(person_voltage=volts, object_voltage=volts)
        return exposed(cause, read, floor=floor, footwear=shoe, casters=wheel,
                       touch=Touch(floats=floats))  # fmt: skip

    weak, strong = found(10**decades), found(10 ** (decades + more))
    assert strong.charge.median > weak.charge.median
    assert strong.felt.value >= weak.felt.value


# Conservation of energy and charge: textbook two-capacitor problem (Halliday, Resnick, Walker 25).
@given(st.floats(1e-11, 1e-9), st.floats(500, 20000))
@EASY
def test_two_floating_bodies_keep_what_the_spark_does_not_take(farads, volts):
    touch = Touch(farads=farads, farads_from="measured", floats=True)
    found = exposed(readings=Measured(person_voltage=Reading(volts, "V")), touch=touch)
    one, other = found.capacitance.median, found.other.median
    exact = between(one, volts, c2=other, v2=0)

    assert found.charge.median == pytest.approx(exact.charge, rel=0.02)
    assert found.energy.median == pytest.approx(exact.energy, rel=0.02)
    assert found.remaining.median == pytest.approx(exact.remaining, rel=0.02)
    kept = (one + other) * found.remaining.median**2 / 2
    assert found.energy.median + kept == pytest.approx(one * volts**2 / 2, rel=0.05)


def test_a_discharge_to_earth_leaves_nothing_and_passes_all():
    found = exposed()
    assert found.remaining is None
    assert found.charge.median == pytest.approx(found.body.charge.median)


def test_a_person_who_touches_a_charged_object_floats_unless_a_hand_is_on_earthed_metal():
    floating, earthed = exposed("charged_object"), exposed("charged_object",
                                                           touch=Touch(earthed=True))  # fmt: skip
    assert floating.remaining is not None and earthed.remaining is None
    assert floating.felt.value < earthed.felt.value


@pytest.mark.parametrize(("cause", "field"), [("person_walking", "person_voltage"),
                                              ("person_rising", "person_voltage"),
                                              ("charged_object", "object_voltage")])  # fmt: skip
def test_a_voltage_reading_replaces_the_model(cause, field):
    found = exposed(cause, Measured(**{field: Reading(4000, "V")}))
    assert found.voltage.median == pytest.approx(4000)
    assert set(found.voltage.contributions()) == {"measured_voltage"}
    assert found.voltage.basis["measured_voltage"].kind == "measured"


@pytest.mark.parametrize("value", [1e3, 1e6, 1e9, 1e12, 1e15])
@pytest.mark.parametrize("bound", ["<", ">"])
def test_a_bound_on_a_resistance_is_kept(bound, value):
    read = Measured(person_resistance=Reading(value, "ohm", bound))
    found = exposed(readings=read).resistance
    beyond = found.probability_above(value)
    # Where no material of the table explains the reading it is placed a factor 3 beyond it.
    assert (beyond if bound == ">" else 1 - beyond) >= 0.84


def test_a_bound_that_says_nothing_new_changes_nothing():
    read = Measured(person_resistance=Reading(1e6, "ohm", ">"))
    assert exposed(readings=read).felt.value == pytest.approx(exposed().felt.value, rel=0.02)


def test_a_bound_against_the_words_of_the_record_wins_over_them():
    said = exposed(floor="conductive", footwear="esd")
    read = exposed(floor="conductive", footwear="esd",
                   readings=Measured(person_resistance=Reading(1e10, "ohm", ">")))  # fmt: skip
    assert said.felt.value < 1e-3
    assert read.resistance.quantile(0.05) > 1e10
    assert read.voltage.median > 3 * said.voltage.median


def test_a_bound_on_a_voltage_cuts_the_model_there():
    low = exposed(readings=Measured(person_voltage=Reading(300, "V", "<")))
    high = exposed(readings=Measured(person_voltage=Reading(3000, "V", ">")))
    assert low.voltage.quantile(0.99) <= 300 and high.voltage.quantile(0.01) >= 3000
    assert low.felt.value < exposed().felt.value < high.felt.value


def test_thick_soles_hold_less_charge_at_a_higher_voltage():
    thick, flat = (exposed("person_rising", footwear=s) for s in ("foam_clog", "ordinary"))
    assert thick.capacitance.median < flat.capacitance.median
    assert thick.voltage.median > flat.voltage.median


def test_metal_in_the_hand_makes_the_same_spark_less_often_felt():
    assert exposed(touch=Touch(held_metal=True)).felt.value < exposed().felt.value


# Japanese static-safety guide (1988): one spark from an insulator carries 0.1 to 0.3 uC.
def test_a_wiped_plastic_gives_a_limited_charge_whatever_its_surface_voltage():
    found = exposed("person_rising", touch=Touch(act="wipe_plastic"))
    strong = exposed("person_rising", touch=Touch(act="wipe_plastic"),
                     readings=Measured(person_voltage=Reading(30000, "V")))  # fmt: skip
    assert found.charge.quantile(0.95) < 0.3e-6
    assert strong.voltage.median == pytest.approx(30000)
    assert strong.charge.median == pytest.approx(found.charge.median)


# Haberman, Cassino, Spinelli (2011): bed with patient, hundreds of pF.
def test_a_patient_on_a_bed_holds_the_charge_of_the_sheet_on_hundreds_of_picofarads():
    found = exposed("person_rising", touch=Touch(act="slide_patient", lying=True))
    assert 2e-10 < found.capacitance.median < 2e-9
    assert found.remaining is not None


# Capacitive divider: a person beside a plastic at V floats at V Cc / (Cc + C).
def test_a_person_beside_a_charged_plastic_takes_the_share_of_the_divider():
    found = exposed("induction", touch=Touch(plastic=True))
    surface = M.act_voltage("wipe_plastic", Humidity(0.3, 0.0)).median
    own, coupling = M.capacitance("standing").median, M.coupling().median
    assert found.voltage.median == pytest.approx(surface * coupling / (coupling + own), rel=0.05)


def test_an_object_counts_as_floating_by_its_reading_and_not_by_its_wheels():
    touch = Touch(floats=True)
    leads = exposed(touch=touch, readings=Measured(object_resistance=Reading(1e5, "ohm")))
    holds = exposed(touch=replace(touch, floats=False),
                    readings=Measured(object_resistance=Reading(1e12, "ohm")))  # fmt: skip
    assert leads.other is None and holds.other is not None


def test_a_word_the_tables_do_not_know_is_refused_with_the_words_there_are():
    with pytest.raises(InvalidValue, match="vinyl"):
        exposed(floor="marshmallow")

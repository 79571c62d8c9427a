"""From record to static exposure: which readings count, what is neutral, what is taken."""

import random

import pytest
from random_records import record

from triage.exposure import estimate_exposure
from triage.knowledge import knowledge
from triage.site import no_site
from triage.static_exposure import STATIC_CAUSES
from triage.validity import judge_checks


def exposure_of(tree):
    incident = record(tree).incident
    return estimate_exposure(incident, no_site(), judge_checks(incident, no_site()))


def walk(*checks, **other):
    """A person who walked up to a cart on insulating wheels."""
    return {
        "schema": "1", "id": "0123456789abcdef" * 2,
        "items": [{"id": "cart", "kind": "cart", "power": "none", "casters": "rubber"},
                  {"id": "nurse", "kind": "person"}],
        "contacts": [{"id": "c1", "items": ["cart"], "also_touching": "nothing"}],
        "event": {"at": "2026-01-14 10:30", "activity": "walking", "pause": "1 s"},
        "surroundings": {"humidity": "25 %", "floor": "vinyl", "footwear": "ordinary"},
        "checks": list(checks),
    } | other  # fmt: skip


METHOD = {"static_reenactment": "contactless_meter",
          "object_voltage_after_rolling": "contactless_meter"}  # fmt: skip


def check(kind, value, of="nurse", **other):
    return {"id": f"k{random.Random(kind + value).randrange(10**6)}", "kind": kind, "of": of,
            "method": METHOD.get(kind, "dc_100v"), "stage": "as_found", "value": value,
            "disturbed": ["none"], "state": ["moved"], "instrument": "m1",
            "calibration_due": "2027-01-01", "at": "2026-01-14 13:00"} | other  # fmt: skip


READINGS = [
    ("static_reenactment", "3 kV", "nurse", "person_walking", "measured_voltage"),
    ("object_voltage_after_rolling", "3 kV", "cart", "charged_object", "measured_voltage"),
    ("person_to_ground", "20 Gohm", "nurse", "person_walking", "resistance_to_earth"),
    ("object_to_ground", "20 Gohm", "cart", "charged_object", "resistance_to_earth"),
    ("floor_resistance", "20 Gohm", "nurse", "person_walking", "floor_resistance"),
    ("footwear_resistance", "20 Gohm", "nurse", "person_walking", "footwear_resistance"),
    ("caster_resistance", "20 Gohm", "cart", "charged_object", "caster_resistance"),
]


def basis(exposure, cause, source):
    static = exposure.causes[cause].static
    return ((static.resistance.basis if static.resistance else {}) | static.voltage.basis)[source]


@pytest.mark.parametrize(("kind", "value", "of", "cause", "source"), READINGS)
def test_a_valid_reading_replaces_the_assumption(kind, value, of, cause, source):
    found = exposure_of(walk(check(kind, value, of)))
    assert basis(found, cause, source).kind == "measured"


@pytest.mark.parametrize(("kind", "value", "of", "cause", "source"), READINGS)
@pytest.mark.parametrize("spoilt", [
    {"unit_disputed": "yes"}, {"calibration_due": "2025-01-01"}, {"method": "unknown"},
    {"stage": "as_left"}, {"value": "unknown"}, {"value": "three"},
])  # fmt: skip
def test_a_reading_that_does_not_count_changes_nothing(kind, value, of, cause, source, spoilt):
    bare, found = exposure_of(walk()), exposure_of(walk(check(kind, value, of) | spoilt))
    assert found.causes[cause].static == bare.causes[cause].static
    assert found.causes[cause].factor == bare.causes[cause].factor


@pytest.mark.parametrize("bound", ["> 1 Gohm", "< 1 Mohm"])
def test_a_bound_is_used_as_a_bound(bound):
    found = exposure_of(walk(check("person_to_ground", bound)))
    ohms = found.causes["person_walking"].static.resistance
    if bound.startswith(">"):
        assert ohms.quantile(0.01) >= 1e9
    else:
        assert ohms.median < 1e6


def test_a_voltage_read_as_nothing_makes_static_implausible():
    found = exposure_of(walk(check("static_reenactment", "0 V"),
                             check("object_voltage_after_rolling", "0 V", "cart")))  # fmt: skip
    assert found.causes["person_walking"].static.felt.value < 0.01
    assert found.static_plausible is False


def test_of_several_readings_the_largest_counts_and_of_wheels_the_lowest():
    found = exposure_of(walk(
        check("static_reenactment", "1 kV"), check("static_reenactment", "4 kV"),
        check("caster_resistance", "1 Gohm", "cart"), check("caster_resistance", "1 Mohm", "cart"),
    ))  # fmt: skip
    assert found.causes["person_walking"].static.voltage.median == pytest.approx(4000)
    assert "1e+06" in basis(found, "charged_object", "caster_resistance").note


def test_a_floor_reading_counts_whatever_item_it_is_noted_under():
    tree = walk(check("floor_resistance", "20 Gohm", "door"))
    tree["items"] = [*tree["items"], {"id": "door", "kind": "furniture_fixed"}]
    assert basis(exposure_of(tree), "person_walking", "floor_resistance").kind == "measured"


@pytest.mark.parametrize("path", ["humidity", "floor", "footwear"])
def test_what_is_not_known_is_neutral_in_the_ranking_and_wide_in_print(path):
    """The answer of the reference conditions weighs like no answer, and narrows the print."""
    unknown = walk(event={"activity": "walking"}, surroundings={})
    row = knowledge().reference["ward"]
    said = f"{row[path]} %" if path == "humidity" else row[path]
    known = unknown | {"surroundings": {path: said}}
    bare, told = (exposure_of(t).causes["person_walking"] for t in (unknown, known))
    assert told.factor == pytest.approx(bare.factor, rel=0.05)
    if path != "humidity":  # drier or damper air bends the curve, so its spread is no measure
        assert told.static.voltage.variance_log < bare.static.voltage.variance_log


def test_a_pause_nobody_noted_is_said_to_be_taken():
    bare = walk(event={"activity": "walking"})
    noted = walk(event={"activity": "walking", "pause": "1 s"})
    assert any("pause" in note for note in exposure_of(bare).notes)
    assert not any("pause" in note for note in exposure_of(noted).notes)
    one, other = (exposure_of(t).causes["person_walking"].static.voltage for t in (bare, noted))
    assert one.median == pytest.approx(other.median)


def test_earthed_metal_in_the_other_hand_is_shown_and_never_speaks_for_static():
    bare, held = walk(), walk()
    held["contacts"] = [{"id": "c1", "items": ["cart"], "also_touching": "earthed_metal"}]
    before, after = (exposure_of(t).causes["charged_object"] for t in (bare, held))
    assert after.static.felt.value > before.static.felt.value
    assert after.factor == before.factor


def test_a_plastic_on_record_gives_induction_an_estimate_and_no_weight():
    tree = walk()
    assert exposure_of(tree).causes["induction"].static is None
    tree["items"] = [*tree["items"], {"id": "film", "kind": "plastic_item"}]
    found = exposure_of(tree).causes["induction"]
    assert found.static is not None and found.factor == 1.0


@pytest.mark.parametrize("spoilt", [
    {"humidity": "0 %"}, {"humidity": "100 %"}, {"humidity": "5 %"}, {"humidity": "> 90 %"},
    {"humidity": "60 %", "temperature_at_sensor": "60 degC", "temperature_at_place": "-30 degC"},
])  # fmt: skip
def test_hostile_air_gives_a_number_or_a_reason_and_never_a_crash(spoilt):
    found = exposure_of(walk(surroundings=spoilt))
    for cause in STATIC_CAUSES:
        each = found.causes[cause]
        assert each.static is not None or each.unknown
    assert found.notes[0]


@pytest.mark.parametrize("value", ["0 ohm", "-5 ohm", "1e30 ohm", "nan ohm", "> 0 ohm", "5"])
def test_a_hostile_resistance_reading_never_becomes_a_number(value):
    bare = exposure_of(walk()).causes["person_walking"]
    found = exposure_of(walk(check("person_to_ground", value))).causes["person_walking"]
    assert found.static == bare.static


@pytest.mark.parametrize("item", [
    {"length": "10 m", "width": "10 m", "clearance": "1 mm"},
    {"length": "1 cm", "width": "1 cm", "clearance": "5 m"},
    {"capacitance": "1 pF"}, {"capacitance": "1 uF"},
])  # fmt: skip
def test_the_smallest_and_largest_object_still_give_probabilities(item):
    tree = walk()
    tree["items"] = [tree["items"][0] | item, tree["items"][1]]
    for cause in STATIC_CAUSES:
        felt = exposure_of(tree).causes[cause].static.felt
        assert all(0 <= p <= 1 for p in (felt.low, felt.value, felt.high))


@pytest.mark.parametrize("told", [{"seat": "antistatic"}, {"garment": "cotton"}])
def test_a_seat_or_garment_that_charges_less_weighs_less_and_never_more(told):
    def rising(surroundings):
        tree = walk() | {"surroundings": surroundings}
        tree["event"] = {**tree.get("event", {}), "activity": "rising_undressing"}
        return exposure_of(tree).causes["person_rising"]

    usual = {"garment": "synthetic"} if "garment" in told else {}
    assert rising(told).felt.value < rising(usual).felt.value
    assert rising(told).factor < rising(usual).factor

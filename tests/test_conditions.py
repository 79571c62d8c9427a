"""Circumstances of one incident: act, bodies and contact of a discharge; what is not known."""

import pytest
from random_records import Tree, record

from triage.conditions import FAR_SD, NEAR_SD, resolve
from triage.involvement import involved
from triage.physics.capacitance import plate_over_floor
from triage.site import no_site

CART = {"id": "cart", "kind": "cart", "power": "none", "casters": "nylon"}


def found(tree: Tree):
    """Conditions of a tree."""
    base: Tree = {"schema": "1", "id": "0123456789abcdef" * 2}
    incident = record(base | tree).incident
    return resolve(incident, no_site(), involved(incident)[0])


def touching(*items: Tree, **contact: str):
    return {"items": list(items),
            "contacts": [{"id": "c1", "items": [i["id"] for i in items], **contact}]}  # fmt: skip


@pytest.mark.parametrize(("activity", "kind", "act"), [
    ("rising_undressing", "furniture_fixed", "rise"),
    ("walking", "furniture_fixed", "rise"),
    ("handling_plastic", "bed", "slide_patient"),
    ("handling_plastic", "person", "slide_patient"),
    ("handling_plastic", "furniture_fixed", "wipe_plastic"),
])  # fmt: skip
def test_the_act_follows_what_the_person_was_doing(activity, kind, act):
    tree = touching({"id": "it", "kind": kind}) | {"event": {"activity": activity}}
    assert found(tree).touch.act == act


@pytest.mark.parametrize(("told", "act", "surface"), [
    ({}, "rise", None),
    ({"seat": "antistatic"}, "rise", "antistatic"),
    ({"garment": "cotton"}, "garment_off", "cotton"),
    ({"garment": "cotton", "seat": "foam"}, "rise", "foam"),
])  # fmt: skip
def test_a_garment_alone_means_undressing_and_a_seat_rising(told, act, surface):
    tree = touching({"id": "it", "kind": "furniture_fixed"}) | {
        "event": {"activity": "rising_undressing"}, "surroundings": told,
    }  # fmt: skip
    touch = found(tree).touch
    assert (touch.act, touch.surface) == (act, surface)


def test_a_capacitance_that_was_measured_wins_over_the_size():
    sized = CART | {"length": "900 mm", "width": "50 cm", "clearance": "0.15 m"}
    by_size = found(touching(sized)).touch
    measured = found(touching(sized | {"capacitance": "110 pF"})).touch

    assert by_size.farads == pytest.approx(plate_over_floor(0.45, 0.15))
    assert by_size.farads_from == "geometry"
    assert measured.farads == pytest.approx(110e-12) and measured.farads_from == "measured"


@pytest.mark.parametrize("left_out", ["length", "width", "clearance"])
def test_a_size_with_a_part_missing_or_out_of_bounds_is_no_size(left_out):
    sized = CART | {"length": "900 mm", "width": "50 cm", "clearance": "0.15 m"}
    assert found(touching(sized | {left_out: "unknown"})).touch.farads is None
    assert found(touching(sized | {left_out: "> 0.1 m"})).touch.farads is None


def test_the_size_of_one_of_two_objects_is_not_taken_for_both():
    sized = CART | {"length": "900 mm", "width": "50 cm", "clearance": "0.15 m"}
    assert found(touching(sized, CART | {"id": "other"})).touch.farads is None


@pytest.mark.parametrize(("change", "floats"), [
    ({}, True), ({"casters": "conductive"}, False), ({"casters": "unknown"}, None),
    ({"power": "mains_on"}, None), ({"power": "unknown"}, None),
])  # fmt: skip
def test_only_an_unpowered_object_on_known_wheels_floats_or_does_not(change, floats):
    assert found(touching(CART | change)).touch.floats is floats


def test_an_object_touched_together_with_fixed_metal_is_not_taken_to_float():
    rail = {"id": "rail", "kind": "furniture_fixed"}
    assert found(touching(CART, rail)).touch.floats is None


def test_metal_in_the_hand_counts_only_where_every_contact_went_through_it():
    held = touching(CART, covering="held_metal")
    both = held | {"contacts": [*held["contacts"], {"id": "c2", "items": ["cart"]}]}
    assert found(held).touch.held_metal is True
    assert found(both).touch.held_metal is False
    assert found({"items": [CART]}).touch.held_metal is False


def test_a_pushed_cart_is_part_of_the_body_only_where_something_else_was_touched():
    door = {"id": "door", "kind": "furniture_fixed"}
    pushing = {"event": {"activity": "pushing_cart"}}
    assert found(touching(door) | pushing).touch.pushing is True
    assert found(touching(CART) | pushing).touch.pushing is False


def test_a_patient_who_did_not_walk_is_seated_or_lying():
    patient = touching(CART) | {"persons": [{"id": "p1", "who": "patient"}]}
    assert found(patient).touch.posture == "seated"
    assert found(patient | {"event": {"activity": "walking"}}).touch.posture is None
    assert found(touching(CART)).touch.posture is None


def test_a_plastic_on_record_is_noticed():
    assert found(touching(CART, {"id": "film", "kind": "plastic_item"})).touch.plastic
    assert not found(touching(CART)).touch.plastic


@pytest.mark.parametrize(("told", "humidity"), [
    ({}, None), ({"humidity": "> 30 %"}, None), ({"humidity": "24 %"}, 0.24),
    ({"humidity": "60 %", "temperature_at_sensor": "30 degC", "temperature_at_place": "5 degC",
      "humidity_where": "elsewhere"}, None),
])  # fmt: skip
def test_a_humidity_that_cannot_be_is_not_known_and_says_why(told, humidity):
    conditions = found({"surroundings": told})
    got = conditions.humidity.fraction if conditions.humidity else None
    assert got == (pytest.approx(humidity) if humidity else None)
    assert conditions.humidity_text


@pytest.mark.parametrize(("where", "at", "doubt"), [
    ("at_place", "2026-01-14 10:50", NEAR_SD), ("at_place", "2026-01-14 14:00", FAR_SD),
    ("elsewhere", "2026-01-14 10:50", FAR_SD), ("unknown", "2026-01-14 10:50", FAR_SD),
    ("at_place", "unknown", FAR_SD),
])  # fmt: skip
def test_a_reading_far_in_place_or_time_is_doubted_more(where, at, doubt):
    tree = {"event": {"at": "2026-01-14 10:30"},
            "surroundings": {"humidity": "24 %", "humidity_where": where,
                             "humidity_at": at}}  # fmt: skip
    assert found(tree).humidity.sd == doubt

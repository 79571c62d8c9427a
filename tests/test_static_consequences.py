"""What a discharge does: currents, decay, posteriors, ignition, upset, rules, shares."""

import pytest
from random_records import record

from triage.bounds import Reading
from triage.conditions import Conditions, Touch
from triage.exposure import widest_conditions
from triage.physics.humidity import Humidity
from triage.static_consequences import (
    after_statements,
    current,
    decay,
    far_from_harm,
    gap,
    ignitions,
    lasting,
    noticed,
    room_rules,
    saved_by_voltage,
    shares,
    upsets,
)
from triage.static_exposure import Measured, static_exposure, story

HEAD = {"schema": "1", "id": "0123456789abcdef" * 2}


def where(**other) -> Conditions:
    values = {
        "humidity": Humidity(0.3, 0.0), "humidity_text": "", "floor": "vinyl",
        "footwear": "ordinary", "casters": "rubber", "steps": None, "pause": 0.0,
        "object_kind": "cart", "voltage": 230.0, "voltage_known": True, "frequency": 50.0,
        "isolated": False, "defaults": (),
    }  # fmt: skip
    return Conditions(**values | other)


def body(volts=5000.0, cause="person_walking", **other):
    """A body whose voltage was read."""
    read = Measured(person_voltage=Reading(volts, "V"), object_voltage=Reading(volts, "V"))
    return static_exposure(story(cause, where(**other), read, widest_conditions()))


def incident(**parts):
    return record(HEAD | parts).incident


# ANSI/ESDA/JEDEC JS-001: 5 kV through 1500 ohm is 3.3 A at most; the arc takes some of it.
def test_the_peak_current_stays_below_that_of_the_bare_resistance():
    assert 0.6 * 5000 / 1500 < current(body()).median < 5000 / 1500


def test_metal_in_the_hand_makes_the_current_larger_and_shorter():
    held = body(touch=Touch(held_metal=True))
    assert current(held).median > 3 * current(body()).median
    assert lasting(held).median < lasting(body()).median / 3


# Paschen minimum in air, about 327 V (high-voltage engineering texts): no spark below it.
@pytest.mark.parametrize(("volts", "jumps"), [(200, False), (5000, True)])
def test_a_low_voltage_jumps_no_gap(volts, jumps):
    assert (gap(body(volts)) is not None) is jumps


def test_a_voltage_beyond_the_formula_gives_no_gap_and_no_crash():
    assert gap(body(90000)) is None


# Talebzadeh and others, IEEE Trans. EMC 58(4) 1266 (2016): 1 to 30 minutes down to 100 V.
def test_a_person_in_ordinary_shoes_keeps_a_charge_for_minutes():
    assert 60 <= decay(body(8000)).median <= 1800


@pytest.mark.parametrize(("volts", "touch", "cause"), [
    (80, Touch(), "person_walking"), (3000, Touch(act="wipe_plastic"), "person_rising"),
])  # fmt: skip
def test_nothing_leaks_away_from_a_plastic_or_from_a_body_without_charge(volts, touch, cause):
    assert decay(body(volts, cause, touch=touch)) is None


def test_the_stronger_word_is_the_rarer():
    found = noticed(body())
    assert body().felt.value > found["unpleasant"].value > found["painful"].value
    assert set(found) == {"unpleasant", "painful", "heard", "seen"}


def walked():
    return static_exposure(story("person_walking", where(), Measured(), widest_conditions()))


def test_what_people_noticed_moves_the_voltage_the_way_it_should():
    spark = walked()

    def volts(**said: str) -> float:
        told = incident(statements=[{"id": "s1"} | said]).statements
        return after_statements(spark, told).voltage.median

    felt = volts()
    assert felt > spark.voltage.median
    assert volts(crack_heard="yes") > felt > volts(crack_heard="no")
    assert volts(spark_seen="yes") > felt > volts(spark_seen="no")
    assert volts(crack_heard="unknown") == pytest.approx(felt)


def test_witnesses_who_differ_settle_nothing():
    two = [{"id": "s1", "crack_heard": "yes"}, {"id": "s2", "crack_heard": "no"}]
    found = after_statements(walked(), incident(statements=two).statements)
    assert found.because == ("felt",)


def test_a_discharge_that_nobody_can_notice_keeps_its_estimates():
    nothing = static_exposure(story(
        "person_rising", where(floor="conductive", footwear="esd", pause=600.0), Measured(),
        widest_conditions(),
    ))  # fmt: skip
    found = after_statements(nothing, ())
    assert found.because == () and found.voltage == static_exposure(nothing.told, 5).voltage
    assert ignitions(incident(scene={"flammable": ["wet_alcohol"]}), [nothing]) == ()


# NFPA 77-type lists: ethanol vapour in air from 0.23 mJ; 130 pF holds that at 1.9 kV.
def test_a_spark_that_was_felt_usually_lights_wet_alcohol_and_any_vapour_in_oxygen():
    scene = incident(scene={"flammable": ["wet_alcohol", "oxygen", "other_vapour"]})
    found = {(each.fuel, each.oxygen): each for each in ignitions(scene, [body(8000), body(50)])}
    assert found["ethanol", False].minimum == pytest.approx(0.23e-3)
    assert found["ethanol", False].chance > 0.95
    assert min(each.chance for key, each in found.items() if key[1]) > 0.95
    assert ignitions(incident(scene={"flammable": ["none"]}), [body(8000)]) == ()


def test_an_item_with_a_declared_immunity_gets_its_chance():
    pump = {"id": "pump", "kind": "device_mains", "immunity": "8 kV"}
    weak, strong = (upsets(incident(items=[pump]), body(v))[0][1].value for v in (2000, 20000))
    assert weak < 0.01 and strong > 0.95
    assert upsets(incident(items=[pump | {"immunity": "unknown"}]), body()) == ()


# Rules as in their standards: ASHRAE 170-2017 for operating rooms, 20 to 60 % RH.
def test_the_rules_for_the_air_follow_the_room_and_the_floor():
    dry = where(humidity=Humidity(0.18, 0.03), floor="vinyl")
    theatre = {rule.text.split(",")[0]: kept for rule, kept in room_rules(dry, "operating_room")}
    assert theatre["operating rooms"] is False
    assert len(room_rules(dry, "ward")) == 1
    assert room_rules(where(floor="mineral"), "ward") == ()
    assert room_rules(where(humidity=None), "operating_room") == ()


# TRGS 727 annex D: 350 mJ or 50 uC; 25 kV on 300 pF is 94 mJ and 7.5 uC.
def test_a_charged_person_stays_far_below_what_harms_directly():
    energy, charge = far_from_harm(body(25000))
    assert energy < 94 / 350 and charge < 7.5 / 50


def test_the_shares_of_the_spread_make_one_and_knowing_a_source_saves_its_part():
    found = shares(walked().voltage)
    assert sum(each.share for each in found) == pytest.approx(1)
    for each in found:
        assert each.saved == pytest.approx(1 - max(1 - each.share, 0) ** 0.5)


def test_reading_the_voltage_saves_what_the_exposure_then_shows():
    """The promise made before the reading is what the reading keeps."""
    before = walked().voltage
    after = body(before.median).voltage
    kept = (after.variance_log / before.variance_log) ** 0.5
    assert saved_by_voltage(before) == pytest.approx(1 - kept, abs=0.01)
    assert saved_by_voltage(after) == 0

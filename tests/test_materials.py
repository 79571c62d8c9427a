"""The tables of materials, and the model they make, against published voltages."""

from copy import deepcopy
from dataclasses import replace
from importlib.resources import files
from pathlib import Path

import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st

from triage.errors import BadTable, InvalidValue
from triage.estimate import Estimate
from triage.materials import ROW_TABLES, build, load
from triage.physics.charging import moving, quick_act
from triage.physics.humidity import Humidity
from triage.physics.sensation import perceived

PUBLISHED = yaml.safe_load((Path(__file__).parent / "published/static_voltages.yaml").read_text())
M = load()
FLOORS, SHOES, CASTERS = st.sampled_from([*M.floors]), st.sampled_from([*M.footwear]), [*M.casters]


def charged(row: dict) -> Estimate:
    """Voltage of the model under the conditions of one published row."""
    air = Humidity(row["rh"] / 100)
    if row["act"] == "walk":
        walker = M.walker(row["floor"], row["footwear"], air)
        return moving(walker, seconds=row.get("steps", 40) / 2).peak
    if row["act"] == "roll":
        mover = M.roller(row.get("floor", "vinyl"), row["caster"], air, body="person_with_cart")
        return moving(mover, seconds=None).voltage
    if row["act"] == "wipe_plastic":
        return M.act_voltage("wipe_plastic", air)
    charge = M.act_charge(row["act"], air)
    body = M.capacitance(M.acts[row["act"]].body)
    limit = M.walking["corona_limit"].median
    return quick_act(charge, body, doubt=M.doubt(), corona_limit=limit).voltage


def percentile(row: dict) -> float:
    """Where a published voltage lies in the model, without the doubt about the model."""
    return 100 * (1 - charged(row).known(["model_doubt"]).probability_above(row["volts"]))


@pytest.mark.parametrize("row", PUBLISHED, ids=lambda row: row["id"])
def test_a_published_voltage_lies_at_the_percentile_that_fits_what_it_is(row):
    low, high = row["band"]
    assert (low <= percentile(row) <= high) == row["met"], f"at {percentile(row):.1f} %"


def walked(floor: str, footwear: str, rh: float, doubt: bool = True):
    """P(felt) at the end of a long walk; without doubt, of the model at its middle."""
    body = moving(M.walker(floor, footwear, Humidity(rh)), seconds=20)
    threshold = M.threshold("felt")
    if doubt:
        return perceived(body.charge, threshold)
    bare = body.charge.known(["model_doubt"]).over(threshold.known(["felt_threshold"]), "")
    return bare.chance_above(1.0)


# Dutch indoor-environment publication, chapters 1 and 3 (ordinal table; the figures put on its
# words are judgement): mostly not perceptible at 40-65 % RH, rarely with antistatic carpet at 30 %.
@pytest.mark.parametrize(("floor", "rh"), [("carpet_antistatic", 0.30), ("vinyl", 0.50)])
def test_shocks_are_rare_where_surveys_found_them_rare(floor, rh):
    assert walked(floor, "ordinary", rh).value <= 0.25


# Danish contract-carpet note: a floor rated 2 kV rarely gives shocks; P below 0.25 is judgement.
def test_a_floor_rated_two_kilovolts_rarely_gives_shocks():
    assert walked("carpet_antistatic", "ordinary", 0.25, doubt=False).value < 0.25


# Japanese survey of 5129 people (2010): about 1.3 felt shocks a day at some 25 touches of metal.
def test_a_charged_act_gives_a_felt_shock_more_often_than_a_random_touch():
    assert walked("unknown", "unknown", 0.45).value > 1.3 / 25


# Dutch rule, chapters 6-7: at most 1e10 ohm to earth keeps a walker below 2 kV.
def test_ten_gigaohms_to_earth_keep_most_walkers_below_two_kilovolts():
    walker = M.walker("carpet", "ordinary", Humidity(0.25))
    earthed = replace(walker, resistances=(Estimate.exact(1e10, "ohm"),))
    voltage = moving(earthed, seconds=None).peak.known(["model_doubt"])
    assert voltage.probability_above(2000) < 0.15


@pytest.mark.parametrize("floor", ["conductive", "dissipative"])
def test_earthing_shoes_on_an_earthing_floor_are_never_felt(floor):
    assert walked(floor, "esd", 0.20).high < 0.02


def test_one_insulating_layer_is_enough_to_make_static_possible():
    assert walked("conductive", "foam_clog", 0.20).high > 0.2
    assert walked("vinyl", "esd", 0.20).high > 0.2


def test_a_reading_of_a_surface_is_not_the_charge_of_a_body():
    # Japanese static-safety guide (1988): insulators give no shock below about 30 kV.
    spark = M.act_charge("wipe_plastic", Humidity(0.25))
    assert perceived(spark, M.threshold("felt")).value < 0.25
    assert M.act_voltage("wipe_plastic", Humidity(0.25)).median > 2000


@settings(max_examples=40, deadline=None)
@given(FLOORS, SHOES, st.floats(0.02, 0.94), st.floats(0.001, 0.05), st.floats(0, 0.08))
def test_damper_air_never_raises_the_middle_voltage(floor, footwear, rh, more, sd):
    dry = moving(M.walker(floor, footwear, Humidity(rh, sd)), seconds=None).voltage
    damp = moving(M.walker(floor, footwear, Humidity(rh + more, sd)), seconds=None).voltage
    assert damp.median <= dry.median * (1 + 1e-6)


@settings(max_examples=20, deadline=None)
@given(st.sampled_from(CASTERS), st.floats(0.02, 0.9))
def test_damper_air_never_raises_the_voltage_of_a_cart(caster, rh):
    dry, damp = (
        moving(M.roller("vinyl", caster, Humidity(x), body="cart"), seconds=30).voltage
        for x in (rh, rh + 0.05)
    )
    assert damp.median <= dry.median * (1 + 1e-6)


@pytest.mark.parametrize("act", [*M.acts])
def test_damper_air_never_raises_the_charge_of_an_act(act):
    charges = [M.act_charge(act, Humidity(rh / 100)).median for rh in range(0, 101, 5)]
    assert charges == sorted(charges, reverse=True)


def test_humidity_helps_less_between_synthetic_floor_and_soles():
    # Endo and Ohsawa, J. Occup. Safety and Health 11(2) 113-116 (2018).
    synthetic, other = (
        moving(M.walker("vinyl", shoe, Humidity(0.40)), seconds=None).voltage.median
        / moving(M.walker("vinyl", shoe, Humidity(0.20)), seconds=None).voltage.median
        for shoe in ("ordinary", "leather")
    )
    assert other < synthetic < 1
    assert synthetic == pytest.approx(0.8, abs=0.05)


def test_antistatic_garments_hardly_lower_the_charge():
    # Kimura and others 2018: almost all above 3 kV including antistatic ones.
    plain = M.act_charge("garment_off", Humidity(0.3), surface="synthetic").median
    assert M.act_charge("garment_off", Humidity(0.3), surface="antistatic").median > 0.7 * plain


# Talebzadeh and others 2016: ESD shoes and floor divide by 2 to 7 (chair), 2 to 5 (garment).
@pytest.mark.parametrize(("act", "low", "high"), [("rise", 2, 7), ("garment_off", 2, 5)])
def test_earthing_shoes_and_floor_divide_an_act_by_the_published_factor(act, low, high):
    plain, earthed = (M.act_charge(a, Humidity(0.3)).median for a in (act, f"{act}_earthing"))
    assert low <= plain / earthed <= high


# Duban 2003: seat materials differ 10 to 20 fold.
def test_an_antistatic_seat_divides_rising_by_the_published_factor():
    plain = M.act_charge("rise", Humidity(0.3)).median
    assert 10 <= plain / M.act_charge("rise", Humidity(0.3), surface="antistatic").median <= 20


@pytest.mark.parametrize("share", [0.0, 0.3])
@pytest.mark.parametrize("floor", ["antistatic", "vinyl", "unknown"])
def test_measuring_the_floor_never_raises_what_it_adds_to_the_variance(floor, share):
    def added(factor: float) -> float:
        walker = M.walker(floor, "leather", Humidity(0.3))
        ground, shoe = walker.resistances
        spread = {"floor_resistance": factor * ground.loadings["floor_resistance"]}
        measured = Estimate.lognormal(ground.median, spread, "ohm")
        voltage = moving(replace(walker, resistances=(measured, shoe)), seconds=None).voltage
        return voltage.contributions().get("floor_resistance", 0.0) * voltage.variance_log

    assert added(share) <= added(1.0) + 1e-9


def test_a_measured_system_resistance_replaces_floor_and_shoe():
    walker = M.walker("vinyl", "ordinary", Humidity(0.25))
    read = Estimate.lognormal(2e8, {"floor_resistance": 0.2}, "ohm")
    voltage = moving(replace(walker, resistances=(read,)), seconds=None).voltage
    assert "footwear_resistance" not in voltage.contributions()
    assert voltage.quantile(0.99) < 200


def test_thick_soles_lower_the_capacitance_unless_another_posture_is_named():
    clogs = M.walker("vinyl", "foam_clog", Humidity(0.3))
    assert clogs.capacitance.median == pytest.approx(75e-12)
    seated = M.walker("vinyl", "foam_clog", Humidity(0.3), body="seated")
    assert seated.capacitance.median == pytest.approx(250e-12)


def test_a_person_and_a_cart_do_not_share_the_doubt_about_their_capacitance():
    assert set(M.capacitance("cart").loadings) == {"object_capacitance"}
    assert set(M.capacitance("standing").loadings) == {"capacitance"}


def test_every_input_of_a_voltage_names_its_origin():
    voltage = moving(M.walker("vinyl", "ordinary", Humidity(0.3, 0.03)), seconds=20).voltage
    names = set(voltage.contributions()) - {"interaction"}
    assert names == set(voltage.basis)
    assert all(voltage.basis[name].citation for name in names - {"humidity"})


def test_every_number_of_the_tables_has_a_citation():
    found = M.citations()
    assert len(found) > 60
    assert {c.known for c in found.values()} <= {"published", "memory", "judgement"}


@pytest.mark.parametrize("table", ["floors", "footwear"])
def test_an_unknown_word_is_refused_with_the_words_there_are(table):
    with pytest.raises(InvalidValue, match="use one of .*unknown"):
        M.resistance(table, "gold leaf", Humidity(0.3))


def parsed() -> dict:
    """The shipped table as parsed, to be spoilt."""
    return yaml.safe_load((files("triage") / "data/materials.yaml").read_text("utf-8"))


@pytest.mark.parametrize(
    ("path", "value", "said"),
    [
        (("floors", "vinyl", "voltage", "cite"), "nobody", "nobody"),
        (("floors", "vinyl", "voltage", "median"), -5, "positive"),
        (("floors", "vinyl", "voltage", "gsd"), 0.5, "spread"),
        (("floors", "vinyl", "voltage", "tolerance"), 1, "tolerance"),
        (("floors", "vinyl", "colour"), "red", "colour"),
        (("acts", "rise", "body"), "statue", "statue"),
        (("acts", "rise", "response"), "odd", "odd"),
        (("citations", "spare"), {"source": "x", "known": "judgement"}, "spare"),
        (("citations", "rising", "known"), "rumour", "rumour"),
        (("humidity_response", "general", "per_pct"), [0.1, 0, 0], "falling"),
    ],
)
def test_a_table_that_contradicts_itself_is_refused(path, value, said):
    data = deepcopy(parsed())
    place = data
    for key in path[:-1]:
        place = place[key]
    place[path[-1]] = value
    with pytest.raises(BadTable, match=said):
        build(data)


def test_a_table_without_its_unknown_row_is_refused():
    data = parsed()
    del data["floors"]["unknown"]
    with pytest.raises(BadTable, match="floors has no row 'unknown'"):
        build(data)


def test_the_shipped_tables_hold_every_kind_of_row():
    assert all(getattr(M, table) for table in ROW_TABLES)

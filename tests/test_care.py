"""The person comes first: urgency by finding, never lowered, never advice to stay away."""

import pytest
from random_records import Tree, record

import triage.care
from triage.assessment import assess
from triage.care import URGENCY, Care, care_rows
from triage.errors import BadTable
from triage.site import no_site


def care(**parts: object) -> Care:
    tree: Tree = {"schema": "1", "id": "0" * 32} | parts
    return assess(record(tree), no_site()).care


def person(**answers: object) -> list[Tree]:
    return [{"id": "p1", "who": "staff"} | answers]


@pytest.mark.parametrize(("sign", "urgency"), [
    ("burn", "now"), ("could_not_let_go", "now"), ("lost_consciousness", "now"),
    ("chest_symptoms", "now"), ("palpitations", "now"), ("weakness", "now"),
    ("pinpoint_mark", "now"), ("thrown", "same_day"), ("fall", "same_day"), ("none", "route"),
])  # fmt: skip
def test_each_sign_has_its_urgency(sign, urgency):
    assert care(persons=person(signs=[sign])).urgency == urgency


@pytest.mark.parametrize(("sensation", "urgency"), [
    ("grip", "now"), ("heat", "now"), ("thrown", "same_day"), ("sustained_pain", "same_day"),
    ("snap", "route"),
])  # fmt: skip
def test_each_sensation_has_its_urgency(sensation, urgency):
    assert care(statements=[{"id": "s", "sensation": sensation}]).urgency == urgency


def test_a_breach_goes_the_blood_exposure_route_at_once():
    found = care(persons=person(breach="yes"))
    assert found.urgency == "now"
    assert any("exposure" in row.action.lower() for row in found.rows)


def test_a_patient_or_a_heart_conductor_is_told_to_the_team_now():
    assert care(persons=[{"id": "p", "who": "patient"}]).urgency == "now"
    assert care(scene={"heart_conductor": "yes"}).urgency == "now"


@pytest.mark.parametrize("contact", [
    {"body_part": "both_hands"}, {"also_touching": "earthed_metal"}, {"moisture": "wet"},
])  # fmt: skip
def test_a_path_across_the_chest_or_wet_skin_at_the_mains_is_seen_the_same_day(contact):
    items = [{"id": "i", "kind": "device_mains"}]
    found = care(items=items, contacts=[{"id": "c", "items": ["i"]} | contact])
    assert found.urgency == "same_day"


@pytest.mark.parametrize("contact", [
    {}, {"body_part": "fingertip"}, {"also_touching": "nothing"}, {"moisture": "dry"},
])  # fmt: skip
def test_one_dry_finger_at_the_mains_goes_the_ordinary_route(contact):
    items = [{"id": "i", "kind": "device_mains"}]
    found = care(items=items, contacts=[{"id": "c", "items": ["i"]} | contact])
    assert found.urgency == "route"


@pytest.mark.parametrize("contact", [
    {"body_part": "both_hands"}, {"also_touching": "earthed_metal"}, {"moisture": "wet"},
])  # fmt: skip
def test_the_same_path_at_a_thing_without_supply_goes_the_ordinary_route(contact):
    items = [{"id": "i", "kind": "furniture_fixed", "power": "none"}]
    found = care(items=items, contacts=[{"id": "c", "items": ["i"]} | contact])
    assert found.urgency == "route"


def test_two_things_touched_at_once_are_a_path_across_the_chest():
    items = [{"id": "i", "kind": "device_mains"}, {"id": "j", "kind": "stand"}]
    assert care(items=items, contacts=[{"id": "c", "items": ["i", "j"]}]).urgency == "same_day"


def test_a_patient_touched_at_that_moment_is_told_to_the_team_now():
    found = care(contacts=[{"id": "c", "also_touching": "patient"}])
    assert found.urgency == "now"
    assert "patient_affected" in {row.when for row in found.rows}


def test_a_row_for_nothing_found_is_dropped_as_soon_as_something_was():
    assert "none" not in {row.when for row in care(persons=person(signs=["fall"])).rows}


def test_where_published_advice_differs_a_row_names_its_sources():
    assert any(row.sources for row in care_rows())
    assert all(isinstance(source, str) for row in care_rows() for source in row.sources)


@pytest.mark.parametrize("spoil", [{"urgency": "later"}, {"when": "fall"}])
def test_a_table_with_an_unknown_urgency_or_without_a_row_for_nothing_is_refused(
    spoil, monkeypatch
):
    row = {"id": "x", "when": "none", "action": "Offer a review.", "urgency": "route",
           "citation": {"source": "s", "place": "", "known": "judgement"}}  # fmt: skip
    for good in (True, False):
        monkeypatch.setattr(
            triage.care, "table", lambda _, g=good: {"care": [row if g else row | spoil]}
        )
        if good:
            assert [r.when for r in care_rows.__wrapped__()] == ["none"]
            continue
        with pytest.raises(BadTable):
            care_rows.__wrapped__()


def test_over_1000_volts_is_now():
    assert care(supply={"voltage": "1000 V"}).urgency == "now"
    assert care(supply={"voltage": "690 V"}).urgency == "route"


def test_everybody_is_offered_a_review_and_asked_to_report_again():
    words = {row.when for row in care().rows}
    assert {"none", "always"} <= words


def test_the_most_urgent_row_leads_and_nothing_milder_is_dropped():
    rows = care(persons=person(signs=["burn", "fall"])).rows
    order = [URGENCY.index(row.urgency) for row in rows]
    assert order == sorted(order, reverse=True)
    assert {"burn", "fall"} <= {row.when for row in rows}


def test_no_row_advises_anybody_to_stay_away_from_a_clinician():
    for row in care_rows():
        text = row.action.lower()
        for phrase in ("no need", "not necessary", "need not", "unless symptoms", "harmless"):
            assert phrase not in text


@pytest.mark.parametrize(
    ("near", "shown"), [("oxygen", True), ("wet_alcohol", True), ("none", False)]
)
def test_a_spark_near_vapour_or_oxygen_is_shown_as_an_ignition_matter(near, shown):
    assert care(scene={"flammable": [near]}).ignition is shown

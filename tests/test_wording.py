"""Words for conclusions: orders behind their condition, no probability as certain, names not ids."""

import dataclasses
import random

import pytest
import random_records
from printed_texts import NAMES, drawn, example
from wording_rules import power_off_imperatives

from triage.assessment import assess
from triage.disposition import Level
from triage.documents.wording import (
    CONDITION,
    condition,
    item_name,
    item_order,
    likelihood,
    order,
    percent,
    percent_range,
    room_line,
    room_name,
    spoken,
)
from triage.sensitivity import Range
from triage.site import no_site


@pytest.mark.parametrize("p", [0, 1e-9, 0.004, 0.0099, 0.01, 0.094, 0.095, 0.5, 0.949, 0.951, 1.0])
def test_a_percentage_has_one_figure_and_is_never_none_or_all(p: float) -> None:
    shown = percent(p).replace("\u00a0", " ")

    assert shown in ("under 1 %", "over 95 %") or shown.split()[0].rstrip("0") in set("123456789")
    assert shown not in ("0 %", "100 %")


def test_percentages_and_words_never_fall_as_the_probability_rises() -> None:
    steps = [n / 1000 for n in range(1001)]
    order_of_words = list(dict.fromkeys(likelihood(p) for p in steps))
    shown = list(dict.fromkeys(percent(p) for p in steps))

    assert order_of_words == ["very unlikely", "unlikely", "possible", "about even", "probable",
                              "very probable"]  # fmt: skip
    figures = [int(each.split("\u00a0")[0]) for each in shown[1:-1]]
    assert figures == sorted(figures) and len(figures) == len(set(figures))


def test_a_range_with_equal_ends_is_one_figure() -> None:
    assert percent_range(Range(0.001, 0.002, 0.003)) == "under\u00a01\u00a0%"
    assert percent_range(Range(0.1, 0.2, 0.3)) == "10\u00a0% to 30\u00a0%"


@pytest.mark.parametrize("level", list(Level))
@pytest.mark.parametrize("dependence", ["procedure", "life_support", None])
def test_with_dependence_no_order_opens_with_its_verb(level: Level, dependence: str | None) -> None:
    for seed in range(30):
        incident = drawn(seed).incident
        scene = dataclasses.replace(incident.scene, dependence=dependence)
        given = dataclasses.replace(incident, scene=scene)
        for item in (None, *given.items):
            said = order(level, item, given)
            assert power_off_imperatives(said) == []
            assert level == Level.STATIC_CONTROLS or said.startswith("After that: ")
        assert condition(given) == CONDITION


def test_without_dependence_the_order_is_direct_and_has_no_condition() -> None:
    incident = example("ward5-static-story-failed-earth").incident

    assert incident.scene.dependence == "none" and condition(incident) == ""
    assert order(Level.ISOLATE, None, incident).startswith("Isolate the circuit")


@pytest.mark.parametrize("owner", ["hire", "loan", "trial", "patient", "staff", "contractor"])
def test_what_belongs_to_others_is_not_handed_back_before_release(owner: str) -> None:
    tree = random_records.clean_tree(random.Random(1), "device")
    tree["items"][0] |= {"owner": owner, "condition": ["damaged"]}
    a = assess(random_records.record(tree), no_site())
    said = item_order(next(i for i in a.items if i.item == "pump"), a.incident)

    assert "Not returned to " in said and "told in writing" in said


def test_fixed_things_are_barred_where_they_stand_and_never_carried_off() -> None:
    a = example("clinic-drawer-burr")

    (said,) = {item_order(each, a.incident) for each in a.items if each.item == "drawer"}
    assert said.startswith("Bar it from use where it stands")


@pytest.mark.parametrize("name", NAMES)
def test_a_room_is_told_with_the_names_of_its_items_and_never_cut_off_without_need(
    name: str,
) -> None:
    a = example(name)
    said = room_line(a)

    assert said.startswith("Room: ")
    assert not any(f"{i.id} is part of it" in said for i in a.incident.items if i.name)
    if a.room.level < Level.ISOLATE:
        assert "solate the circuit" not in said


def test_a_room_goes_by_its_name_in_record_or_site_file() -> None:
    assert room_name(example("clinic-sparse-report")) == "Eye clinic, examination room 2"
    assert room_name(example("or6-quiet-monitor-bare-line")) == "Operating room 6"
    assert room_name(drawn(1)) == "place not known"


def test_an_item_without_a_name_goes_by_its_kind_and_an_unknown_one_by_its_id() -> None:
    incident = drawn(3).incident

    for item in incident.items:
        assert item_name(incident, item.id).endswith(f"({item.id})")
    assert item_name(incident, "nothing") == "nothing"
    assert item_name(incident, "") == "the room"


def test_words_of_the_tables_lose_their_underscores() -> None:
    assert spoken("what was touched: mains_device_on") == "what was touched: mains device on"

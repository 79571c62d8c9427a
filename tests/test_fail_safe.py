"""The fail-safe argument: flags dominate priors, worthless passes count for nothing, the gate stays shut.

Thousands of seeded random records; each property is also shown to notice a program broken on purpose.
The order of answers stands in test_order_of_answers.py, what must change nothing in
test_neutral_things.py.
"""

import copy
import random
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest
from fail_safe_support import (
    judged,
    lowered,
    only,
    site,
    standing,
    talked_down,
    trees,
    wrongly_open,
)
from random_records import FAILING, PASSING, STATIC_STORIES, Tree, clean_tree, passing_check, record
from wording_rules import power_off_imperatives

import triage.assessment
import triage.validity
from triage.assessment import assess
from triage.check_table import check_kinds
from triage.disposition import Level
from triage.involvement import required_checks
from triage.knowledge import knowledge
from triage.site import from_plain
from triage.strict_yaml import Plain
from triage.tables import table as load_table

# a red flag dominates every prior


@pytest.mark.parametrize("cause", ["person_walking", "charged_object", "none_of_these"])
def test_no_prior_talks_a_red_flag_down(cause, monkeypatch):
    monkeypatch.setattr(triage.assessment, "prior", only(cause))
    stood = 0
    for _, tree in trees(40, 150):
        a = judged(tree)
        stood += sum(len(flag.open_items) for flag in a.flags)
        assert not talked_down(a)
    assert stood > 150


@pytest.mark.parametrize("cause", ["person_walking", "live_cord"])
def test_flags_and_their_floors_do_not_depend_on_the_prior(cause, monkeypatch):
    cases = [tree for _, tree in trees(41, 80)]
    plain = [judged(tree).flags for tree in cases]
    monkeypatch.setattr(triage.assessment, "prior", only(cause))
    assert [judged(tree).flags for tree in cases] == plain


def test_a_site_that_raises_mains_causes_never_lowers_anything():
    raised = [{"cause": c, "times": "20"} for c in knowledge().family("mains")]
    careful = from_plain(Plain("site", {"schema": "1", "policy": {"raised": raised}}))
    for _, tree in trees(42, 80):
        found = record(tree)
        assert not lowered(standing(assess(found, site())), standing(assess(found, careful)))


# passes that do not count


def _as_left(tree: Tree, kind: str) -> Tree:
    return passing_check("x", kind, tree["items"][0]) | {"stage": "as_left"}


def _elsewhere(tree: Tree, kind: str) -> Tree:
    tree["items"].append({"id": "elsewhere", "kind": "device_mains", "supply": "earthed"})
    return passing_check("x", kind, tree["items"][-1])


def _other_cord(tree: Tree, kind: str) -> Tree:
    return passing_check("x", kind, tree["items"][0]) | {"same_cord": "no"}


def _wrong_supply(tree: Tree, kind: str) -> Tree:
    check = passing_check("x", kind, tree["items"][0])
    method, supply = PASSING[kind][:2]
    return check | {"method": method, "supply": "earthed" if supply == "isolated" else "isolated"}


def _out_of_calibration(tree: Tree, kind: str) -> Tree:
    return passing_check("x", kind, tree["items"][0]) | {"calibration_due": "2024-06-30"}


def _cleaned_first(tree: Tree, kind: str) -> Tree:
    return passing_check("x", kind, tree["items"][0]) | {"disturbed": ["cleaned"]}


LOGS = frozenset(k for k in PASSING if PASSING[k][0] in ("log_exported", "records_exported"))
NO_INSTRUMENT = LOGS | {"visual_inspection", "instrument_insulation"}
ON_ONE_SUPPLY = frozenset(k for k in PASSING if PASSING[k][1] is not None)
WORTHLESS = {
    "as left": (_as_left, frozenset(PASSING)),
    "on another item": (_elsewhere, frozenset(PASSING) - LOGS),
    "with another cord": (_other_cord, frozenset(PASSING)),
    "from the wrong supply": (_wrong_supply, ON_ONE_SUPPLY - {"monitor_log"}),
    "out of calibration": (_out_of_calibration, frozenset(PASSING) - NO_INSTRUMENT),
    "after cleaning": (_cleaned_first, frozenset(PASSING)),
}


@pytest.mark.parametrize("why", WORTHLESS)
def test_a_pass_that_does_not_count_changes_no_level_no_gate_and_no_ranking(why):
    spoiled, kinds = WORTHLESS[why]
    tried = 0
    for rng, tree in trees(50, 120):
        if not tree["items"] or not any(c.get("items") for c in tree["contacts"]):
            continue
        rng.shuffle(checks := list(tree["checks"]))
        tree["checks"] = checks[: rng.choice((len(checks), max(len(checks) - 2, 0)))]
        before = judged(tree)
        worthless = copy.deepcopy(tree)
        worthless["checks"] = [*tree["checks"], spoiled(worthless, rng.choice(sorted(kinds)))]
        after = judged(worthless)
        tried += 1
        assert after.posterior.probability == before.posterior.probability
        assert (after.gate.open, after.gate.upper) == (before.gate.open, before.gate.upper)
        assert not lowered(standing(before), standing(after))
    assert tried > 80


@pytest.mark.parametrize("why", WORTHLESS)
@pytest.mark.parametrize("story", STATIC_STORIES)
def test_a_pass_that_does_not_count_never_stands_in_for_a_mandatory_one(story, why):
    spoiled, kinds = WORTHLESS[why]
    tree = clean_tree(random.Random(4), story)
    for kind in sorted({check["kind"] for check in tree["checks"]} & kinds):
        found = copy.deepcopy(tree)
        found["checks"] = [check for check in found["checks"] if check["kind"] != kind]
        found["checks"].append(spoiled(found, kind))
        a = judged(found)
        assert not a.gate.open, kind
        assert a.headline >= Level.HOLD, kind


def test_the_property_of_worthless_passes_notices_a_program_that_counts_them(monkeypatch):
    monkeypatch.setattr(triage.validity, "_away_from_event", lambda *_: iter(()))
    tree = clean_tree(random.Random(5), "device", measured=True)
    dropped = tree["checks"].pop(0)
    tree["checks"].append(dropped | {"same_cord": "no"})
    assert judged(tree).gate.open


# nobody is told to cut power without a condition


def test_a_bare_order_to_cut_power_is_found_and_a_conditional_one_is_not():
    bare = ["Isolate the outlet.", "Keep clear, then unplug it.", "Photograph it; switch it off.",
            "Pull the plug and wait.", "Look first. Withdraw the pump."]  # fmt: skip
    assert all(power_off_imperatives(each) for each in bare)
    fine = ["After the clinician in charge agrees, unplug it.", "Nobody unplugs anything.",
            "If nobody depends on it, isolate the outlet.", "Do not switch it off.",
            "Something was plugged or unplugged.", "Withdraw-level items are listed."]  # fmt: skip
    assert not any(power_off_imperatives(each) for each in fine)


def texts_of(value: Any) -> Iterator[str]:
    if isinstance(value, str):
        yield value
    elif isinstance(value, dict):
        for each in value.values():
            yield from texts_of(each)
    elif isinstance(value, list):
        for each in value:
            yield from texts_of(each)


DATA = sorted((Path(triage.assessment.__file__).parent / "data").glob("*.yaml"))


@pytest.mark.parametrize("path", DATA, ids=lambda p: p.stem)
def test_no_table_bids_anybody_to_cut_power_without_a_condition(path):
    texts = list(texts_of(load_table(path.stem)))
    assert texts
    sentences = [text for text in texts if " " in text]  # one word alone is the id of a floor
    assert [b for text in sentences for b in power_off_imperatives(text)] == []


# the gate


def deciding_changes(tree: Tree) -> Iterator[tuple[str, Tree]]:
    """The clean record with one deciding answer, closing answer or check taken away."""
    paths = {
        "sensation": ("statements", 0), "timing": ("statements", 0),
        "repeat_at_once": ("statements", 0), "others_felt": ("statements", 0),
        "moisture": ("contacts", 0), "also_touching": ("contacts", 0), "items": ("contacts", 0),
        "kind": ("items", 0), "floor": ("surroundings",), "humidity": ("surroundings",),
        "electrosurgery_active": ("event",), "pulse_delivered": ("event",),
        "line_event": ("event",), "pins_touched": ("event",),
    }  # fmt: skip
    for name, path in paths.items():
        found = copy.deepcopy(tree)
        part: Any = found
        for step in path:
            part = part[step]
        part[name] = "unknown"
        yield f"{name} unknown", found
    alone = copy.deepcopy(tree)
    alone["contacts"] = []
    yield "no contact", alone
    for kind in sorted({check["kind"] for check in tree["checks"]}):
        rest = [check for check in tree["checks"] if check["kind"] != kind]
        yield f"without {kind}", tree | {"checks": rest}
        for spoilt in ({"method": "unknown"}, {"result": "not_practicable", "value": "unknown"},
                       {"stage": "unknown"}, {"at": "2026-01-13 09:00"}):  # fmt: skip
            mine = [check | spoilt for check in tree["checks"] if check["kind"] == kind]
            yield f"{kind} {spoilt}", tree | {"checks": rest + mine}


@pytest.mark.parametrize("story", STATIC_STORIES)
def test_the_gate_stays_shut_with_any_deciding_answer_or_check_missing(story):
    tree = clean_tree(random.Random(7), story)
    assert judged(tree).gate.open
    for what, changed in deciding_changes(tree):
        a = judged(changed)
        assert not a.gate.open, what
        assert a.headline >= Level.HOLD, what


def test_the_gate_stays_shut_without_a_known_supply_floor_shoes_or_alarm():
    tree = clean_tree(random.Random(8), "isolated_device")
    for part, name in (("supply", "kind"), ("supply", "alarm"), ("surroundings", "footwear")):
        changed = copy.deepcopy(tree)
        changed[part].pop(name)
        assert not judged(changed).gate.open, name


def test_the_gate_never_opens_beside_a_standing_flag_a_defect_or_a_missing_check():
    opened = 0
    for chunk in (80, 81, 82):
        for _, tree in trees(chunk):
            a = judged(tree)
            opened += a.gate.open
            assert not wrongly_open(a)
    assert opened > 20


def test_a_linked_item_that_cannot_be_released_stays_on_hold():
    tree = clean_tree(random.Random(9), "plate")
    tree["items"].append({"id": "thing", "kind": "other"})
    tree["items"][0]["circuit"] = "thing"
    levels = {each.item: each.level for each in judged(tree).items}
    assert levels["thing"] == Level.HOLD


def test_a_fail_as_left_is_a_defect_and_shuts_the_gate():
    tree = clean_tree(random.Random(10), "device")
    left = passing_check("x", "earth_continuity", tree["items"][0])
    tree["checks"].append(left | {"stage": "as_left", "value": "9 ohm"})
    a = judged(tree)
    assert not a.gate.open
    assert {d.check for d in a.evidence.defects} == {"earth_continuity"}
    assert max(i.level for i in a.items if i.item == "pump") == Level.WITHDRAW


def test_a_clean_log_never_takes_an_adverse_answer_off_the_record():
    tree = clean_tree(random.Random(11), "isolated_device")
    tree["supply"]["alarm"] = "yes"
    tree["checks"].append(passing_check("x", "monitor_log", tree["items"][0]))
    a = judged(tree)
    assert [f.flag.id for f in a.flags] == ["monitor_alarm"]
    assert a.headline == Level.ISOLATE


def test_an_alarm_on_a_supply_said_to_be_earthed_still_counts():
    tree = clean_tree(random.Random(12), "device")
    tree["supply"]["alarm"] = "yes"
    assert judged(tree).headline == Level.ISOLATE


def test_a_check_called_not_practicable_cannot_hide_a_reading_that_fails():
    tree = clean_tree(random.Random(13), "device")
    tree["checks"].append(
        passing_check("x", "touch_current", tree["items"][0])
        | {"value": FAILING["touch_current"], "result": "not_practicable"}
    )
    assert {d.check for d in judged(tree).evidence.defects} == {"touch_current"}


def test_a_doubt_about_a_high_monitor_reading_never_speaks_for_static():
    tree = clean_tree(random.Random(14), "isolated_device")
    tree["supply"] |= {"current_reading": "5 mA", "read_at": "2026-01-14 10:40"}
    factors = []
    for answer in ("no", "unknown", "yes"):
        tree["supply"]["changed_since"] = answer
        factors.append(judged(tree).exposure.causes["isolated_first_fault"].factor)
    assert factors == sorted(factors)
    assert factors[0] > 1


def test_a_touch_current_with_the_earth_closed_says_nothing_about_an_open_earth():
    tree = clean_tree(random.Random(15), "device")
    check = next(c for c in tree["checks"] if c["kind"] == "touch_current")
    closed = judged(tree).exposure.causes["open_earth"].factor
    tree["checks"].remove(check)
    assert judged(tree).exposure.causes["open_earth"].factor == closed
    tree["checks"].append(check | {"state": ["on", "wet", "earth_open"]})
    assert judged(tree).exposure.causes["open_earth"].factor < closed


def test_required_checks_never_shorten_when_the_supply_or_the_contact_is_not_known():
    for _, tree in trees(90, 100):
        incident = record(tree).incident
        for item in incident.items:
            if item.supply is not None:
                continue
            every = set(required_checks(incident, item, None))
            assert every >= set(required_checks(incident, item, "earthed"))
            assert every >= set(required_checks(incident, item, "isolated"))


def test_every_mandatory_check_has_a_passing_example_here():
    mandatory = {check for row in load_table("checks")["mandatory"] for check in row["checks"]}
    assert mandatory <= set(PASSING)
    assert set(PASSING) <= set(check_kinds())

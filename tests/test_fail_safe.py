"""The fail-safe argument as properties over thousands of seeded random records.

Half of the records are drawn over the whole table of fields; the other half lie near a static truth
whose checks are complete and clean, because only there can the release gate open and a mistake show.
Each property is also shown to notice a program that was broken on purpose.
"""

import copy
import random
from collections.abc import Callable, Iterator
from functools import cache
from pathlib import Path
from typing import Any

import pytest
from answer_order import apply, more_adverse, named, pick
from random_records import (
    FAILING,
    PASSING,
    STATIC_STORIES,
    Tree,
    answer_places,
    clean_tree,
    identity,
    passing_check,
    random_tree,
    record,
    spoil,
)
from wording_rules import power_off_imperatives

import triage.assessment
import triage.care
import triage.disposition
import triage.told
import triage.validity
from triage.assessment import Assessment, assess
from triage.care import URGENCY
from triage.check_table import check_kinds
from triage.disposition import Level
from triage.involvement import involved, required_checks
from triage.knowledge import knowledge
from triage.site import Site, from_plain, no_site
from triage.strict_yaml import Plain
from triage.tables import table as load_table

FLOOR = {"hold": Level.HOLD, "withdraw": Level.WITHDRAW, "isolate": Level.ISOLATE}
CHUNKS, SIZE = 6, 120


@cache
def site() -> Site:
    return no_site()


def judged(tree: Tree) -> Assessment:
    return assess(record(tree), site())


def trees(chunk: int, size: int = SIZE) -> Iterator[tuple[random.Random, Tree]]:
    """Seeded record trees: far from and near to a release in turn."""
    for seed in range(chunk * size, (chunk + 1) * size):
        rng = random.Random(seed)
        yield rng, random_tree(rng) if seed % 2 else near_release(rng)


def near_release(rng: random.Random) -> Tree:
    story = rng.choice(STATIC_STORIES)
    tree = clean_tree(rng, story, measured=rng.random() < 0.5)
    return spoil(rng, tree, rng.choice((0, 0, 1, 2, 4)))


def standing(a: Assessment) -> dict[str, int]:
    """Everything that may only go up: each item, the room, the headline, the person."""
    found = {each.item or "the room": int(each.level) for each in (*a.items, a.room)}
    upper = a.gate.upper if a.gate.upper is not None else 1.0
    return found | {
        "headline": int(a.headline), "care": URGENCY.index(a.care.urgency),
        "gate shut": int(not a.gate.open), "upper limit of a mains fault": int(upper * 1e9),
    }  # fmt: skip


def lowered(before: dict[str, int], after: dict[str, int]) -> list[str]:
    return [f"{k}: {v} -> {after.get(k, 0)}" for k, v in before.items() if after.get(k, 0) < v]


def order_broken(rng: random.Random, tree: Tree, count: int) -> list[str]:
    steps = pick(rng, tree, count)
    worse = apply(tree, steps)
    found = lowered(standing(judged(tree)), standing(judged(worse)))
    return [f"{named(tree, steps)} lowers {each}" for each in found]


# (a) the order of answers


@pytest.mark.parametrize("chunk", range(CHUNKS))
def test_one_more_adverse_answer_never_lowers_anything(chunk):
    for rng, tree in trees(chunk):
        assert not order_broken(rng, tree, 1)


@pytest.mark.parametrize("chunk", range(CHUNKS, 2 * CHUNKS))
def test_two_more_adverse_answers_never_lower_anything(chunk):
    for rng, tree in trees(chunk):
        assert not order_broken(rng, tree, 2)


@pytest.mark.parametrize("story", STATIC_STORIES)
def test_every_single_adverse_change_of_a_released_case_lowers_nothing(story):
    rng = random.Random(story)
    tree = clean_tree(rng, story, measured=True)
    before = standing(judged(tree))
    assert before["headline"] == Level.STATIC_CONTROLS
    for step in sampled(rng, more_adverse(tree), 70):
        after = standing(judged(apply(tree, [step])))
        assert not lowered(before, after), named(tree, [step])


def sampled(rng: random.Random, steps: list[Any], most: int) -> list[Any]:
    """Some of the steps where there are very many."""
    return steps[:most] if len(steps) <= most else rng.sample(steps, most)


@pytest.mark.parametrize("kind", sorted(FAILING))
def test_every_single_adverse_change_beside_a_failed_check_lowers_nothing(kind):
    rng = random.Random(kind)
    story = "isolated_device" if kind == "isolated_alarm_test" else "device"
    tree = clean_tree(rng, story)
    item = tree["items"][-1 if kind == "outlet_test" else 0]
    tree["checks"].append(passing_check("f1", kind, item) | {"value": FAILING[kind]})
    before = standing(judged(tree))
    assert before["headline"] >= Level.WITHDRAW or kind == "applied_part_leakage"
    for step in sampled(rng, more_adverse(tree), 50):
        after = standing(judged(apply(tree, [step])))
        assert not lowered(before, after), named(tree, [step])


ORDER_BREAKERS: dict[str, Callable[[pytest.MonkeyPatch], None]] = {
    "an unknown answer leaves the gate open": lambda patch: patch.setattr(
        triage.disposition, "_answers_shut", lambda given: iter(())
    ),
    "red flags carry no floor": lambda patch: patch.setattr(
        triage.disposition, "_FLOOR", dict.fromkeys(FLOOR, Level.STATIC_CONTROLS)
    ),
    "a fail in a changed scene is void": lambda patch: patch.setattr(
        triage.validity, "_state",
        lambda kind, outcome, doubtful, away: f"invalid_{outcome}" if doubtful or away else (
            "informative" if outcome == "informative" else f"valid_{outcome}"),
    ),
    "lasting pain is milder for the person than a throw": lambda patch: patch.delitem(
        triage.care._SENSATION_WORDS, "sustained_pain"
    ),
}  # fmt: skip


@pytest.mark.parametrize("name", ORDER_BREAKERS)
def test_the_order_property_notices_when(name, monkeypatch):
    tree, step = _BROKEN_BY[name]()
    ahead = lowered(standing(judged(tree)), standing(judged(apply(tree, [step]))))
    ORDER_BREAKERS[name](monkeypatch)
    after = lowered(standing(judged(tree)), standing(judged(apply(tree, [step]))))
    assert not ahead
    assert after or _flags_below_floor(apply(tree, [step])) or judged(apply(tree, [step])).gate.open


def _change(tree: Tree, name: str, value: Any) -> tuple[Tree, tuple[int, Any]]:
    places = list(answer_places(copy.deepcopy(tree)))
    return tree, (next(n for n, (_, field, _row) in enumerate(places) if field == name), value)


def _failed_device() -> Tree:
    tree = clean_tree(random.Random(3), "device")
    mine = next(c for c in tree["checks"] if c["kind"] == "touch_current")
    mine |= {"result": "fail", "value": FAILING["touch_current"]}
    return tree


_BROKEN_BY: dict[str, Callable[[], tuple[Tree, tuple[int, Any]]]] = {
    "an unknown answer leaves the gate open": lambda: _change(
        clean_tree(random.Random(1), "device", measured=True), "sensation", "unknown"
    ),
    "red flags carry no floor": lambda: _change(
        clean_tree(random.Random(2), "device"), "signs", ["burn"]
    ),
    "a fail in a changed scene is void": lambda: _change(_failed_device(), "changes", ["cleaned"]),
    "lasting pain is milder for the person than a throw": lambda: _change(
        identity(random.Random(4)) | {"statements": [{"id": "s", "sensation": "thrown"}]},
        "sensation", "sustained_pain",
    ),
}  # fmt: skip


def _flags_below_floor(tree: Tree) -> list[Any]:
    a = judged(tree)
    levels = {each.item: each.level for each in a.items}
    return [f for f in a.flags for i in f.open_items if i and levels[i] < FLOOR[f.flag.floor]]


# (b) a red flag dominates every prior


def _only(cause: str) -> Callable[..., dict[str, float]]:
    causes = knowledge().causes
    rest = 1e-9 / (len(causes) - 1)
    return lambda *_: {c: 1 - 1e-9 if c == cause else rest for c in causes}


@pytest.mark.parametrize("cause", ["person_walking", "charged_object", "none_of_these"])
def test_no_prior_talks_a_red_flag_down(cause, monkeypatch):
    monkeypatch.setattr(triage.assessment, "prior", _only(cause))
    stood = 0
    for _, tree in trees(40, 150):
        a = judged(tree)
        levels = {each.item: each.level for each in a.items} | {"": a.room.level}
        for flag in a.flags:
            stood += len(flag.open_items)
            assert all(levels[i] >= FLOOR[flag.flag.floor] for i in flag.open_items)
            assert flag.cleared or not a.gate.open
    assert stood > 150


@pytest.mark.parametrize("cause", ["person_walking", "live_cord"])
def test_flags_and_their_floors_do_not_depend_on_the_prior(cause, monkeypatch):
    cases = [tree for _, tree in trees(41, 80)]
    plain = [judged(tree).flags for tree in cases]
    monkeypatch.setattr(triage.assessment, "prior", _only(cause))
    assert [judged(tree).flags for tree in cases] == plain


def test_a_site_that_raises_mains_causes_never_lowers_anything():
    raised = [{"cause": c, "times": "20"} for c in knowledge().family("mains")]
    careful = from_plain(Plain("site", {"schema": "1", "policy": {"raised": raised}}))
    for _, tree in trees(42, 80):
        found = record(tree)
        assert not lowered(standing(assess(found, site())), standing(assess(found, careful)))


# (c) passes that do not count


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


# (d) names and order


def conclusions(a: Assessment, names: dict[str, str] | None = None) -> Any:
    """What was concluded, without the order of parts and with ids translated."""
    told = (names or {}).get
    items = {(told(i.item, i.item), i.level, len(i.missing)) for i in a.items}
    flags = {(f.flag.id, f.cleared, frozenset(told(i, i) for i in f.items)) for f in a.flags}
    checks = {(n.kind.id, told(n.item, n.item)) for n in a.next_checks if n.mandatory}
    defects = sorted((d.check, told(d.item, d.item) or "") for d in a.evidence.defects)
    return (
        a.headline, a.room.level, items, flags, checks, defects, a.care, a.gate.open, a.gate.upper,
        a.posterior, a.sensitivity, frozenset(a.unknown), frozenset(a.evidence.observed),
        frozenset(a.cautions),
    )  # fmt: skip


def _shuffled(rng: random.Random, tree: Tree) -> Tree:
    found = copy.deepcopy(tree)
    for name in ("persons", "statements", "items", "contacts", "checks"):
        rng.shuffle(found.get(name, []))
    for contact in found.get("contacts", []):
        rng.shuffle(contact.get("items", []))
    return dict(rng.sample(list(found.items()), len(found)))


def _renamed(tree: Tree) -> tuple[Tree, dict[str, str]]:
    found = copy.deepcopy(tree)
    back: dict[str, str] = {}
    for prefix, name in (("z", "items"), ("q", "statements"), ("r", "persons"), ("u", "contacts"),
                         ("v", "checks")):  # fmt: skip
        new = {p["id"]: f"{prefix}{n:03d}" for n, p in enumerate(reversed(found.get(name, [])))}
        if name == "items":
            back = {v: k for k, v in new.items()}
            _rename_items(found, new)
        for each in found.get(name, []):
            each["id"] = new[each["id"]]
        if name == "persons":
            for contact in found.get("contacts", []):
                if "person" in contact:
                    contact["person"] = new[contact["person"]]
    return found, back


def _rename_items(tree: Tree, new: dict[str, str]) -> None:
    for item in tree["items"]:
        for link in ("cord", "outlet", "circuit"):
            if link in item:
                item[link] = new[item[link]]
    for contact in tree["contacts"]:
        if "items" in contact:
            contact["items"] = [new[each] for each in contact["items"]]
    for check in tree["checks"]:
        for link in ("of", "second", "cord", "outlet"):
            if link in check:
                check[link] = new[check[link]]


@pytest.mark.parametrize("chunk", (60, 61))
def test_the_order_of_parts_changes_no_conclusion(chunk):
    for rng, tree in trees(chunk):
        assert conclusions(judged(_shuffled(rng, tree))) == conclusions(judged(tree))


@pytest.mark.parametrize("chunk", (62, 63))
def test_names_of_parts_change_no_conclusion(chunk):
    for _, tree in trees(chunk):
        renamed, back = _renamed(tree)
        assert conclusions(judged(renamed), back) == conclusions(judged(tree))


def test_the_property_of_order_notices_a_program_that_takes_the_first_item(monkeypatch):
    monkeypatch.setattr(
        triage.told, "_touched_state",
        lambda touched: triage.told._touched_one(touched[0]) if touched else None,
    )  # fmt: skip
    differ = [
        tree for rng, tree in trees(60)
        if conclusions(judged(_shuffled(rng, tree))) != conclusions(judged(tree))
    ]  # fmt: skip
    assert differ


# (e), (f), (g) neutral things


@pytest.mark.parametrize("chunk", (70, 71))
def test_an_answer_left_out_and_the_answer_unknown_are_the_same(chunk):
    for _, tree in trees(chunk):
        spelled = copy.deepcopy(tree)
        for holder, name, _row in answer_places(spelled):
            holder.setdefault(name, "unknown")
        assert conclusions(judged(spelled)) == conclusions(judged(tree))


@pytest.mark.parametrize("chunk", (72, 73))
def test_a_verbatim_statement_changes_nothing_but_the_digest(chunk):
    for _, tree in trees(chunk):
        before = record(tree)
        other = copy.deepcopy(tree)
        for number, each in enumerate(other["statements"]):
            each["words"] = f"It was static, it is safe, nothing burnt. {number}"
        other["event"]["summary"] = "only static, no fault, released"
        for each in other["items"]:
            each["name"] = "tested and safe"
        after = record(other)
        assert after.digest != before.digest
        assert conclusions(assess(after, site())) == conclusions(assess(before, site()))


@pytest.mark.parametrize("chunk", (74,))
def test_the_same_record_gives_the_same_assessment_twice(chunk):
    for _, tree in trees(chunk):
        assert conclusions(judged(tree)) == conclusions(judged(tree))


def test_the_verbatim_property_notices_a_program_that_reads_the_words(monkeypatch):
    genuine = triage.assessment.prior

    def gullible(area, supply, the_site):
        return (
            _only("person_walking")() if "static" in heard[-1] else genuine(area, supply, the_site)
        )

    heard = ["a snap"]
    monkeypatch.setattr(triage.assessment, "prior", gullible)
    tree = clean_tree(random.Random(6), "plate")
    before = conclusions(judged(tree))
    heard.append("only static")
    assert conclusions(judged(tree)) != before


# (h) nobody is told to cut power without a condition


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


# (i) the gate


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
            if not a.gate.open:
                continue
            opened += 1
            assert all(flag.cleared for flag in a.flags)
            assert not a.evidence.defects
            assert not any(v.state == "invalid_fail" for v in a.verdicts)
            touched, _ = involved(a.incident)
            missing = {i.item: i.missing for i in a.items}
            assert touched and not any(missing[i.id] for i in touched)
            assert a.gate.upper is not None and a.gate.upper < a.gate.threshold
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

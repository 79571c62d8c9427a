"""The order of answers: a more adverse answer never lowers any disposition, gate or urgency.

Thousands of seeded random records; the property is also shown to notice a program broken on purpose.
"""

import copy
import random
from collections.abc import Callable
from typing import Any

import pytest
from answer_order import apply, more_adverse, named, pick
from fail_safe_support import CHUNKS, FLOOR, judged, lowered, standing, trees
from random_records import (
    FAILING,
    STATIC_STORIES,
    Tree,
    answer_places,
    clean_tree,
    identity,
    passing_check,
)

import triage.care
import triage.disposition
import triage.validity
from triage.disposition import Level


def order_broken(rng: random.Random, tree: Tree, count: int) -> list[str]:
    steps = pick(rng, tree, count)
    worse = apply(tree, steps)
    found = lowered(standing(judged(tree)), standing(judged(worse)))
    return [f"{named(tree, steps)} lowers {each}" for each in found]


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

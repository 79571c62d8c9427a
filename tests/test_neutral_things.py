"""What must change nothing: names, order, unknown answers left out, and the words that were said.

Thousands of seeded random records; each property is also shown to notice a program broken on purpose.
"""

import copy
import random
from typing import Any

import pytest
from fail_safe_support import judged, only, site, trees
from random_records import Tree, answer_places, clean_tree, record

import triage.assessment
import triage.told
from triage.assessment import Assessment, assess

# names and order


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


# neutral things


@pytest.mark.parametrize("chunk", (70, 71))
def test_an_answer_left_out_and_the_answer_unknown_are_the_same(chunk):
    for _, tree in trees(chunk):
        assert conclusions(judged(spelled_out(tree))) == conclusions(judged(tree))


def spelled_out(tree: Tree) -> Tree:
    """The same record with every answer that was left out written as unknown."""
    found = copy.deepcopy(tree)
    for holder, name, _row in answer_places(found):
        holder.setdefault(name, "unknown")
    return found


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
            only("person_walking")() if "static" in heard[-1] else genuine(area, supply, the_site)
        )

    heard = ["a snap"]
    monkeypatch.setattr(triage.assessment, "prior", gullible)
    tree = clean_tree(random.Random(6), "plate")
    before = conclusions(judged(tree))
    heard.append("only static")
    assert conclusions(judged(tree)) != before

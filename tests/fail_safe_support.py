"""Shared pieces of the fail-safe properties: seeded records, and everything that may only go up.

Half of the records are drawn over the whole table of fields; the other half lie near a static truth
whose checks are complete and clean, because only there can the release gate open and a mistake show.
"""

import random
from collections.abc import Callable, Iterator
from functools import cache

from random_records import STATIC_STORIES, Tree, clean_tree, random_tree, record, spoil

from triage.assessment import Assessment, assess
from triage.care import URGENCY
from triage.disposition import Level
from triage.involvement import involved
from triage.knowledge import knowledge
from triage.site import Site, no_site

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


def only(cause: str) -> Callable[..., dict[str, float]]:
    causes = knowledge().causes
    rest = 1e-9 / (len(causes) - 1)
    return lambda *_: {c: 1 - 1e-9 if c == cause else rest for c in causes}


def talked_down(a: Assessment) -> list[str]:
    """Where a standing red flag does not keep its floor, or leaves the gate open."""
    levels = {each.item: each.level for each in a.items} | {"": a.room.level}
    found = [
        f"{flag.flag.id} on {item or 'the place'}"
        for flag in a.flags
        for item in flag.open_items
        if levels[item] < FLOOR[flag.flag.floor]
    ]
    return found + [
        f"gate open beside {f.flag.id}" for f in a.flags if a.gate.open and not f.cleared
    ]


def wrongly_open(a: Assessment) -> list[str]:
    """Why an open gate should be shut; nothing where it is shut."""
    if not a.gate.open:
        return []
    touched, _ = involved(a.incident)
    missing = {each.item: each.missing for each in a.items}
    reasons = {
        "a flag stands": any(not flag.cleared for flag in a.flags),
        "a defect": bool(a.evidence.defects),
        "a fail that is to be repeated": any(v.state == "invalid_fail" for v in a.verdicts),
        "nothing was touched": not touched,
        "a check is missing": any(missing[each.id] for each in touched),
        "the chance of a mains fault": a.gate.upper is None or a.gate.upper >= a.gate.threshold,
    }
    return [reason for reason, holds in reasons.items() if holds]

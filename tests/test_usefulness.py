"""Usefulness beside safety: how often a static truth with a complete clean set is let go.

Static truths are simulated from the judged tables themselves, so the shares are optimistic; they show
that a hold can end, not how often it does in a hospital.
"""

import random
from collections import Counter
from dataclasses import dataclass

import pytest
from random_records import FAILING, STATIC_STORIES, Tree, clean_tree, passing_check, record

from triage.assessment import Assessment, assess
from triage.disposition import Level
from triage.knowledge import knowledge
from triage.site import no_site

STORIES = {  # area: the stories met there, with their causes
    "ward": (("plate", "person_walking"), ("rail", "person_rising"), ("cart", "charged_object"),
             ("device", "person_walking"), ("device", "person_rising")),
    "icu": (("isolated_device", "person_walking"), ("isolated_device", "person_rising")),
    "nicu": (("rail", "person_rising"), ("cart", "charged_object")),
    "operating_room": (("isolated_device", "person_walking"), ("isolated_device", "person_rising")),
}  # fmt: skip
_ACTIVITY = {"person_walking": "walking", "person_rising": "rising_undressing",
             "charged_object": "pushing_cart"}  # fmt: skip
EACH = 60


def drawn(rng: random.Random, finding: str, cause: str) -> str:
    """An answer as probable as the judged table says under this cause."""
    row = knowledge().findings[finding].likelihood
    states = sorted(row)
    return rng.choices(states, [row[s][cause] for s in states])[0]


def static_truth(rng: random.Random, area: str, *, measured: bool) -> Tree:
    """One static truth whose mandatory checks are complete, valid and clean."""
    story, cause = rng.choice(STORIES[area])
    tree = clean_tree(rng, story, measured=measured)
    tree["place"]["area"] = area
    for field, finding in (
        ("sensation", "sensation"), ("timing", "timing"), ("repeat_at_once", "repeat_at_once"),
        ("repeat_after_moving", "repeat_after_moving"), ("others_felt", "others_felt"),
        ("crack_heard", "crack_heard"), ("spark_seen", "spark_seen"),
    ):  # fmt: skip
        tree["statements"][0][field] = drawn(rng, finding, cause)
    tree["event"]["activity"] = _ACTIVITY[cause]
    tree["surroundings"]["humidity"] = f"{rng.choice((15, 20, 25, 30, 35, 40, 45))} %RH"
    tree["contacts"][0]["moisture"] = "damp" if drawn(rng, "wet_contact", cause) == "yes" else "dry"
    second = drawn(rng, "second_contact", cause) == "yes"
    tree["contacts"][0]["also_touching"] = "earthed_metal" if second else "nothing"
    if second:
        tree["checks"].append(passing_check("k99", "two_metal_voltage", tree["items"][0]))
    return tree


@dataclass(frozen=True)
class Share:
    """Static truths, those complete and without a standing flag, how many of them were let go.

    `unflagged` leaves out witnesses who must be asked again first; `raw` counts them as complete.
    """

    truths: int
    raw: int
    unflagged: int
    released: int
    severe: int
    shut_by: Counter[str]

    @property
    def of_unflagged(self) -> float:
        return self.released / self.unflagged


def measure(area: str, *, measured: bool) -> Share:
    shut: Counter[str] = Counter()
    raw = unflagged = released = severe = 0
    for seed in range(EACH):
        rng = random.Random(f"{area} {measured} {seed}")
        tree = static_truth(rng, area, measured=measured)
        a = assess(record(tree), no_site())
        severe += a.headline >= Level.WITHDRAW
        if not all(flag.cleared for flag in a.flags):
            continue
        raw += 1
        if unsure(tree):
            assert a.headline > Level.STATIC_CONTROLS  # so the released are the same in both
            continue
        unflagged += 1
        released += a.headline == Level.STATIC_CONTROLS
        shut.update(a.gate.shut_by)
    return Share(EACH, raw, unflagged, released, severe, shut)


def unsure(tree: Tree) -> bool:
    """Whether a deciding answer is as good as unknown: such a witness is asked again first."""
    said = tree["statements"][0]
    return said["timing"] in ("unsure", "on_release") or said["sensation"] == "unclear"


@pytest.mark.parametrize("measured", [False, True])
def test_a_static_truth_with_a_complete_clean_set_is_let_go(measured, capsys):
    found = {area: measure(area, measured=measured) for area in STORIES}
    total = sum(s.unflagged for s in found.values())
    released, raw = (sum(getattr(s, n) for s in found.values()) for n in ("released", "raw"))
    let_go = released / total
    with capsys.disabled():
        print(
            f"\nstatic measured: {measured}; let go {let_go:.0%} of {total} static truths whose"
            f" witnesses were sure, {released / raw:.0%} of all {raw} without a standing flag"
        )
        for area, share in found.items():
            worst = "; ".join(f"{n} {text}" for text, n in share.shut_by.most_common(4))
            print(
                f"  {area}: {share.of_unflagged:.0%} of {share.unflagged}"
                f" ({share.truths - share.unflagged} of {share.truths} flagged or unsure,"
                f" {share.severe} severe); {worst}"
            )
    assert let_go >= (0.85 if measured else 0.75)
    assert all(share.severe <= 0.10 * share.truths for share in found.values())


LATENT = {
    "plate": "metal_voltage_loaded", "rail": "two_metal_voltage", "cart": "metal_voltage_loaded",
    "device": "earth_continuity", "isolated_device": "insulation_resistance",
}  # fmt: skip


def outcome(tree: Tree) -> Assessment:
    return assess(record(tree), no_site())


@pytest.mark.parametrize("story", STATIC_STORIES)
def test_no_static_truth_with_a_latent_defect_an_invalid_or_a_missing_check_is_let_go(story):
    for seed in range(12):
        tree = clean_tree(random.Random(seed), story, measured=True)
        rest = [c for c in tree["checks"] if c["kind"] != LATENT[story]]
        mine = [c for c in tree["checks"] if c["kind"] == LATENT[story]]
        failing = [c | {"value": FAILING[c["kind"]], "result": "fail"} for c in mine]
        invalid = [c | {"calibration_due": "2020-01-01"} for c in mine]
        assert outcome(tree).headline == Level.STATIC_CONTROLS
        assert outcome(tree | {"checks": rest + failing}).headline >= Level.WITHDRAW
        assert outcome(tree | {"checks": rest + invalid}).headline == Level.HOLD
        assert outcome(tree | {"checks": rest}).headline == Level.HOLD

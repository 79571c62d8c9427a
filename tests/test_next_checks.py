"""Next checks: information is a true expectation, nothing mandatory is lost, order is sensible."""

import math
import random

import pytest
from random_records import clean_tree, random_tree, record
from test_diagnosis import CAUSES, random_priors
from wording_rules import power_off_imperatives

from triage.assessment import Assessment, assess
from triage.check_table import check_kinds
from triage.knowledge import knowledge
from triage.next_checks import information_of
from triage.site import no_site

K = knowledge()


def assessments():
    for seed in range(150):
        rng = random.Random(seed)
        tree = random_tree(rng)
        if seed % 3 == 0:
            tree = clean_tree(rng, "device")
            tree["checks"] = tree["checks"][: rng.randint(0, 4)]
        yield assess(record(tree), no_site())


@pytest.mark.parametrize("finding", sorted(K.findings))
def test_the_expected_posterior_equals_the_prior(finding):
    row = K.findings[finding]
    for seed in range(20):
        p = random_priors(random.Random(seed))
        after = dict.fromkeys(CAUSES, 0.0)
        for state in row.likelihood:
            joint = {c: p[c] * math.exp(row.tempered[state][c]) for c in CAUSES}
            total = math.fsum(joint.values())
            for c in CAUSES:
                after[c] += total * (joint[c] / total)
        assert [after[c] for c in CAUSES] == pytest.approx([p[c] for c in CAUSES], abs=1e-12)


def test_information_is_the_mutual_information_by_plain_summation():
    """I(F; X) = sum of p(f, x) log2 p(f, x) / (p(f) p(x)); Cover and Thomas, ch. 2."""
    mains = set(K.family("mains"))
    for seed, row in enumerate(K.findings.values()):
        p = random_priors(random.Random(seed))
        wanted = 0.0
        for state in row.likelihood:
            x = math.fsum(p[c] * math.exp(row.tempered[state][c]) for c in CAUSES)
            for inside in (True, False):
                group = [c for c in CAUSES if (c in mains) is inside]
                both = math.fsum(p[c] * math.exp(row.tempered[state][c]) for c in group)
                wanted += both * math.log2(both / (x * math.fsum(p[c] for c in group)))
        assert information_of(row, p) == pytest.approx(wanted, abs=1e-12)


def test_no_missing_mandatory_check_is_ever_left_out():
    for a in assessments():
        listed = {n.kind.id for n in a.next_checks if n.mandatory}
        failed = {v.kind.id for v in a.verdicts if v.kind and v.state == "valid_fail"}
        missing = {check for each in a.items for check in each.missing}
        assert missing - failed <= listed


def test_what_can_be_done_now_comes_first_and_then_the_most_telling_for_its_minutes():
    for a in assessments():
        keys = [(bool(n.after), -n.score) for n in a.next_checks]
        assert keys == sorted(keys)


def test_a_check_that_drops_power_waits_for_whoever_depends_on_it():
    tree = clean_tree(random.Random(1), "device")
    tree["checks"] = []
    for dependence in ("life_support", "procedure", "unknown"):
        tree["scene"]["dependence"] = dependence
        a = assess(record(tree), no_site())
        dropping = [n for n in a.next_checks if n.kind.drops_power]
        assert dropping and all(n.after for n in dropping)


def test_no_step_bids_anybody_to_touch_it_again_or_to_cut_power_without_a_condition():
    for kind in check_kinds().values():
        for step in kind.how:
            assert "touch it again" not in step.lower()
            assert power_off_imperatives(step) == []


def _minutes_to_first_fail(order: list[str], failing: set[str]) -> tuple[int, int]:
    spent = 0
    for count, kind in enumerate(order, 1):
        spent += check_kinds()[kind].minutes
        if kind in failing:
            return spent, count
    return 10_000, len(order)


ELECTRICAL = {
    "open_earth": ({"earth_continuity", "metal_voltage_loaded", "earth_in_place"},
                   {"sensation": "tingle", "repeat_at_once": "yes"}),
    "insulation_fault": ({"touch_current", "insulation_resistance", "metal_voltage_loaded"},
                         {"sensation": "tingle", "timing": "while_holding"}),
    "outlet_wiring": ({"outlet_test", "metal_voltage_loaded"}, {"sensation": "sustained_pain"}),
    "live_cord": ({"visual_inspection"}, {"sensation": "thrown"}),
    "earth_difference": ({"metal_voltage_loaded", "two_metal_voltage"}, {"sensation": "buzz"}),
}  # fmt: skip


def test_on_electrical_truths_the_first_decisive_reading_comes_early(capsys):
    """Against the fixed safety order of the same checks."""
    sooner, later = [], []
    for failing, said in ELECTRICAL.values():
        for area in ("ward", "clinic", "icu", "nicu"):
            tree = clean_tree(random.Random(area), "device")
            tree["place"]["area"], tree["checks"] = area, []
            tree["statements"][0] |= said
            a: Assessment = assess(record(tree), no_site())
            mine = list(dict.fromkeys(n.kind.id for n in a.next_checks))
            fixed = sorted(mine, key=lambda kind: check_kinds()[kind].order)
            here, there = (_minutes_to_first_fail(o, failing) for o in (mine, fixed))
            sooner.append(here[0] <= there[0])
            later.append(here[1] - there[1])
    with capsys.disabled():
        print(
            f"\nfirst decisive reading as soon or sooner: {sum(sooner)}/{len(sooner)}, "
            f"latest by {max(later)} checks"
        )
    assert sum(sooner) >= 0.8 * len(sooner)
    assert max(later) <= 1

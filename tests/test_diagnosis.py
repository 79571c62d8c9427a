"""The ranking against published Bayes examples, plain arithmetic and brute force."""

import math
import random
from collections.abc import Sequence
from pathlib import Path

import pytest
import yaml
from plain_core import plain_knowledge

import triage.diagnosis
from triage.diagnosis import (
    RESIDUAL,
    Case,
    build_case,
    conflicts,
    does_not_fit,
    evaluate,
    prior,
    weigh,
)
from triage.evidence import Observed
from triage.knowledge import knowledge
from triage.site import from_plain, no_site
from triage.strict_yaml import Plain

K = knowledge()
CAUSES = tuple(K.causes)
PUBLISHED = yaml.safe_load(
    (Path(__file__).parent / "published" / "bayes.yaml").read_text(encoding="utf-8")
)


def two_way(prior_odds: float, *ratios: float) -> float:
    """P(first of two) by the program itself: every ratio is a reading, nothing is told."""
    other = 1 / (1 + prior_odds)
    measured = {str(n): (math.log(ratio), 0.0) for n, ratio in enumerate(ratios)}
    case = Case((1 - other, other), (0.0, 0.0), {}, measured, {}, frozenset(), (0.0, 0.0))
    return evaluate(case)[0]


@pytest.mark.parametrize("row", PUBLISHED["two_way"], ids=lambda row: row["id"])
def test_published_worked_examples_of_bayes_come_out(row):
    """Source beside each row of tests/published/bayes.yaml."""
    found = two_way(row["before"] / (1 - row["before"]), row["ratio"])
    assert found == pytest.approx(row["after"], abs=row["within"])


def test_a_published_net_of_three_causes_and_two_findings_comes_out():
    """Burglary and earthquake net: P(burglary | both neighbours call) = 0.284.

    Source: Russell and Norvig, Artificial Intelligence, fig. 14.2 (tables); the joint states of
    the two roots are the causes here, the alarm is summed out.
    """
    net = PUBLISHED["alarm_net"]
    roots = [(b, e) for b in (True, False) for e in (True, False)]
    p = {True: net["burglary"], False: 1 - net["burglary"]}
    q = {True: net["earthquake"], False: 1 - net["earthquake"]}
    rows: dict[str, list[float]] = {"john": [], "mary": []}
    joint = []
    for b, e in roots:
        alarm = net["alarm"][f"{'b' if b else '-'}{'e' if e else '-'}"]
        both = alarm * 0.90 * 0.70 + (1 - alarm) * 0.05 * 0.01
        joint.append(math.log(both))
        rows["john"].append(alarm)
    case = Case(
        tuple(p[b] * q[e] for b, e in roots), (0.0,) * 4, {}, {"calls": tuple(joint)}, {},
        frozenset(), (0.0,) * 4,
    )  # fmt: skip
    found = evaluate(case)
    assert sum(v for v, (b, _) in zip(found, roots, strict=True) if b) == pytest.approx(
        net["burglary_given_both"], abs=5e-6
    )
    assert sum(v for v, (_, e) in zip(found, roots, strict=True) if e) == pytest.approx(
        net["earthquake_given_both"], abs=5e-6
    )


# the plain core and the full form against enumeration


def random_observed(rng: random.Random) -> list[Observed]:
    findings = rng.sample(sorted(K.findings), rng.randint(0, 14))
    found = []
    for name in findings:
        row = K.findings[name]
        measured = row.measured or rng.random() < 0.15
        found.append(Observed(row, rng.choice(sorted(row.likelihood)), measured, "said"))
    return found


def random_priors(rng: random.Random) -> dict[str, float]:
    raw = {c: rng.uniform(0.001, 1) for c in CAUSES}
    return {c: v / sum(raw.values()) for c, v in raw.items()}


def by_enumeration(
    priors: dict[str, float], observed: Sequence[Observed], factors: dict[str, float],
    *, allowance: float, cap: float | None, tempering: dict[str, float] | None, floor: bool,
) -> list[float]:  # fmt: skip
    """The whole formula, cause by cause, in products of probabilities; no logarithm, no sharing."""
    story, reading = {}, {}
    groups: dict[str, dict[str, float]] = {}
    for cause in CAUSES:
        passes = rest = 1.0
        any_pass = False
        for each in observed:
            tau = 1.0 if tempering is None else tempering[each.finding.group]
            row = each.finding.likelihood
            share = row[each.state][cause] ** tau / sum(row[s][cause] ** tau for s in row)
            if not each.measured:
                group = groups.setdefault(each.finding.group, dict.fromkeys(CAUSES, 1.0))
                group[cause] *= share
            elif each.finding.group == "tests" and each.state == "no":
                passes, any_pass = passes * share, True
            else:
                rest *= share
        if floor and any_pass:
            doubtful = any(
                o.finding.id in ("wet_contact", "recent_change") and o.state == "yes"
                for o in observed
            )
            least = min(K.causes[cause].passes_together * (2 if doubtful else 1), 1.0)
            passes = max(passes, least)
        reading[cause] = passes * rest
    for cause in CAUSES:
        story[cause] = priors[cause] * factors.get(cause, 1.0)
        for group in groups.values():
            least = 0.0 if cap is None else max(group.values()) / cap
            story[cause] *= max(group[cause], least)
    total = sum(story.values())
    raw = [
        ((1 - allowance) * story[c] / total + allowance * priors[c]) * reading[c] for c in CAUSES
    ]
    return [each / sum(raw) for each in raw]


def test_the_plain_core_is_bayes_rule(monkeypatch):
    """No tempering, cap, allowance or physics: prior times likelihoods over their sum."""
    plain = plain_knowledge()
    monkeypatch.setattr(triage.diagnosis, "knowledge", lambda: plain)
    for seed in range(200):
        rng = random.Random(seed)
        priors = random_priors(rng)
        observed = [
            Observed(plain.findings[o.finding.id], o.state, o.measured, "said")
            for o in random_observed(rng)
        ]
        raw = [
            priors[c] * math.prod(o.finding.likelihood[o.state][c] for o in observed)
            for c in CAUSES
        ]
        found = evaluate(build_case(priors, observed, {}))
        assert found == pytest.approx([r / sum(raw) for r in raw], rel=1e-12, abs=1e-15)


TEMPERING = yaml.safe_load(
    (Path(__file__).parents[1] / "triage" / "data" / "findings.yaml").read_text(encoding="utf-8")
)["tempering"]


def test_the_full_formula_equals_brute_force_over_random_findings():
    for seed in range(2000):
        rng = random.Random(seed)
        priors, observed = random_priors(rng), random_observed(rng)
        factors = {c: math.exp(rng.uniform(-3, 1.5)) for c in rng.sample(CAUSES, 9)}
        wanted = by_enumeration(
            priors, observed, factors, allowance=0.05, cap=1000.0, tempering=TEMPERING, floor=True
        )
        found = evaluate(build_case(priors, observed, factors))
        assert found == pytest.approx(wanted, rel=1e-12, abs=1e-15)


@pytest.mark.parametrize("wrong", [
    {"allowance": 0.0}, {"cap": None}, {"tempering": None}, {"floor": False},
])  # fmt: skip
def test_that_comparison_notices_each_part_of_the_formula(wrong):
    right = {"allowance": 0.05, "cap": 1000.0, "tempering": TEMPERING, "floor": True}
    furthest = 0.0
    for seed in range(3000):
        rng = random.Random(seed)
        priors, observed = random_priors(rng), random_observed(rng)
        found = evaluate(build_case(priors, observed, {}))
        other = by_enumeration(priors, observed, {}, **(right | wrong))
        furthest = max(furthest, *(abs(a - b) / b for a, b in zip(found, other, strict=True)))
    assert furthest > 1e-3


# regression figures of the judged numbers

CARRIED = yaml.safe_load(
    (Path(__file__).parent / "published" / "carried_figures.yaml").read_text(encoding="utf-8")
)


ROWS = {row["id"]: row for row in CARRIED["findings"]}


def _carried(finding: str, state: str, renormalised: str) -> tuple[float, ...]:
    """Tempered log likelihoods of one carried row, renormalised over its answers or not."""
    row, tau = ROWS[finding], CARRIED["tempering"][ROWS[finding]["group"]]
    columns = list(zip(*row["weights"].values(), strict=True))
    place = list(row["weights"]).index(state)
    whole = renormalised == "all" or (renormalised == "one_of" and "yes" not in row["weights"])
    found = []
    for weights in columns:
        shares = [weight / sum(weights) for weight in weights]
        total = sum(share**tau for share in shares) if whole else 1.0
        found.append(math.log(shares[place] ** tau / total))
    return tuple(found)


def _mains(known: dict[str, str], renormalised: str) -> float:
    """P(mains family) by the program's own evaluation."""
    rows = {f: _carried(f, state, renormalised) for f, state in known.items()}
    read = {f for f in known if ROWS[f]["group"] in ("environment", "tests")}
    count, whole = len(CARRIED["causes"]), sum(CARRIED["prior"])
    case = Case(
        tuple(p / whole for p in CARRIED["prior"]), (0.0,) * count,
        {f: rows[f] for f in known if f not in read}, {f: rows[f] for f in read},
        {f: ROWS[f]["group"] for f in known if f not in read}, frozenset(), (0.0,) * count,
    )  # fmt: skip
    found = dict(zip(CARRIED["causes"], evaluate(case), strict=True))
    return math.fsum(found[c] for c in CARRIED["mains"])


@pytest.mark.parametrize("row", CARRIED["cases"], ids=lambda row: row["id"])
@pytest.mark.parametrize("renormalised", ["none", "one_of", "all"])
def test_the_carried_figures_show_where_they_come_from(row, renormalised):
    """0.0098 and 0.257 hold without renormalising; as the formula is defined they are lower."""
    assert _mains(row["known"], renormalised) == pytest.approx(row[renormalised], abs=6e-5)


# weights and conflicts


def test_weights_add_up_to_the_posterior_odds_of_the_pair():
    for seed in range(200):
        rng = random.Random(seed)
        observed = random_observed(rng)
        case = build_case(random_priors(rng), observed, {c: rng.uniform(0.2, 5) for c in CAUSES})
        a, b = rng.sample(CAUSES, 2)
        found = evaluate(case)
        odds = 10 * math.log10(found[CAUSES.index(a)] / found[CAUSES.index(b)])
        assert sum(w.decibans for w in weigh(case, observed, (a, b))) == pytest.approx(
            odds, abs=1e-9
        )


def test_the_table_of_weights_names_each_line():
    observed = [Observed(K.findings["sensation"], "snap", False, "said")]
    case = build_case(prior("ward", "earthed", no_site()), observed, {})
    found = [w.label for w in weigh(case, observed, ("person_walking", "open_earth"))]
    assert found == ["prior", "physics", f"{K.findings['sensation'].name}: snap",
                     "limit on one group of answers", "passes counted together",
                     "allowance for a wrong story"]  # fmt: skip


def test_a_conflict_is_the_chance_of_a_finding_against_its_chance_given_the_others():
    for seed in range(200):
        rng = random.Random(seed)
        priors, observed = random_priors(rng), random_observed(rng)
        found = conflicts(build_case(priors, observed, {}), observed)
        assert set(found) == {o.finding.id for o in observed}
        for each in observed:
            others = [o for o in observed if o is not each]
            given = by_enumeration(
                priors, others, {}, allowance=0.05, cap=1000.0, tempering=TEMPERING, floor=True
            )
            if each.finding.id in ("wet_contact", "recent_change") and each.state == "yes":
                continue  # leaving it out halves the floor as well
            row = {c: math.exp(each.finding.tempered[each.state][c]) for c in CAUSES}
            alone = sum(priors[c] * row[c] for c in CAUSES)
            told = sum(p * row[c] for c, p in zip(CAUSES, given, strict=True))
            assert found[each.finding.id] == pytest.approx(math.log10(alone / told), abs=1e-9)


def test_one_impossible_answer_among_many_agreeing_ones_is_named():
    observed = [
        Observed(K.findings[f], s, False, "said")
        for f, s in {"sensation": "snap", "activity": "walking", "touched": "building_metal",
                     "crack_heard": "yes", "driven": "yes"}.items()
    ]  # fmt: skip
    case = build_case(prior("ward", "earthed", no_site()), observed, {})
    found = conflicts(case, observed)
    assert max(found, key=lambda f: found[f]) == "driven"
    assert found["driven"] > 0.7


def test_what_the_leader_almost_never_gives_does_not_fit():
    from types import SimpleNamespace

    observed = [
        Observed(K.findings["wet_contact"], "yes", False, "said"),
        Observed(K.findings["sensation"], "snap", False, "said"),
    ]
    leads = SimpleNamespace(ranked=("person_walking",))
    assert [o.finding.id for o in does_not_fit(leads, observed)] == ["wet_contact"]


# priors


def test_priors_sum_to_one_in_every_area():
    for area in [*K.area_priors, "other", None]:
        for supply in ("earthed", "isolated", None):
            assert sum(prior(area, supply, no_site()).values()) == pytest.approx(1, abs=1e-12)


def test_an_area_that_is_not_known_takes_the_mean_of_all():
    rows = list(K.priors.values())
    found = prior(None, None, no_site())
    for cause in CAUSES:
        assert found[cause] == pytest.approx(sum(r[cause] for r in rows) / len(rows), abs=1e-12)


def test_an_area_that_may_have_an_isolated_supply_has_a_prior_for_either_supply():
    for area, rows in K.area_priors.items():
        for supply in ("earthed", "isolated"):
            row = K.priors[rows[supply]]
            found = prior(area, supply, no_site())
            assert [found[c] for c in CAUSES] == pytest.approx([row[c] for c in CAUSES], abs=1e-12)
    earthed = prior("operating_room", "earthed", no_site())
    assert earthed["isolated_first_fault"] < 0.002
    assert prior("operating_room", None, no_site()) == prior(
        "operating_room", "isolated", no_site()
    )


def test_a_site_raises_mains_causes_and_nothing_else():
    raised = {"schema": "1", "policy": {"raised": [
        {"cause": "open_earth", "times": "4", "reason": "old wing"},
    ]}}  # fmt: skip
    plain = prior("ward", "earthed", no_site())
    found = prior("ward", "earthed", from_plain(Plain("site", raised)))
    assert found["open_earth"] > plain["open_earth"]
    ratio = found["person_walking"] / plain["person_walking"]
    assert ratio < 1
    assert found["live_cord"] / plain["live_cord"] == pytest.approx(ratio)


def test_isolated_causes_vanish_only_where_no_room_has_an_isolated_supply():
    def rooms(*supplies: str):
        rows = [{"id": f"r{n}", "supply": s} for n, s in enumerate(supplies)]
        return from_plain(Plain("site", {"schema": "1", "rooms": rows}))

    assert prior("ward", "earthed", rooms("earthed", "earthed"))["isolated_first_fault"] == 0
    assert prior("ward", "earthed", rooms("earthed", "isolated"))["isolated_first_fault"] > 0
    assert prior("ward", None, rooms("earthed"))["isolated_first_fault"] > 0
    assert prior("ward", "earthed", no_site())["isolated_first_fault"] > 0


def test_the_residual_class_is_never_a_ranked_cause():
    from random_records import record

    from triage.assessment import assess

    a = assess(record({"schema": "1", "id": "0" * 32}), no_site())
    assert RESIDUAL not in a.posterior.ranked
    assert len(a.posterior.ranked) == len(CAUSES) - 1
    assert a.posterior.of(RESIDUAL) > 0

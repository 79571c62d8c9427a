"""From findings and physics to a posterior over causes, with its weights and its conflicts.

P(c) is proportional to [(1 - e) q(c) + e p(c)] x measured(c): p the prior; q the prior times
physics times the tempered, capped likelihoods of what was told; e the chance that the story is
wrong; measured the likelihood of instruments and logs, with a floor under joint passes.
"""

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from operator import mul

from triage.evidence import Evidence
from triage.exposure import Exposure
from triage.frozen import frozen
from triage.knowledge import Knowledge, knowledge
from triage.site import Site
from triage.told import Observed

RESIDUAL = "none_of_these"
"""The class that takes what the list does not hold; never shown as a ranked cause."""
_REPLACED_BY_PHYSICS = frozenset({"humidity", "ground_path", "casters"})
_DOUBTFUL_STATE = frozenset({"wet_contact", "recent_change"})
CONFLICT_NAMED, CONFLICT_BLOCKS = 0.7, 1.0
"""log10 of P(finding) over P(finding | all others): named in the report, and blocking release
until the statement is asked again (judgement)."""


@dataclass(frozen=True, slots=True)
class Weight:
    """One line of the table of weights for the named pair, in decibans (10 log10 of odds)."""

    label: str
    decibans: float


@frozen
class Posterior:
    """The ranking.

    Args:
        causes: ids in the order of the table; the sequences below follow it.
        prior: P(cause) before anything is asked, for this care area and supply.
        probability: P(cause) after everything.
        ranked: ids from most to least probable, without the residual class.
        pair: leader and its strongest rival of another mechanism.
        weights: what moves the odds of the pair; they add up to its posterior odds.
        conflicts: finding id to log10 P(finding) / P(finding | all others).
    """

    causes: tuple[str, ...]
    prior: tuple[float, ...]
    probability: tuple[float, ...]
    ranked: tuple[str, ...]
    pair: tuple[str, str]
    weights: tuple[Weight, ...]
    conflicts: Mapping[str, float]

    def of(self, cause: str) -> float:
        """P(cause)."""
        return self.probability[self.causes.index(cause)]

    def family(self, mechanism: str) -> float:
        """Summed probability of one mechanism."""
        return math.fsum(self.of(cause) for cause in knowledge().family(mechanism))


@dataclass(frozen=True, slots=True)
class Case:
    """The numbers of one case, ready for repeated evaluation.

    Args:
        prior: over causes, summing to 1. log_factor: physics, log.
        told, measured: finding id to log likelihoods over causes.
        groups: told finding id to its group.
        joint: measured findings that are passes of mandatory checks.
        floor: log floor under the product of the joint passes, over causes.
    """

    prior: tuple[float, ...]
    log_factor: tuple[float, ...]
    told: Mapping[str, tuple[float, ...]]
    measured: Mapping[str, tuple[float, ...]]
    groups: Mapping[str, str]
    joint: frozenset[str]
    floor: tuple[float, ...]


def prior(area: str | None, supply: str | None, site: Site) -> dict[str, float]:
    """P(cause | a complaint was made here).

    Args:
        area: care area; where it is not known or has no row, all rows count alike.
        supply: earthed, isolated or None for not known.
        site: may raise mains causes, and may say that no room has an isolated supply.
    """
    k = knowledge()
    names = k.area_priors.get(area or "")
    if names:
        rows = [k.priors[names["earthed" if supply == "earthed" else "isolated"]]]
    else:
        rows = list(k.priors.values())
    found = {cause: math.fsum(row[cause] for row in rows) / len(rows) for cause in k.causes}
    raised = {r.cause: r.times for r in site.file.policy.raised}
    for cause in k.causes.values():
        if cause.mechanism == "mains":
            found[cause.id] *= raised.get(cause.id) or 1
        if cause.needs_isolated_supply and supply == "earthed" and _none_isolated(site):
            found[cause.id] = 0.0
    total = math.fsum(found.values())
    return {cause: p / total for cause, p in found.items()}


def _none_isolated(site: Site) -> bool:
    """Whether the site file says that no room has an isolated supply."""
    rooms = site.file.rooms
    return bool(rooms) and all(room.supply == "earthed" for room in rooms)


def build_case(
    priors: Mapping[str, float], observed: Sequence[Observed], factors: Mapping[str, float]
) -> Case:
    """Collect the numbers of a case.

    Args:
        priors: cause id to P(cause).
        observed: findings that count.
        factors: cause id to physics factor.
    """
    k = knowledge()
    causes = tuple(k.causes)
    rows = {o.finding.id: _row(o, causes) for o in observed}
    joint = frozenset(
        o.finding.id for o in observed if o.finding.group == "tests" and o.state == "no"
    )
    doubled = any(o.finding.id in _DOUBTFUL_STATE and o.state == "yes" for o in observed)
    floor = tuple(
        math.log(min(k.causes[c].passes_together * (2 if doubled else 1), 1.0)) for c in causes
    )
    return Case(
        tuple(priors[c] for c in causes),
        tuple(math.log(factors.get(c, 1.0)) for c in causes),
        {o.finding.id: rows[o.finding.id] for o in observed if not o.measured},
        {o.finding.id: rows[o.finding.id] for o in observed if o.measured},
        {o.finding.id: o.finding.group for o in observed if not o.measured},
        joint,
        floor,
    )


def _row(observed: Observed, causes: tuple[str, ...]) -> tuple[float, ...]:
    row = observed.finding.tempered[observed.state]
    return tuple(row[c] for c in causes)


def evaluate(case: Case, without: str | None = None) -> tuple[float, ...]:
    """P(cause), over causes; `without` leaves one finding out."""
    k = knowledge()
    return _posterior(case, _story(case, without, k), _readings(case, without), k)


def _posterior(
    case: Case, story: Sequence[float], readings: Sequence[float], k: Knowledge
) -> tuple[float, ...]:
    """Story with its allowance, times what was measured, normalised."""
    raw = [
        ((1 - k.wrong_story) * s + k.wrong_story * p) * math.exp(m)
        for s, p, m in zip(story, case.prior, readings, strict=True)
    ]
    total = math.fsum(raw)
    return tuple(each / total for each in raw)


def _story(case: Case, without: str | None, k: Knowledge) -> list[float]:
    """q: prior, physics and what was told, normalised."""
    sums = _group_sums(case, without)
    return _mixed(case, [_capped(sums[group], k) for group in sorted(sums)])


def _mixed(case: Case, groups: Iterable[list[float]]) -> list[float]:
    """Prior times physics times the groups of told answers, normalised."""
    logs = [math.fsum(each) for each in zip(case.log_factor, *groups, strict=True)]
    top = max(logs)
    raw = [p * math.exp(x - top) for p, x in zip(case.prior, logs, strict=True)]
    total = math.fsum(raw)
    return [each / total for each in raw]


def _capped(group: list[float], k: Knowledge) -> list[float]:
    """A group's sum, no cause further below the best than the cap."""
    lowest = max(group) - k.cap_log
    return [each if each > lowest else lowest for each in group]


def _group_sums(case: Case, without: str | None) -> dict[str, list[float]]:
    rows: dict[str, list[tuple[float, ...]]] = {}
    for finding in sorted(case.told):
        if finding != without:
            rows.setdefault(case.groups[finding], []).append(case.told[finding])
    return {
        group: [sum(each) for each in zip(*found, strict=True)] for group, found in rows.items()
    }


def _readings(case: Case, without: str | None) -> list[float]:
    """Log likelihood of the measured part; joint passes never fall below their floor."""
    passes, rest = [0.0] * len(case.prior), [0.0] * len(case.prior)
    any_pass = False
    for finding in sorted(case.measured):
        if finding == without:
            continue
        part = passes if finding in case.joint else rest
        any_pass = any_pass or finding in case.joint
        for i, value in enumerate(case.measured[finding]):
            part[i] += value
    if any_pass:
        passes = [max(value, low) for value, low in zip(passes, case.floor, strict=True)]
    return [a + b for a, b in zip(passes, rest, strict=True)]


def counted(evidence: Evidence, exposure: Exposure) -> tuple[Observed, ...]:
    """Findings that count: those the physics replaces are left out."""
    modelled = any(e.static is not None for e in exposure.causes.values())
    return tuple(
        o for name, o in sorted(evidence.observed.items())
        if not (modelled and name in _REPLACED_BY_PHYSICS)
    )  # fmt: skip


def diagnose(priors: Mapping[str, float], evidence: Evidence, exposure: Exposure) -> Posterior:
    """Rank the causes of one incident.

    Args:
        priors: from `prior`.
        evidence: findings.
        exposure: physics factors.
    """
    k = knowledge()
    observed = counted(evidence, exposure)
    factors = {cause: each.factor for cause, each in exposure.causes.items()}
    case = build_case(priors, observed, factors)
    found = evaluate(case)
    causes = tuple(k.causes)
    order = sorted(range(len(causes)), key=lambda i: (-found[i], causes[i]))
    ranked = tuple(causes[i] for i in order if causes[i] != RESIDUAL)
    pair = _pair(ranked, k)
    return Posterior(
        causes, case.prior, found, ranked, pair,
        weigh(case, observed, pair), conflicts(case, observed),
    )  # fmt: skip


def _pair(ranked: tuple[str, ...], k: Knowledge) -> tuple[str, str]:
    leader = ranked[0]
    mechanism = k.causes[leader].mechanism
    rival = next(c for c in ranked[1:] if k.causes[c].mechanism != mechanism)
    return leader, rival


def weigh(case: Case, observed: Sequence[Observed], pair: tuple[str, str]) -> tuple[Weight, ...]:
    """What moves the odds of a pair, line by line, adding up to its posterior odds."""
    k = knowledge()
    causes = tuple(k.causes)
    a, b = causes.index(pair[0]), causes.index(pair[1])

    def between(row: Sequence[float]) -> float:
        return row[a] - row[b]

    lines = [("prior", math.log(_positive(case.prior[a]) / _positive(case.prior[b])))]
    lines.append(("physics", between(case.log_factor)))
    for each in sorted(observed, key=lambda o: o.finding.id):
        row = case.measured if each.measured else case.told
        lines.append((f"{each.finding.name}: {each.state}", between(row[each.finding.id])))
    sums = _group_sums(case, None).values()
    cap = sum(between(_capped(g, k)) - between(g) for g in sums)
    story, readings = _story(case, None, k), _readings(case, None)
    mixed = [
        (1 - k.wrong_story) * s + k.wrong_story * p for s, p in zip(story, case.prior, strict=True)
    ]
    allowance = math.log(_positive(mixed[a]) / _positive(mixed[b])) - math.log(
        _positive(story[a]) / _positive(story[b])
    )
    floor = between(readings) - sum(between(row) for row in case.measured.values())
    for label, value in (("limit on one group of answers", cap), ("passes counted together", floor),
                         ("allowance for a wrong story", allowance)):  # fmt: skip
        lines.append((label, value))
    return tuple(Weight(label, 10 / math.log(10) * value) for label, value in lines)


def _positive(value: float) -> float:
    """A probability that may be zero only for a cause the site cannot have."""
    return max(value, 1e-300)


def conflicts(case: Case, observed: Sequence[Observed]) -> dict[str, float]:
    """For each finding log10 of P(finding) over P(finding | all others); positive pulls apart."""
    k, found = knowledge(), {}
    sums = _group_sums(case, None)
    capped = {group: _capped(found_, k) for group, found_ in sums.items()}
    story, readings = _mixed(case, [capped[g] for g in sorted(capped)]), _readings(case, None)
    for each in observed:
        name = each.finding.id
        if each.measured:
            row = case.measured[name]
            others = _posterior(case, story, _readings(case, name), k)
        else:
            row = case.told[name]
            rest = {g: x for g, x in capped.items() if g != case.groups[name]}
            changed = rest | _without(case, name, k)
            others = _posterior(
                case, _mixed(case, [changed[g] for g in sorted(changed)]), readings, k
            )
        likely = [math.exp(x) for x in row]
        alone = math.fsum(map(mul, case.prior, likely))
        found[name] = math.log10(alone / math.fsum(map(mul, others, likely)))
    return found


def _without(case: Case, finding: str, k: Knowledge) -> dict[str, list[float]]:
    """The capped sum of a finding's group without it; empty where it stood alone."""
    group = case.groups[finding]
    rows = [case.told[f] for f in sorted(case.told) if case.groups[f] == group and f != finding]
    return {group: _capped([sum(x) for x in zip(*rows, strict=True)], k)} if rows else {}


def does_not_fit(posterior: Posterior, observed: Sequence[Observed]) -> tuple[Observed, ...]:
    """Answers that the leading cause gives almost never (at most one in fifty)."""
    leader = posterior.ranked[0]
    return tuple(o for o in observed if o.finding.likelihood[o.state][leader] <= 0.02)

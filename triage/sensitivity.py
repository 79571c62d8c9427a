"""How firm the ranking is: ranges in closed form, and the numbers it hangs on."""

import math
from collections.abc import Mapping, Sequence

from triage.diagnosis import Posterior
from triage.frozen import frozen
from triage.knowledge import knowledge
from triage.quadrature import normal_cdf
from triage.told import Observed

_Z90 = 1.6448536269514722
STABLE, LEANING = 0.9, 0.6


@frozen
class Range:
    """A probability with the range its judged numbers leave."""

    low: float
    point: float
    high: float


@frozen
class Sensitivity:
    """How firm the ranking is.

    Args:
        ranges: cause id to its range.
        mains: range of the family of mains causes.
        first_kept: chance that the first rank survives a change of the judged numbers.
        firmness: stable, leaning or open.
        hangs_on: the numbers that move the odds of the leading pair most, in words.
    """

    ranges: Mapping[str, Range]
    mains: Range
    first_kept: float
    firmness: str
    hangs_on: tuple[str, ...]


def ranges(posterior: Posterior, observed: Sequence[Observed]) -> Sensitivity:
    """Ranges of every cause by the delta method on the log-odds.

    Every likelihood moves with a standard deviation on the logit scale, every prior on the log
    scale (data/findings.yaml). Good in the middle; the small tail that decides release is drawn.
    """
    k = knowledge()
    noise = {cause: _score_variance(cause, observed) for cause in posterior.causes}
    found = {
        cause: _range(posterior, (cause,), noise) for cause in posterior.causes
    }  # fmt: skip
    leader = posterior.ranked[0]
    kept = min(_stays_ahead(posterior, noise, leader, rival) for rival in posterior.ranked[1:])
    firmness = "stable" if kept >= STABLE else "leaning" if kept >= LEANING else "open"
    return Sensitivity(
        found, _range(posterior, k.family("mains"), noise), kept, firmness,
        _hangs_on(posterior),
    )  # fmt: skip


def _score_variance(cause: str, observed: Sequence[Observed]) -> float:
    """Variance of the log score of one cause: its prior and its likelihoods, each on its own."""
    k = knowledge()
    total = k.prior_noise**2
    for each in observed:
        p = each.finding.likelihood[each.state][cause]
        total += (each.finding.tempering * (1 - p) * k.likelihood_noise) ** 2
    return total


def _range(posterior: Posterior, group: tuple[str, ...], noise: Mapping[str, float]) -> Range:
    """Range of the summed probability of a group, on the log-odds scale."""
    inside = math.fsum(posterior.of(c) for c in group)
    outside = 1 - inside
    if inside <= 0 or outside <= 1e-12:
        return Range(inside, inside, inside)
    variance = 0.0
    for cause in posterior.causes:
        share = posterior.of(cause) / (inside if cause in group else outside)
        variance += share**2 * noise[cause]
    odds, width = math.log(inside / outside), _Z90 * math.sqrt(variance)
    return Range(_logistic(odds - width), inside, _logistic(odds + width))


def _logistic(x: float) -> float:
    return 1 / (1 + math.exp(-x)) if x >= 0 else math.exp(x) / (1 + math.exp(x))


def _stays_ahead(
    posterior: Posterior, noise: Mapping[str, float], leader: str, rival: str
) -> float:
    first, second = posterior.of(leader), posterior.of(rival)
    if second <= 0:
        return 1.0
    return normal_cdf(math.log(first / second) / math.sqrt(noise[leader] + noise[rival]))


def _hangs_on(posterior: Posterior) -> tuple[str, ...]:
    lines = sorted(posterior.weights, key=lambda each: (-abs(each.decibans), each.label))
    return tuple(each.label for each in lines[:3])

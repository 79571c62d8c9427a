"""The release gate: how probable a mains fault could still be, by deterministic draws.

Computed only when everything else already allows release. The one place, outside the pattern
review, that needs NumPy; it is imported on reaching it.
"""

import hashlib
import math
from collections.abc import Mapping, Sequence
from functools import lru_cache
from typing import TYPE_CHECKING

from triage.diagnosis import Case, build_case, evaluate
from triage.knowledge import knowledge
from triage.told import Observed

if TYPE_CHECKING:
    from numpy import float64
    from numpy.typing import NDArray

    Draws = NDArray[float64]

DRAWS = 2000
UPPER_RANK = 1917
"""1-based rank, from below, of the draw that is the upper 95 % confidence limit of the 95th
percentile of 2000 draws: the smallest r with P(Binomial(2000, 0.95) < r) >= 0.95."""


def release_threshold(miss_ratio: int) -> float:
    """P(F) under which a release costs less than a hold, 1 / (1 + ratio).

    Args:
        miss_ratio: how many needless holds a missed fault weighs.

    Source:
        Expected cost of two actions; Pauker and Kassirer, NEJM 1980;302:1109.

    >>> round(release_threshold(100), 4)
    0.0099
    """
    return 1 / (1 + miss_ratio)


def upper_mains(
    priors: Mapping[str, float], observed: Sequence[Observed], factors: Mapping[str, float]
) -> float:
    """Upper confidence limit of the 95th percentile of P(F) over the deterministic draws.

    Args:
        priors: cause id to P(cause).
        observed: findings of the deciding set.
        factors: cause id to physics factor.

    Returns:
        P(F), to be held against the release threshold. The draws are counter-based on cause,
        finding, state and draw, so names and order of anything else never matter. NumPy is
        imported here only, and only when everything else already allows release.
    """
    import numpy as np

    k = knowledge()
    causes = tuple(k.causes)
    base = build_case(priors, observed, factors)
    logs = np.empty((len(causes), DRAWS))
    for i, cause in enumerate(causes):
        logs[i] = k.prior_noise * _normals("prior", cause, "")
    prior = np.array(base.prior)[:, None] * np.exp(logs)
    prior /= prior.sum(axis=0)
    told = {o.finding.id: _noisy(o.finding.id, o.state) for o in observed if not o.measured}
    measured = {o.finding.id: _noisy(o.finding.id, o.state) for o in observed if o.measured}
    story = _drawn_story(base, told, prior)
    passes = _drawn_passes(base, measured)
    raw = ((1 - k.wrong_story) * story + k.wrong_story * prior) * np.exp(passes)
    mains = [causes.index(c) for c in k.family("mains")]
    share = np.sort(raw[mains].sum(axis=0) / raw.sum(axis=0))
    return float(share[UPPER_RANK - 1])


def _drawn_story(base: Case, told: Mapping[str, "Draws"], prior: "Draws") -> "Draws":
    """q for every draw: physics and the told likelihoods by group, capped."""
    import numpy as np

    k = knowledge()
    logs = np.array(base.log_factor)[:, None] + np.zeros((1, DRAWS))
    for group in sorted(set(base.groups.values())):
        rows = [told[f] for f in sorted(told) if base.groups[f] == group]
        total = np.sum(rows, axis=0)
        logs = logs + np.maximum(total, total.max(axis=0) - k.cap_log)
    story = prior * np.exp(logs - logs.max(axis=0))
    share: Draws = story / story.sum(axis=0)
    return share


def _drawn_passes(base: Case, measured: Mapping[str, "Draws"]) -> "Draws":
    import numpy as np

    passes, rest = np.zeros((len(base.prior), DRAWS)), np.zeros((len(base.prior), DRAWS))
    for finding in sorted(measured):
        if finding in base.joint:
            passes = passes + measured[finding]
        else:
            rest = rest + measured[finding]
    if base.joint:
        passes = np.maximum(passes, np.array(base.floor)[:, None])
    both: Draws = passes + rest
    return both


@lru_cache(maxsize=128)
def _noisy(finding_id: str, seen: str) -> "Draws":
    """Tempered log likelihoods over causes and draws; noise before normalising over the states.

    The same for ever for one finding and state, so a batch of records draws it once.
    """
    import numpy as np

    finding, causes = knowledge().findings[finding_id], tuple(knowledge().causes)
    states = sorted(finding.likelihood)
    rows = np.empty((len(causes), DRAWS))
    for i, cause in enumerate(causes):
        weights = np.empty((len(states), DRAWS))
        for s, state in enumerate(states):
            p = finding.likelihood[state][cause]
            key = "yes" if set(states) == {"yes", "no"} else state
            sign = -1.0 if state == "no" and key == "yes" else 1.0
            logit = math.log(p / (1 - p)) + sign * knowledge().likelihood_noise * _normals(
                finding.id, cause, key
            )
            weights[s] = 1 / (1 + np.exp(-logit))
        tempered = (weights / weights.sum(axis=0)) ** finding.tempering
        rows[i] = np.log(tempered[states.index(seen)] / tempered.sum(axis=0))
    rows.setflags(write=False)
    return rows


def _normals(finding: str, cause: str, state: str) -> "Draws":
    """Standard normals of one stream: the same for ever for this cause, finding and state."""
    import numpy as np

    key = hashlib.sha256(f"{finding}\x1f{cause}\x1f{state}".encode()).digest()
    stream = np.random.Philox(key=int.from_bytes(key[:16], "big"))
    return np.random.Generator(stream).standard_normal(DRAWS)


def deciding_posterior(
    priors: Mapping[str, float], observed: Sequence[Observed], factors: Mapping[str, float]
) -> dict[str, float]:
    """P(cause) on the deciding set alone, without draws."""
    found = evaluate(build_case(priors, observed, factors))
    return dict(zip(knowledge().causes, found, strict=True))

"""What people notice of a discharge: felt, unpleasant, painful, heard, seen.

A spark from a body lasts about a microsecond, far less than nerves need to respond, so sensation
goes with the charge that passes, not with energy. Sound and light go with the voltage.
"""

from collections.abc import Callable
from math import log

from triage.bounds import Probability
from triage.estimate import Estimate
from triage.quadrature import normal_cdf

EPISTEMIC = (
    "model_doubt",
    "felt_threshold",
    "unpleasant_threshold",
    "painful_threshold",
    "heard_threshold",
    "seen_threshold",
)
"""Sources that better knowledge could remove; the rest is chance and people."""


def perceived(stimulus: Estimate, threshold: Estimate) -> Probability:
    """Probability that somebody notices, with the interval left by model and threshold doubt.

    Args:
        stimulus: charge [C] for felt, unpleasant, painful; voltage [V] for heard, seen.
        threshold: at which half of all people notice, spread over people and doubt, same unit.

    Source:
        Probit in ln of the charge, Finney, Probit Analysis; closed form for a mixture of
        lognormals.

    >>> charge = Estimate.lognormal(0.25e-6, {"q": 0.833}, "C")
    >>> limit = Estimate.lognormal(0.16e-6, {"spread_between_people": 0.45}, "C")
    >>> round(perceived(charge, limit).value, 3)
    0.681
    """
    return stimulus.over(threshold, "").chance_above(1.0, EPISTEMIC)


def after_noticing(quantity: Estimate, stimulus: Estimate, threshold: Estimate) -> Estimate:
    """A quantity of the discharge, given that somebody noticed it.

    Args:
        quantity: voltage, capacitance, charge or energy, on the sources of `stimulus`.
        stimulus: what was noticed, as in `perceived`.
        threshold: as in `perceived`; its spread must share no source with the stimulus.

    Raises:
        InvalidValue: noticing is impossible under the stimulus.
    """
    return quantity.given(_likelihood(threshold), stimulus)


def after_not_noticing(quantity: Estimate, stimulus: Estimate, threshold: Estimate) -> Estimate:
    """A quantity of the discharge, given that it was not noticed (not heard, not seen).

    Args:
        quantity: as in `after_noticing`.
        stimulus: what was not noticed.
        threshold: as in `perceived`.
    """
    noticed = _likelihood(threshold)
    return quantity.given(lambda x: 1 - noticed(x), stimulus)


def after_words(
    quantity: Estimate, charge: Estimate, between: tuple[float, float | None], spread: float
) -> Estimate:
    """A quantity of the discharge, given the words somebody chose for it.

    Args:
        quantity: as in `after_noticing`.
        charge: that passed [C].
        between: charges at which half of all people would already choose this word, and already
            a stronger one; 0 and None for no bound [C].
        spread: ln-spread of people in that choice; the threshold's own doubt belongs in it.

    Source:
        Ordered probit, McCullagh, J. R. Statist. Soc. B 42 (1980) 109-142.
    """
    low, high = between

    def chosen(x: float) -> float:
        reached = normal_cdf((x - log(low)) / spread) if low > 0 else 1.0
        passed = normal_cdf((x - log(high)) / spread) if high is not None else 0.0
        return max(reached - passed, 0.0)

    return quantity.given(chosen, charge)


def _likelihood(threshold: Estimate) -> Callable[[float], float]:
    """Probability of noticing at a given ln stimulus."""
    middle, spread = log(threshold.median), threshold.spread
    return lambda x: normal_cdf((x - middle) / spread)

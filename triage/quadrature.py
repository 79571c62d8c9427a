"""Integration against the standard normal law: distribution function, quantile, node sets.

Pure Python and cached, because a single incident must not wait for a numerical library.
"""

from functools import cache
from math import erfc, exp, log, pi, pow, sqrt

from triage.errors import InvalidValue

NodeSet = tuple[tuple[float, float], ...]
"""Pairs (weight, position in standard deviations); the weights sum to 1."""


def normal_density(z: float) -> float:
    """Density of the standard normal law at z standard deviations."""
    return exp(-0.5 * z * z) / sqrt(2 * pi)


def normal_cdf(z: float) -> float:
    """Probability that a standard normal lies below z.

    >>> round(normal_cdf(1.6448536), 6)
    0.95
    """
    return 0.5 * erfc(-z / sqrt(2))


def normal_quantile(p: float) -> float:
    """The z below which a standard normal lies with probability p, for 0 < p < 1.

    Raises:
        InvalidValue: p is not strictly between 0 and 1.

    Source:
        Start: Abramowitz and Stegun, Handbook of Mathematical Functions, 26.2.22 (within 3e-3);
        then three Halley steps.

    >>> round(normal_quantile(0.975), 9)
    1.959963985
    """
    if not 0 < p < 1:
        raise InvalidValue(f"a quantile needs a probability between 0 and 1, got {p!r}")
    if p > 0.5:
        return -normal_quantile(1 - p)
    t = sqrt(-2 * log(p))
    z = (2.30753 + 0.27061 * t) / (1 + 0.99229 * t + 0.04481 * t * t) - t
    for _ in range(3):
        step = (normal_cdf(z) - p) / normal_density(z)
        z -= step / (1 + z * step / 2)
    return z


@cache
def gauss_hermite(order: int) -> NodeSet:
    """Nodes that integrate polynomials up to degree 2 order - 1 exactly against the normal law.

    Source:
        Press and others, Numerical Recipes, 4.5: starting points for the roots, then Newton on
        the normalised polynomial; rescaled from exp(-x^2) to the normal density.

    >>> [round(z, 4) for w, z in gauss_hermite(3)]
    [-1.7321, 0.0, 1.7321]
    """
    if order < 1:
        raise InvalidValue(f"a node set needs at least 1 node, got {order}")
    roots: list[float] = []
    for i in range((order + 1) // 2):
        z = _hermite_start(order, i, roots)
        for _ in range(8):
            value, below = _hermite(order, z)
            z -= value / (sqrt(order) * below)
        roots.append(z)
    right = [(1 / (order * _hermite(order, z)[1] ** 2), z) for z in roots]
    if order % 2:
        right[-1] = (right[-1][0], 0.0)
    left = [(w, -z) for w, z in right if z > 0]
    return (*left, *reversed(right))


def _hermite_start(order: int, i: int, roots: list[float]) -> float:
    """A point near the i-th root from the right, given the roots already found."""
    if i == 0:
        edge = sqrt(2 * order + 1) - 1.85575 * pow(2 * order + 1, -1 / 6)
        return sqrt(2) * edge
    if i == 1:
        return roots[0] - 2 * 1.14 * pow(order, 0.426) / roots[0]
    if i == 2:
        return 1.86 * roots[1] - 0.86 * roots[0]
    if i == 3:
        return 1.91 * roots[2] - 0.91 * roots[1]
    return 2 * roots[-1] - roots[-2]


def _hermite(order: int, z: float) -> tuple[float, float]:
    """Normalised Hermite polynomials of degree `order` and `order - 1` at z."""
    below, here = 0.0, 1.0
    for k in range(order):
        below, here = here, (z * here - sqrt(k) * below) / sqrt(k + 1)
    return here, below

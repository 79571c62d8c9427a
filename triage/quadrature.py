"""Integration against the standard normal law: distribution function, quantile, node sets.

Pure Python and cached, because a single incident must not wait for a numerical library.
"""

from collections.abc import Sequence
from functools import cache
from math import cos, erfc, exp, log, pi, pow, sqrt

from triage.errors import InvalidValue

NodeSet = tuple[tuple[float, float], ...]
"""Pairs (weight, position in standard deviations); the weights sum to 1."""

FAR = 8.5
"""Standard deviations beyond which the normal law holds less than 1e-16 and is cut off."""


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


@cache
def gauss_legendre(order: int) -> NodeSet:
    """Nodes on -1 to 1 with weights that sum to 1 (half the usual ones).

    Source:
        Press and others, Numerical Recipes, 4.5 (Newton from the cosine start).

    >>> round(sum(w * x * x for w, x in gauss_legendre(4)), 12)  # mean of x^2 is 1/3
    0.333333333333
    """
    found = []
    for i in range(order):
        x = cos(pi * (i + 0.75) / (order + 0.5))
        for _ in range(6):
            value, slope = _legendre(order, x)
            x -= value / slope
        slope = _legendre(order, x)[1]
        found.append((1 / ((1 - x * x) * slope * slope), x))
    return tuple(found)


def _legendre(order: int, x: float) -> tuple[float, float]:
    """Legendre polynomial of degree `order` and its slope at x."""
    below, here = 1.0, x
    for k in range(2, order + 1):
        below, here = here, ((2 * k - 1) * x * here - (k - 1) * below) / k
    return here, order * (x * here - below) / (x * x - 1)


def split_normal(kinks: Sequence[float], order: int) -> NodeSet:
    """Nodes for the normal law when the integrand bends at known positions.

    Args:
        kinks: positions in standard deviations; none of them lies inside a panel afterwards.
        order: nodes in each panel.

    >>> nodes = split_normal((0.5,), 16)
    >>> round(sum(w * max(z - 0.5, 0) for w, z in nodes), 9)  # density - 0.5 (1 - cdf)
    0.197796557
    """
    inside = sorted(k for k in kinks if -FAR < k < FAR)
    edges = sorted({-FAR, -3.0, 0.0, 3.0, FAR, *inside})
    nodes = [
        ((b - a) * w * normal_density(z), z)
        for a, b in zip(edges, edges[1:], strict=False)
        for w, x in gauss_legendre(order)
        for z in ((a + b) / 2 + (b - a) / 2 * x,)
    ]
    total = sum(w for w, _ in nodes)
    return tuple((w / total, z) for w, z in nodes)

"""Common grids: bring several mixtures of lognormals onto the same nodes.

A mixture has nodes along orthonormal axes in the space of named standard normal sources, and
lognormal loadings that never point along an axis. Joining two mixtures keeps shared axes, takes
the product of the others, and moves any lognormal part that points along an axis into the nodes.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from math import ceil, sqrt
from operator import mul
from typing import Protocol

from triage.quadrature import gauss_hermite

Axis = tuple[tuple[str, float], ...]
"""Unit direction in the space of named sources: (name, component), sorted by name."""

Loadings = Mapping[str, float]
"""d ln value / d source for each name."""

NEGLIGIBLE = 1e-8
"""Nodes lighter than this are dropped and the rest reweighted."""


WIDE = 2.0
"""Width in ln value up to which a smooth bend needs no more than the nodes asked for."""


class Mixture(Protocol):
    """What a grid needs to know of an estimate."""

    @property
    def weights(self) -> tuple[float, ...]:
        """Weight of each node; they sum to 1."""

    @property
    def logs(self) -> tuple[float, ...]:
        """Ln value at each node."""

    @property
    def loadings(self) -> Loadings:
        """Lognormal part, the same in every node."""

    @property
    def axes(self) -> tuple[Axis, ...]:
        """Directions resolved by the nodes."""

    @property
    def coordinates(self) -> tuple[tuple[float, ...], ...]:
        """For each axis the position of every node."""

    def flattened(self) -> "Mixture":
        """A lognormal with the same mean, variance and slopes."""


@dataclass(frozen=True, slots=True)
class Joint:
    """Several mixtures on one grid: `logs` and `loadings` hold one entry for each of them."""

    weights: tuple[float, ...]
    logs: tuple[tuple[float, ...], ...]
    loadings: tuple[Loadings, ...]
    axes: tuple[Axis, ...]
    coordinates: tuple[tuple[float, ...], ...]


def join(first: Mixture, *others: Mixture) -> Joint:
    """Put all mixtures on one grid."""
    joint = Joint(first.weights, (first.logs,), (first.loadings,), first.axes, first.coordinates)
    for other in others:
        joint = _merge(joint, other)
    return joint


def refined(joint: Joint, order: int) -> Joint:
    """Resolve every direction that the lognormal parts span.

    Args:
        joint: the grid before.
        order: nodes for a direction of at most `WIDE` standard deviations of ln value; wider
            ones get more in proportion.
    """
    new, parts = _orthonormal(joint.loadings)
    widths = [max(abs(part[k]) for part in parts) for k in range(len(new))]
    shares, positions = _tensor([ceil(order * max(w / WIDE, 1.0)) for w in widths])
    meet = [
        (i, g)
        for i, w in enumerate(joint.weights)
        for g, share in enumerate(shares)
        if w * share > NEGLIGIBLE
    ]
    logs = []
    for column, part in zip(joint.logs, parts, strict=True):
        moves = [sum(map(mul, part, z)) for z in positions]
        logs.append(tuple([column[i] + moves[g] for i, g in meet]))
    weights = [joint.weights[i] * shares[g] for i, g in meet]
    total = sum(weights)
    old = tuple(tuple([z[i] for i, _ in meet]) for z in joint.coordinates)
    added = tuple(tuple([positions[g][k] for _, g in meet]) for k in range(len(new)))
    return Joint(
        tuple([w / total for w in weights]),
        tuple(logs),
        tuple({} for _ in joint.loadings),
        joint.axes + new,
        old + added,
    )


def reweighted(joint: Joint, likelihoods: Sequence[float]) -> Joint:
    """The grid after an observation, without the nodes it leaves negligible.

    Args:
        joint: the grid before.
        likelihoods: probability of the observation at each node, not all 0.
    """
    weights = list(map(mul, joint.weights, likelihoods))
    total = sum(weights)
    kept = [i for i, w in enumerate(weights) if w > NEGLIGIBLE * total]
    return Joint(
        tuple([weights[i] / total for i in kept]),
        tuple(tuple([x[i] for i in kept]) for x in joint.logs),
        joint.loadings,
        joint.axes,
        tuple(tuple([z[i] for i in kept]) for z in joint.coordinates),
    )


def _merge(joint: Joint, other: Mixture) -> Joint:
    """Add one mixture; where two grids do not fit together the new one is flattened first."""
    if not joint.axes:
        spread_out = tuple(x * len(other.weights) for x in joint.logs)
        grid = Joint(other.weights, (), joint.loadings, other.axes, other.coordinates)
        return _settled(grid, (*spread_out, other.logs), other.loadings)
    if not other.axes or (joint.axes == other.axes and joint.coordinates == other.coordinates):
        column = other.logs if other.axes else other.logs * len(joint.weights)
        return _settled(joint, (*joint.logs, column), other.loadings)
    pairs = _pairs(joint, other)
    if pairs is None:
        return _merge(joint, other.flattened())
    return _crossed(joint, other, pairs)


def _crossed(joint: Joint, other: Mixture, pairs: list[tuple[int, int, float]]) -> Joint:
    """The grid of the node pairs that meet."""
    fresh = [k for k, axis in enumerate(other.axes) if axis not in joint.axes]
    total = sum([w for _, _, w in pairs])
    grid = Joint(
        tuple([w / total for _, _, w in pairs]),
        (),
        joint.loadings,
        joint.axes + tuple(other.axes[k] for k in fresh),
        tuple(tuple([z[i] for i, _, _ in pairs]) for z in joint.coordinates)
        + tuple(tuple([other.coordinates[k][j] for _, j, _ in pairs]) for k in fresh),
    )
    logs = tuple(tuple([x[i] for i, _, _ in pairs]) for x in joint.logs)
    return _settled(grid, (*logs, tuple([other.logs[j] for _, j, _ in pairs])), other.loadings)


def _settled(grid: Joint, logs: tuple[tuple[float, ...], ...], loadings: Loadings) -> Joint:
    """Move what points along an axis from the lognormal parts into the nodes."""
    moved: list[tuple[float, ...]] = []
    rest: list[Loadings] = []
    for column, each in zip(logs, (*grid.loadings, loadings), strict=True):
        left = dict(each)
        for axis, positions in zip(grid.axes, grid.coordinates, strict=True):
            along = sum([each.get(name, 0.0) * c for name, c in axis])
            if abs(along) > 1e-14:
                column = tuple([x + along * z for x, z in zip(column, positions, strict=True)])
                for name, c in axis:
                    left[name] = left.get(name, 0.0) - along * c
        moved.append(column)
        rest.append({name: s for name, s in left.items() if abs(s) > 1e-13})
    return Joint(grid.weights, tuple(moved), tuple(rest), grid.axes, grid.coordinates)


def _pairs(joint: Joint, other: Mixture) -> list[tuple[int, int, float]] | None:
    """Which nodes meet, and with what weight; None if the grids do not fit together."""
    new = [axis for axis in other.axes if axis not in joint.axes]
    if any(abs(_dot(dict(a), dict(b))) > 1e-12 for a in joint.axes for b in new):
        return None
    shared = [axis for axis in other.axes if axis in joint.axes]
    theirs = _keys([other.coordinates[other.axes.index(a)] for a in shared], len(other.weights))
    mine = _keys([joint.coordinates[joint.axes.index(a)] for a in shared], len(joint.weights))
    groups: dict[tuple[float, ...], list[int]] = {}
    for j, key in enumerate(theirs):
        groups.setdefault(key, []).append(j)
    if not all(key in groups for key in mine):
        return None
    totals = {key: sum([other.weights[j] for j in group]) for key, group in groups.items()}
    return [
        (i, j, w * other.weights[j] / totals[key])
        for i, (w, key) in enumerate(zip(joint.weights, mine, strict=True))
        for j in groups[key]
        if len(groups[key]) == 1 or w * other.weights[j] > NEGLIGIBLE * totals[key]
    ]


def _keys(columns: list[tuple[float, ...]], count: int) -> list[tuple[float, ...]]:
    """The position of every node along some axes."""
    return list(zip(*columns, strict=True)) if columns else [()] * count


def _orthonormal(parts: Sequence[Loadings]) -> tuple[tuple[Axis, ...], list[tuple[float, ...]]]:
    """Gram-Schmidt: the directions that lognormal parts span, and each part's components."""
    found: list[dict[str, float]] = []
    for part in parts:
        left = dict(part)
        for axis in found:
            c = _dot(left, axis)
            left = {n: left.get(n, 0.0) - c * axis.get(n, 0.0) for n in left | axis}
        length = sqrt(_dot(left, left))
        if length > 1e-9:
            found.append({n: s / length for n, s in sorted(left.items()) if s})
    components = [tuple(_dot(part, axis) for axis in found) for part in parts]
    return tuple(tuple(axis.items()) for axis in found), components


def _tensor(orders: Sequence[int]) -> tuple[list[float], list[tuple[float, ...]]]:
    """Product of one-dimensional node sets without its negligible corners."""
    grid: list[tuple[float, tuple[float, ...]]] = [(1.0, ())]
    for order in orders:
        grid = [
            (w * v, (*point, z))
            for w, point in grid
            for v, z in gauss_hermite(order)
            if w * v > NEGLIGIBLE
        ]
    return [w for w, _ in grid], [point for _, point in grid]


def _dot(a: Loadings, b: Loadings) -> float:
    return sum([s * b.get(name, 0.0) for name, s in a.items()])

"""Estimate: a positive quantity with its doubt, spread over *named* sources.

An estimate is a weighted mixture of lognormals of equal spread. Every source of doubt is an
independent standard normal with a name; two estimates that share a name stay correlated, so
charge, voltage and energy of one person, or two arms of a comparison, move together.

The mixture has nodes along *axes*, directions in the space of named sources that a non-linear
formula has resolved; what is left is lognormal, with one loading (d ln value / dz) for each name.
Loadings never point along an axis. Products and powers are exact; `through` resolves as many
directions as its formula has arguments, whatever the number of names.

Known zero, "less than" and unknown are never estimates: see `bounds.py`.
"""

from bisect import bisect
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from math import copysign, erfc, exp, isfinite, log, pi, sqrt
from operator import mul

from triage.bounds import Basis, Probability
from triage.errors import InvalidValue
from triage.grid import Axis, Joint, join, refined, reweighted
from triage.quadrature import normal_cdf, normal_quantile

NARROW = 1e-3
"""A lognormal part below this share of the whole spread is not seen between the nodes."""


@dataclass(frozen=True, slots=True)
class Estimate:
    """A positive quantity with its doubt; build it with `lognormal` or `exact`.

    Args:
        unit: SI symbol.
        weights: of the nodes; they sum to 1.
        logs: ln value at each node.
        loadings: d ln value / d source, for what is lognormal inside every node.
        axes: directions resolved by the nodes, orthonormal.
        coordinates: for each axis the position of every node, in standard deviations.
        basis: origin of each named source.
    """

    unit: str
    weights: tuple[float, ...]
    logs: tuple[float, ...]
    loadings: Mapping[str, float] = field(default_factory=dict)
    axes: tuple[Axis, ...] = ()
    coordinates: tuple[tuple[float, ...], ...] = ()
    basis: Mapping[str, Basis] = field(default_factory=dict)

    @classmethod
    def lognormal(
        cls,
        median: float,
        spreads: Mapping[str, float],
        unit: str,
        basis: Mapping[str, Basis] | None = None,
    ) -> "Estimate":
        """A lognormal of the given median.

        Args:
            median: [unit], above 0.
            spreads: for each named source ln of its geometric standard deviation (signed: how
                the value moves when that source rises by one standard deviation).
            unit: SI symbol.
            basis: origin of each named source.

        Raises:
            InvalidValue: the median is not above 0 or a spread is not finite.

        >>> round(Estimate.lognormal(130e-12, {"capacitance": 0.3}, "F").median * 1e12, 6)  # pF
        130.0
        """
        if not (median > 0 and isfinite(median)):
            raise InvalidValue(f"an estimate needs a value above 0, got {median!r} {unit}")
        if not all(map(isfinite, spreads.values())):
            raise InvalidValue(f"spreads must be finite, got {dict(spreads)!r}")
        kept = {name: s for name, s in spreads.items() if s}
        return cls(unit, (1.0,), (log(median),), kept, basis=basis or {})

    @classmethod
    def exact(cls, value: float, unit: str) -> "Estimate":
        """A value without doubt, above 0."""
        return cls.lognormal(value, {}, unit)

    @property
    def nodes(self) -> tuple[tuple[float, float], ...]:
        """Pairs (weight, ln value)."""
        return tuple(zip(self.weights, self.logs, strict=True))

    @property
    def scores(self) -> dict[str, tuple[float, ...]]:
        """For each name on an axis its mean position at every node, in standard deviations."""
        found: dict[str, tuple[float, ...]] = {}
        for axis, positions in zip(self.axes, self.coordinates, strict=True):
            for name, component in axis:
                before = found.get(name, (0.0,) * len(positions))
                moved = zip(before, positions, strict=True)
                found[name] = tuple([b + component * z for b, z in moved])
        return found

    # Arithmetic -------------------------------------------------------------------------------

    def times(self, other: "Estimate", unit: str) -> "Estimate":
        """The product, in `unit`; shared sources add before they spread."""
        return product(unit, self, other)

    def over(self, other: "Estimate", unit: str) -> "Estimate":
        """The quotient, in `unit`; shared sources cancel."""
        return product(unit, self, other.power(-1, unit))

    def power(self, exponent: float, unit: str) -> "Estimate":
        """The value raised to a power, in `unit`."""
        return replace(
            self,
            unit=unit,
            logs=tuple([exponent * x for x in self.logs]),
            loadings={n: exponent * s for n, s in self.loadings.items() if exponent * s},
        )

    def scaled(self, factor: float, unit: str | None = None) -> "Estimate":
        """The value times an exact number above 0."""
        if not factor > 0:
            raise InvalidValue(f"an estimate can be scaled by a factor above 0, got {factor!r}")
        shift = log(factor)
        return replace(self, unit=unit or self.unit, logs=tuple([x + shift for x in self.logs]))

    def known(self, names: Iterable[str]) -> "Estimate":
        """The estimate if these lognormal sources sat at their median.

        Raises:
            InvalidValue: one of them has been resolved by a non-linear formula.
        """
        gone = set(names)
        resolved = gone & {name for axis in self.axes for name, _ in axis}
        if resolved:
            raise InvalidValue(f"already resolved: {', '.join(sorted(resolved))}")
        kept = {name: s for name, s in self.loadings.items() if name not in gone}
        return replace(self, loadings=kept)

    def given(self, likelihood: Callable[[float], float], of: "Estimate") -> "Estimate":
        """This estimate after an observation; do it last, when everything else is combined.

        Args:
            likelihood: probability of the observation at a given ln value of `of`, in [0, 1].
            of: the quantity the observation depends on; its lognormal part is resolved.

        Raises:
            InvalidValue: the observation is impossible everywhere.
        """
        grid = refined(join(of), order=12 if of.axes else 40)
        seen = _on(grid, of.unit, grid.logs[0], {}, of.basis)
        joint = join(seen, self)
        likelihoods = [likelihood(x) for x in joint.logs[0]]
        if not sum(map(mul, joint.weights, likelihoods)) > 0:
            raise InvalidValue("the observation is impossible under this estimate")
        after = reweighted(joint, likelihoods)
        return _on(after, self.unit, after.logs[1], after.loadings[1], self.basis)

    # Questions --------------------------------------------------------------------------------

    @property
    def spread(self) -> float:
        """Standard deviation of ln value inside each node."""
        return sqrt(sum(s * s for s in self.loadings.values()))

    @property
    def mean_log(self) -> float:
        """Mean of ln value."""
        return sum([w * x for w, x in self.nodes])

    @property
    def variance_log(self) -> float:
        """Variance of ln value over all sources."""
        mean = self.mean_log
        return sum([w * (x - mean) ** 2 for w, x in self.nodes]) + self.spread**2

    @property
    def median(self) -> float:
        """Value exceeded with probability 1/2 [unit]."""
        return self.quantile(0.5)

    def probability_above(self, value: float) -> float:
        """Probability that the quantity exceeds `value` [unit]."""
        return self.probit(value, 0.0)

    def probit(self, median_threshold: float, spread: float) -> float:
        """Probability that the quantity exceeds a threshold that is itself lognormal.

        Args:
            median_threshold: [unit]; at or below 0 it is always exceeded.
            spread: ln of the threshold's geometric standard deviation.
        """
        if median_threshold <= 0:
            return 1.0
        at, total = log(median_threshold), sqrt(2 * (self.spread**2 + spread**2))
        if total <= NARROW * sqrt(self.variance_log):
            return 1 - normal_cdf(_interpolated(at, _steps(self.nodes), 1, 0))
        return 0.5 * sum([w * erfc((at - x) / total) for w, x in self.nodes])

    def quantile(self, p: float) -> float:
        """Value below which the quantity lies with probability p [unit]."""
        z = normal_quantile(p)
        if len(self.logs) == 1:
            return exp(self.logs[0] + z * self.spread)
        spread = sqrt(self.variance_log)
        if self.spread <= NARROW * spread:
            return exp(_interpolated(z, _steps(self.nodes), 0, 1))
        return exp(self._solve(p, self.mean_log + z * spread))

    def _solve(self, p: float, at: float) -> float:
        """ln of a quantile: Newton from `at` inside a bracket that shrinks at every step."""
        low = min(self.logs) - 9 * self.spread
        high = max(self.logs) + 9 * self.spread
        scale, nodes = sqrt(0.5) / self.spread, self.nodes
        for _ in range(80):
            if not low < at < high:
                at = (low + high) / 2
            offsets = [(w, (x - at) * scale) for w, x in nodes]
            excess = 0.5 * sum([w * erfc(z) for w, z in offsets]) - p
            low, high = (at, high) if excess < 0 else (low, at)
            density = scale * sum([w * exp(-z * z) for w, z in offsets if -26 < z < 26])
            step = excess * sqrt(pi) / density if density > 0 else high - low
            at -= step
            if abs(step) < 1e-8:
                break
        return at

    def interval(self, level: float = 0.9) -> tuple[float, float]:
        """Equal-tailed interval that holds the quantity with probability `level` [unit]."""
        return self.quantile((1 - level) / 2), self.quantile((1 + level) / 2)

    def chance_above(self, value: float, epistemic: Sequence[str] = ()) -> Probability:
        """Probability of exceeding `value`, with the doubt that further knowledge could remove.

        Args:
            value: [unit], above 0.
            epistemic: names whose 5 and 95 % points give the interval; lognormal sources only.
        """
        doubt = sqrt(sum(self.loadings.get(name, 0.0) ** 2 for name in epistemic))
        rest = self.known(epistemic)
        shift = exp(normal_quantile(0.95) * doubt)
        low, high = rest.probability_above(value * shift), rest.probability_above(value / shift)
        return Probability(self.probability_above(value), low, high, self.basis)

    def contributions(self) -> dict[str, float]:
        """Share of the variance of ln value that each name explains linearly, largest first.

        What no name explains alone stands under `interaction`; the shares sum to 1. Exact for a
        lognormal; not meaningful after `given`.
        """
        total = self.variance_log
        if total == 0:
            return {}
        shares = {name: c * c / total for name, c in self._slopes().items()}
        if self.axes:
            shares["interaction"] = max(1 - sum(shares.values()), 0.0)
        return dict(sorted(shares.items(), key=lambda item: -item[1]))

    def flattened(self) -> "Estimate":
        """The lognormal with the same mean and variance of ln value and the same slopes.

        What is not linear in any name becomes a source of its own.
        """
        slopes = self._slopes()
        rest = self.variance_log - sum(c * c for c in slopes.values())
        own = f"interaction of {', '.join(sorted(slopes))}"
        spreads = {**slopes, own: sqrt(max(rest, 0.0))}
        return Estimate.lognormal(exp(self.mean_log), spreads, self.unit, self.basis)

    def _slopes(self) -> dict[str, float]:
        """Covariance of ln value with each named source."""
        slopes = dict(self.loadings)
        for name, positions in self.scores.items():
            along = sum([w * x * z for (w, x), z in zip(self.nodes, positions, strict=True)])
            slopes[name] = slopes.get(name, 0.0) + along
        return slopes


def _on(
    grid: Joint,
    unit: str,
    logs: tuple[float, ...],
    loadings: Mapping[str, float],
    basis: Mapping[str, Basis],
) -> Estimate:
    """An estimate on a given grid."""
    return Estimate(unit, grid.weights, logs, loadings, grid.axes, grid.coordinates, basis)


def _checked(estimates: Sequence[Estimate]) -> dict[str, Basis]:
    """Merged basis; anything that is not an estimate is refused."""
    for each in estimates:
        if not isinstance(each, Estimate):
            raise TypeError(f"{type(each).__name__} is not an estimate and cannot be combined")
    return {name: b for each in estimates for name, b in each.basis.items()}


def product(unit: str, *estimates: Estimate) -> Estimate:
    """The product of several estimates, in `unit`, on one grid."""
    basis = _checked(estimates)
    joint = join(*estimates)
    logs = tuple(map(sum, zip(*joint.logs, strict=True)))
    loadings: dict[str, float] = {}
    for part in joint.loadings:
        for name, s in part.items():
            loadings[name] = loadings.get(name, 0.0) + s
    kept = {name: s for name, s in loadings.items() if abs(s) > 1e-13}
    return _on(joint, unit, logs, kept, basis)


def through(
    log_function: Callable[..., float], *estimates: Estimate, unit: str, order: int = 8
) -> Estimate:
    """A non-linear result, by Gauss-Hermite nodes along the directions the arguments span.

    Args:
        log_function: ln of the result from the ln of each argument.
        estimates: the arguments. Write the formula in ratios: what enters as a plain factor is
            better multiplied on afterwards, where it stays lognormal and costs no nodes.
        unit: of the result.
        order: nodes for each new direction.

    >>> r = Estimate.lognormal(1.0, {"a": 1.0}, "")
    >>> round(through(lambda x: 2 * x, r, unit="").variance_log, 6)
    4.0
    """
    basis = _checked(estimates)
    grid = refined(join(*estimates), order)
    return _on(grid, unit, tuple(map(log_function, *grid.logs)), {}, basis)


def _steps(nodes: Sequence[tuple[float, float]]) -> list[tuple[float, float]]:
    """A mixture without width as points (normal score, ln value), one a step, in order."""
    done, points = 0.0, []
    for w, x in sorted(nodes, key=lambda node: node[1]):
        points.append((normal_quantile(min(max(done + w / 2, 1e-15), 1 - 1e-15)), x))
        done += w
    return points


def _interpolated(at: float, points: list[tuple[float, float]], of: int, to: int) -> float:
    """Straight lines between the steps on normal probability paper, extended at both ends."""
    if len(points) == 1:
        return points[0][to] if to else copysign(9.0, at - points[0][of])
    k = min(max(bisect([p[of] for p in points], at), 1), len(points) - 1)
    (a, b), width = (points[k - 1], points[k]), points[k][of] - points[k - 1][of]
    share = (at - a[of]) / width if width > 0 else 0.5
    return a[to] + share * (b[to] - a[to])

"""Node voltages of any small network of admittances and ideal sources, in complex phasors.

Nodes held apart by ideal sources move together: each such group has one unknown voltage and one
current balance, solved by dense elimination in plain Python. The unknown of a group is the voltage
of its stiffest node, so that a nearly earthed line keeps all its digits. `EARTH` is the reference.
"""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from triage.errors import InvalidValue

EARTH = "earth"
"""Name of the reference node, at 0 V."""

Tie = tuple[str, str, complex]
"""Admittance [S] between two named nodes."""

Emf = tuple[str, str, complex]
"""Ideal source: first node stands this voltage [V] above the second. 0 V is a short."""


@dataclass(frozen=True, slots=True)
class Solution:
    """Result of one network.

    Args:
        voltages: of every node that some path joins to earth [V]; others float undefined.
        currents: out of the first node of each source into the network, in the order given [A];
            0 for a source no path joins to earth.
    """

    voltages: dict[str, complex]
    currents: tuple[complex, ...]

    def between(self, first: str, second: str) -> complex:
        """Voltage of the first node above the second [V].

        Raises:
            InvalidValue: one of them is joined to nothing.
        """
        try:
            return self.voltages[first] - self.voltages[second]
        except KeyError as error:
            raise InvalidValue(f"node {error} is joined to nothing that fixes it") from None


def solve(ties: Sequence[Tie], emfs: Sequence[Emf]) -> Solution:
    """Solve one network.

    Args:
        ties: admittances; those of 0 S are no path.
        emfs: ideal sources.

    Returns:
        Node voltages and source currents.

    Raises:
        InvalidValue: sources form a loop, or admittances cancel.

    >>> found = solve([("a", "earth", 1e-3), ("a", "b", 1e-3)], [("b", "earth", 10)])
    >>> round(abs(found.voltages["a"]), 9), round(abs(found.currents[0]), 9)
    (5.0, 0.005)
    """
    live = [tie for tie in ties if tie[2] != 0]
    forest = _grow(live, emfs)
    unknowns = _reached(live, forest)
    rows = [[0j] * (len(unknowns) + 1) for _ in unknowns]
    for tie in live:
        _stamp(rows, unknowns, forest, tie)
    found = _eliminate(rows)
    voltages = {
        node: offset + (found[unknowns[root]] if root != EARTH else 0)
        for node, (root, offset, _) in forest.items()
        if root == EARTH or root in unknowns
    }
    return Solution(voltages, _source_currents(live, emfs, forest, voltages))


# Node -> (root of its group, voltage above the root, the sources on the way from the root).
_Forest = dict[str, tuple[str, complex, tuple[int, ...]]]


def _grow(ties: Iterable[Tie], emfs: Sequence[Emf]) -> _Forest:
    """Groups of nodes held apart by sources, each grown from its stiffest node."""
    stiffness: dict[str, float] = {}
    for a, b, admittance in ties:
        for node in (a, b):
            stiffness[node] = stiffness.get(node, 0.0) + abs(admittance)
    joined: dict[str, list[tuple[int, str, complex]]] = {}
    for k, (plus, minus, volts) in enumerate(emfs):
        joined.setdefault(plus, []).append((k, minus, -volts))
        joined.setdefault(minus, []).append((k, plus, volts))
        stiffness.setdefault(plus, 0.0)
        stiffness.setdefault(minus, 0.0)
    stiffness[EARTH] = float("inf")
    forest: _Forest = {}
    for root in sorted(stiffness, key=stiffness.__getitem__, reverse=True):
        if root not in forest:
            forest[root] = (root, 0j, ())
            _grow_from(root, joined, forest)
    return forest


def _grow_from(
    root: str, joined: dict[str, list[tuple[int, str, complex]]], forest: _Forest
) -> None:
    waiting = [root]
    while waiting:
        node = waiting.pop()
        _, offset, way = forest[node]
        for k, other, step in joined.get(node, ()):
            if way and way[-1] == k:
                continue
            if other in forest:
                raise InvalidValue("ideal sources form a loop")
            forest[other] = (root, offset + step, (*way, k))
            waiting.append(other)


def _reached(ties: Iterable[Tie], forest: _Forest) -> dict[str, int]:
    """Roots of the groups that some path joins to earth, numbered."""
    neighbours: dict[str, list[str]] = {EARTH: []}
    for a, b, _ in ties:
        one, two = forest[a][0], forest[b][0]
        neighbours.setdefault(one, []).append(two)
        neighbours.setdefault(two, []).append(one)
    found = {EARTH}
    waiting = [EARTH]
    while waiting:
        for root in neighbours[waiting.pop()]:
            if root not in found:
                found.add(root)
                waiting.append(root)
    # Groups with few neighbours first: a supply line with many devices is then eliminated last
    # and no device is mixed with another.
    ordered = sorted(
        (root for root in neighbours if root in found and root != EARTH),
        key=lambda root: len(neighbours[root]),
    )
    return {root: k for k, root in enumerate(ordered)}


def _stamp(rows: list[list[complex]], unknowns: dict[str, int], forest: _Forest, tie: Tie) -> None:
    """Add one admittance to the current balances of the two groups it joins."""
    (one, above_one, _), (two, above_two, _) = forest[tie[0]], forest[tie[1]]
    if one == two:
        return
    i, j = unknowns.get(one, -1), unknowns.get(two, -1)
    admittance = tie[2]
    driven = admittance * (above_one - above_two)
    if i >= 0:
        rows[i][i] += admittance
        rows[i][-1] -= driven
    if j >= 0:
        rows[j][j] += admittance
        rows[j][-1] += driven
    if i >= 0 and j >= 0:
        rows[i][j] -= admittance
        rows[j][i] -= admittance


def _source_currents(
    ties: Iterable[Tie], emfs: Sequence[Emf], forest: _Forest, voltages: dict[str, complex]
) -> tuple[complex, ...]:
    """Current out of the first node of each source, from what leaves the nodes on one side."""
    leaving = dict.fromkeys(voltages, 0j)
    for a, b, admittance in ties:
        if a in voltages:
            current = admittance * (voltages[a] - voltages[b])
            leaving[a] += current
            leaving[b] -= current
    currents = []
    for k, (plus, minus, _) in enumerate(emfs):
        root = forest[plus][0]
        behind = plus if k in forest[plus][2] else minus
        # Seen from earth, the near side holds no current that only circulates in the supply.
        far = root != EARTH
        total = sum(
            leaving.get(node, 0j)
            for node, (group, _, way) in forest.items()
            if group == root and (k in way) == far
        )
        currents.append(total if (behind == plus) == far else -total)
    return tuple(currents)


def _eliminate(rows: list[list[complex]]) -> list[complex]:
    """Gaussian elimination with partial pivoting; `rows` is used up."""
    size = len(rows)
    for k in range(size):
        best = _largest(rows, k)
        pivot = rows[best]
        if abs(pivot[k]) < 1e-18:
            raise InvalidValue("admittances cancel and leave a node undefined")
        rows[best], rows[k] = rows[k], pivot
        filled = [(j, pivot[j]) for j in range(k + 1, size + 1) if pivot[j]]
        for i in range(k + 1, size):
            row = rows[i]
            if row[k]:
                factor = row[k] / pivot[k]
                for j, value in filled:
                    row[j] -= factor * value
    values = [0j] * size
    for k in reversed(range(size)):
        row = rows[k]
        total = row[size]
        for j in range(k + 1, size):
            total -= row[j] * values[j]
        values[k] = total / row[k]
    return values


def _largest(rows: list[list[complex]], k: int) -> int:
    """Row with the largest number in a column; most of a column is empty, and cheap to pass."""
    best, most = k, abs(rows[k][k])
    for i in range(k + 1, len(rows)):
        if rows[i][k] and abs(rows[i][k]) > most:
            best, most = i, abs(rows[i][k])
    return best

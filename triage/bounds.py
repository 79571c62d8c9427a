"""What stands beside an estimate: its basis, bounded probabilities, readings and ceilings.

A reading (with `<` or `>`) and a ceiling are not estimates. They have no arithmetic, so that a
reported bound can never slip into a calculation as if it were a value.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field

from triage.citation import Citation
from triage.errors import InvalidValue


@dataclass(frozen=True, slots=True)
class Basis:
    """Where one named source of doubt comes from.

    Args:
        source: what the number describes, in words.
        kind: `measured`, `default` or `derived`.
        note: the value used, with its unit.
        citation: the published or judged origin, if it has one.
    """

    source: str
    kind: str
    note: str = ""
    citation: Citation | None = None

    def __post_init__(self) -> None:
        """Refuse what cannot be."""
        if self.kind not in ("measured", "default", "derived"):
            raise InvalidValue(f"a basis is measured, default or derived, not '{self.kind}'")


@dataclass(frozen=True, slots=True)
class Probability:
    """A probability with the interval left by what is not known about the model.

    Args:
        value: over all sources.
        low: at the 5 % point of the epistemic sources.
        high: at their 95 % point.
        basis: origin of each source.
    """

    value: float
    low: float
    high: float
    basis: Mapping[str, Basis] = field(default_factory=dict)

    def __post_init__(self) -> None:
        """Refuse what cannot be."""
        if not all(0 <= p <= 1 + 1e-9 for p in (self.value, self.low, self.high)):
            raise InvalidValue(f"not probabilities: {self.value!r}, {self.low!r}, {self.high!r}")


@dataclass(frozen=True, slots=True)
class Reading:
    """What an instrument showed: an SI value, or a bound where the display said so.

    Args:
        value: [unit].
        unit: SI symbol.
        bound: empty for a value, `<` for "less than", `>` for "more than" (off scale).
    """

    value: float
    unit: str
    bound: str = ""

    def __post_init__(self) -> None:
        """Refuse what cannot be."""
        if self.bound not in ("", "<", ">"):
            raise InvalidValue(f"a bound is '<', '>' or empty, not {self.bound!r}")


@dataclass(frozen=True, slots=True)
class Ceiling:
    """The most a quantity can be, for as long as no reason voids it.

    Args:
        value: [unit], or None if no ceiling can be named.
        unit: SI symbol.
        void: reasons why the ceiling does not hold.
    """

    value: float | None
    unit: str
    void: tuple[str, ...] = ()

    @property
    def holds(self) -> bool:
        """True if there is a value and nothing voids it."""
        return self.value is not None and not self.void

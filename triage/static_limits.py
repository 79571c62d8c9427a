"""What a static discharge is held against: ignition, immunity, room humidity, words."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any

from triage.citation import Citation
from triage.errors import BadTable, InvalidValue
from triage.physics.ignition import checked_solvent_energy
from triage.tables import citation, table


@dataclass(frozen=True, slots=True)
class Fuel:
    """Minimum ignition energies of one vapour; published lists disagree, so all are kept.

    Args:
        word: how records name it.
        in_air: [J], each list's value.
        in_oxygen: [J]; empty if none was found.
        citation: their origin.
    """

    word: str
    in_air: tuple[float, ...]
    in_oxygen: tuple[float, ...]
    citation: Citation


@dataclass(frozen=True, slots=True)
class Immunity:
    """Discharge levels a device declares to withstand, without promising "no glitch".

    Args:
        text: edition of the standard.
        contact: contact-discharge levels [V].
        air: air-discharge levels [V].
        citation: their origin.
    """

    text: str
    contact: tuple[float, ...]
    air: tuple[float, ...]
    citation: Citation


@dataclass(frozen=True, slots=True)
class HumidityRule:
    """A rule for the relative humidity of a room; None where it sets no bound.

    Args:
        text: what it says.
        low: least relative humidity, 0 to 1.
        high: greatest relative humidity, 0 to 1.
        citation: its origin.
    """

    text: str
    low: float | None
    high: float | None
    citation: Citation

    def allows(self, fraction: float) -> bool:
        """True if a relative humidity (0 to 1) keeps the rule."""
        return (self.low is None or fraction >= self.low) and (
            self.high is None or fraction <= self.high
        )


@dataclass(frozen=True, slots=True)
class Word:
    """What people say of a spark, and the charge at which it was said.

    Args:
        text: the words.
        voltage: of the body [V].
        charge: that passed [C].
        citation: its origin.
    """

    text: str
    voltage: float
    charge: float
    citation: Citation


@dataclass(frozen=True, slots=True)
class StaticLimits:
    """All rows, each by its word."""

    fuels: Mapping[str, Fuel]
    immunity: Mapping[str, Immunity]
    room_humidity: Mapping[str, HumidityRule]
    words: Mapping[str, Word]

    def citations(self) -> dict[str, Citation]:
        """Every number that can be printed, by its path in the table."""
        return {
            f"{part}.{word}": row.citation
            for part in ("fuels", "immunity", "room_humidity", "words")
            for word, row in getattr(self, part).items()
        }

    def between(self, word: str) -> tuple[float, float | None]:
        """Charges between which people choose a word rather than the ones beside it [C].

        Args:
            word: row of `words`.

        Returns:
            Lower and upper charge, halfway (in ln) to the neighbours; None above the last word.

        Raises:
            InvalidValue: no such word.
        """
        if word not in self.words:
            raise InvalidValue(f"'{word}' is not in the table; use one of {', '.join(self.words)}")
        charges = [w.charge for w in self.words.values()]
        k = list(self.words).index(word)
        low = (charges[k - 1] * charges[k]) ** 0.5 if k else 0.0
        return low, (charges[k] * charges[k + 1]) ** 0.5 if k + 1 < len(charges) else None


@cache
def load() -> StaticLimits:
    """The shipped table, read once.

    Raises:
        BadTable: a row without citation, or a number that cannot be.
    """
    return build(table("static_limits"))


def build(data: Mapping[str, Any]) -> StaticLimits:
    """Limits from parsed YAML, checked.

    Raises:
        BadTable: as for `load`.
    """
    try:
        return StaticLimits(
            {w: _fuel(w, r) for w, r in data["fuels"].items()},
            {w: _immunity(w, r) for w, r in data["immunity"].items()},
            {w: _rule(w, r) for w, r in data["room_humidity"].items()},
            _words(data["words"]),
        )
    except (KeyError, TypeError, AttributeError, ValueError) as error:
        raise BadTable(f"static_limits.yaml: {error!r}") from error


def _fuel(word: str, row: Mapping[str, Any]) -> Fuel:
    in_air = tuple(float(v) * 1e-3 for v in row["air_mj"])
    in_oxygen = tuple(float(v) * 1e-3 for v in row["oxygen_mj"])
    if word != "hydrogen":
        in_air = tuple(map(checked_solvent_energy, in_air))
    if not in_air or (in_oxygen and max(in_oxygen) >= min(in_air)):
        raise ValueError(f"{word}: oxygen never makes ignition harder")
    return Fuel(word, in_air, in_oxygen, citation(row, word))


def _immunity(word: str, row: Mapping[str, Any]) -> Immunity:
    contact = tuple(float(v) * 1e3 for v in row["contact_kv"])
    air = tuple(float(v) * 1e3 for v in row["air_kv"])
    return Immunity(row["text"], contact, air, citation(row, word))


def _rule(word: str, row: Mapping[str, Any]) -> HumidityRule:
    low, high = (None if row[k] is None else row[k] / 100 for k in ("low_pct", "high_pct"))
    if not 0 <= (low or 0) < (1 if high is None else high) <= 1:
        raise ValueError(f"{word}: not a range of relative humidity")
    return HumidityRule(row["text"], low, high, citation(row, word))


def _words(data: Mapping[str, Any]) -> dict[str, Word]:
    where, farads = citation(data, "words"), float(data["capacitance_pf"]) * 1e-12
    found = {
        w: Word(r["text"], float(r["kv"]) * 1e3, float(r["kv"]) * 1e3 * farads, where)
        for w, r in data["ladder"].items()
    }
    charges = [w.charge for w in found.values()]
    if charges != sorted(charges):
        raise ValueError("words must rise with the charge")
    return found

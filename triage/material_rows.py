"""One row of the materials tables: its quantities, each with spread, unit and citation."""

from collections.abc import Mapping
from dataclasses import dataclass
from math import log
from typing import Any

from triage.bounds import Basis
from triage.citation import Citation
from triage.errors import InvalidValue
from triage.estimate import Estimate
from triage.physics.humidity import Response

PERCENT = 0.01
KINDS = ("resistance", "voltage", "charge", "capacitance", "factor")
"""What a row may hold a quantity of."""


@dataclass(frozen=True, slots=True)
class Quantity:
    """One number of the tables: a median, its spread and where it comes from.

    Args:
        median: [unit].
        unit: SI symbol.
        gsd: geometric standard deviation, 1 or more.
        citation: its origin.
        decades: decades a resistance falls for 0.1 more relative humidity.
        doubt_gsd: geometric standard deviation of what is not known about the median.
    """

    median: float
    unit: str
    gsd: float
    citation: Citation
    decades: float
    doubt_gsd: float

    def estimate(self, name: str, what: str) -> Estimate:
        """An estimate whose spread bears the given source name.

        Args:
            name: source of doubt.
            what: the thing described, for the list of inputs.
        """
        note = f"{self.median:g} {self.unit}, times or divided by {self.gsd:g}".strip()
        basis = {name: Basis(what, "default", note, self.citation)}
        return Estimate.lognormal(self.median, {name: log(self.gsd)}, self.unit, basis)


@dataclass(frozen=True, slots=True, kw_only=True)
class Row:
    """One material, act or object; what does not apply to it is None.

    Args:
        word: how records name it.
        text: how documents name it.
        resistance: to earth or through [ohm].
        voltage: open-circuit, or laid on by an act [V].
        charge: of one spark from an insulating surface [C].
        capacitance: to earth [F].
        factor: on the voltage of an act.
        synthetic: True if damp air hardly helps.
        earthing: True if made to lead charge to earth.
        body: row of `bodies` that goes with it.
        response: row of `responses` that goes with it.
    """

    word: str
    text: str
    resistance: Quantity | None = None
    voltage: Quantity | None = None
    charge: Quantity | None = None
    capacitance: Quantity | None = None
    factor: Quantity | None = None
    synthetic: bool = False
    earthing: bool = False
    body: str = "standing"
    response: str = "general"

    def the(self, kind: str) -> Quantity:
        """One quantity of this row.

        Args:
            kind: one of `KINDS`.

        Raises:
            InvalidValue: this row has none of that kind.
        """
        quantity = getattr(self, kind)
        if not isinstance(quantity, Quantity):
            raise InvalidValue(f"'{self.word}' has no {kind}")
        return quantity


def read_response(row: Mapping[str, Any]) -> Response:
    """A response to humidity from a parsed row in percent."""
    return Response(
        row["reference_pct"] * PERCENT,
        tuple(k * PERCENT for k in row["knees_pct"]),
        tuple(s / PERCENT for s in row["per_pct"]),
    )


def read_quantity(row: Mapping[str, Any], citations: Mapping[str, Citation]) -> Quantity:
    """A quantity from a parsed row.

    Raises:
        ValueError: an unknown key, or a number that cannot be.
    """
    rest = dict(row)
    quantity = Quantity(
        float(rest.pop("median")),
        rest.pop("unit"),
        float(rest.pop("gsd")),
        citations[rest.pop("cite")],
        float(rest.pop("decades_per_10pct", 0)),
        float(rest.pop("doubt_gsd", 1)),
    )
    if rest:
        raise ValueError(f"unknown keys {sorted(rest)}")
    if not (quantity.median > 0 and min(quantity.gsd, quantity.doubt_gsd) >= 1):
        raise ValueError(f"not a positive quantity with a spread of 1 or more: {dict(row)}")
    return quantity


def read_row(word: str, row: Mapping[str, Any], citations: Mapping[str, Citation]) -> Row:
    """A row from parsed YAML.

    Raises:
        ValueError: it holds no quantity, or an unknown key.
    """
    parts: dict[str, Any] = {
        key: read_quantity(each, citations) if key in KINDS else each for key, each in row.items()
    }
    found = Row(word=word, **parts)
    if not any(getattr(found, kind) for kind in KINDS):
        raise ValueError(f"{word} has no quantity")
    return found

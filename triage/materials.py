"""Materials: floors, footwear, casters, acts and objects, loaded and cross-checked once."""

from collections.abc import Mapping
from functools import cache
from math import log
from typing import Any

from triage.bounds import Basis
from triage.citation import Citation
from triage.errors import BadTable, InvalidValue
from triage.estimate import Estimate, product
from triage.frozen import frozen
from triage.material_rows import KINDS, Quantity, Row, read_quantity, read_response, read_row
from triage.physics.charging import Mover
from triage.physics.humidity import Humidity, Response, resistance_factor
from triage.tables import table

QUANTITY_TABLES = ("walking", "rolling", "sensation", "held_metal")
"""Tables that map a word to one quantity."""

ROW_TABLES = ("floors", "footwear", "casters", "acts", "seats", "garments", "bodies", "objects")
"""Tables that map a word to a row of quantities."""


@frozen
class Materials:
    """All tables; each maps a word to its row."""

    responses: Mapping[str, Response]
    response_citations: Mapping[str, Citation]
    walking: Mapping[str, Quantity]
    rolling: Mapping[str, Quantity]
    sensation: Mapping[str, Quantity]
    held_metal: Mapping[str, Quantity]
    floors: Mapping[str, Row]
    footwear: Mapping[str, Row]
    casters: Mapping[str, Row]
    acts: Mapping[str, Row]
    seats: Mapping[str, Row]
    garments: Mapping[str, Row]
    bodies: Mapping[str, Row]
    objects: Mapping[str, Row]

    def capacitance(self, body: str) -> Estimate:
        """Capacitance of a row of `bodies` or `objects` [F], each on a source of its own."""
        name = "object_capacitance" if body in self.objects else "capacitance"
        row = row_of({**self.bodies, **self.objects}, body)
        return row.the("capacitance").estimate(name, row.text)

    def resistance(self, table: str, word: str, humidity: Humidity) -> Estimate:
        """Resistance of one row at a humidity [ohm].

        Args:
            table: `floors`, `footwear` or `casters`.
            word: its row.
            humidity: where it mattered.
        """
        names = {"floors": "floor", "footwear": "footwear", "casters": "caster"}
        row = row_of(getattr(self, table), word)
        quantity = row.the("resistance")
        dry = quantity.estimate(f"{names[table]}_resistance", row.text)
        return dry.times(resistance_factor(humidity, quantity.decades), "ohm")

    def coupling(self) -> Estimate:
        """Capacitance between an object and the person behind its plastic handle [F]."""
        return self.rolling["coupling"].estimate("coupling_capacitance", "person beside object")

    def doubt(self) -> Estimate:
        """Factor on every modelled voltage for what the model does not know."""
        return self.walking["model_doubt"].estimate("model_doubt", "model of charging")

    def walker(
        self, floor: str, footwear: str, humidity: Humidity, *, body: str | None = None
    ) -> Mover:
        """A person walking.

        Args:
            floor: row of `floors`.
            footwear: row of `footwear`.
            humidity: where it happened.
            body: row of `bodies`; None for the one that goes with the footwear.

        Raises:
            InvalidValue: no such row.
        """
        ground, shoe = row_of(self.floors, floor), row_of(self.footwear, footwear)
        response = self.responses["synthetic" if ground.synthetic and shoe.synthetic else "general"]
        volts = ground.the("voltage").estimate("open_circuit_voltage", ground.text)
        lifted = self.walking["contact"].estimate("contact_voltage", "lifted foot")
        return Mover(
            current=self.walking["current"].estimate("charging_current", "walking"),
            open_voltage=volts.times(response.factor(humidity), "V"),
            resistances=(
                self.resistance("floors", floor, humidity),
                self.resistance("footwear", footwear, humidity),
            ),
            capacitance=self.capacitance(body or shoe.body),
            doubt=self.doubt(),
            contact=lifted if ground.earthing and shoe.earthing else None,
            peak_factor=self.walking["peak_factor"].median,
        )

    def roller(self, floor: str, caster: str, humidity: Humidity, *, body: str) -> Mover:
        """An object on casters that is pushed, with or without the person.

        Args:
            floor: row of `floors`.
            caster: row of `casters`.
            humidity: where it happened.
            body: row of `objects` or `bodies`, for instance `person_with_cart`.
        """
        volts = self.rolling["voltage"].estimate("open_circuit_voltage", "rolling")
        return Mover(
            current=self.rolling["current"].estimate("charging_current", "rolling"),
            open_voltage=volts.times(self.responses["general"].factor(humidity), "V"),
            resistances=(
                self.resistance("floors", floor, humidity),
                self.resistance("casters", caster, humidity),
            ),
            capacitance=self.capacitance(body),
            doubt=self.doubt(),
        )

    def act_charge(self, act: str, humidity: Humidity, *, surface: str | None = None) -> Estimate:
        """Charge laid on a body by a quick act, or of one spark from a wiped surface [C].

        Args:
            act: row of `acts`.
            humidity: where it happened.
            surface: row of `seats` (rising) or `garments` (undressing), if known.
        """
        row = row_of(self.acts, act)
        response = self.responses[row.response].factor(humidity)
        if row.charge is not None:
            return row.charge.estimate("quick_act_voltage", row.text).times(response, "C")
        volts = row.the("voltage").estimate("quick_act_voltage", row.text)
        nominal = self.bodies[row.body].the("capacitance").median
        charge = product("C", volts, response).scaled(nominal)
        if surface is None:
            return charge
        table = self.garments if act.startswith("garment") else self.seats
        chosen = row_of(table, surface)
        return charge.times(chosen.the("factor").estimate("surface_material", chosen.text), "C")

    def act_voltage(self, act: str, humidity: Humidity) -> Estimate:
        """Nominal voltage of a quick act: on its own body, or on the insulating surface [V].

        A surface voltage is never the voltage of a body.
        """
        row = row_of(self.acts, act)
        volts = row.the("voltage").estimate("quick_act_voltage", row.text)
        return volts.times(self.responses[row.response].factor(humidity), "V")

    def threshold(self, sensation: str, *, held_metal: bool = False) -> Estimate:
        """Charge [C] or voltage [V] at which a sensation begins, over people and over our doubt.

        Args:
            sensation: row of `sensation`.
            held_metal: True if the spark went to metal held in the hand, which spreads it.
        """
        quantity = self.sensation.get(sensation)
        if quantity is None:
            raise _unknown(sensation, self.sensation)
        people = quantity.estimate("spread_between_people", sensation)
        name, note = f"{sensation}_threshold", f"times or divided by {quantity.doubt_gsd:g}"
        basis = {name: Basis(f"threshold: {sensation}", "default", note, quantity.citation)}
        doubt = Estimate.lognormal(1.0, {name: log(quantity.doubt_gsd)}, "", basis)
        found = people.times(doubt, quantity.unit)
        if held_metal and quantity.unit == "C":
            return found.scaled(self.held_metal["charge"].median)
        return found

    def citations(self) -> dict[str, Citation]:
        """Every number that can be printed, by its path in the tables."""
        found = {f"humidity_response.{n}": c for n, c in self.response_citations.items()}
        for part in QUANTITY_TABLES:
            found |= {f"{part}.{n}": q.citation for n, q in getattr(self, part).items()}
        for part in ROW_TABLES:
            for word, row in getattr(self, part).items():
                for kind in KINDS:
                    quantity = getattr(row, kind)
                    if quantity is not None:
                        found[f"{part}.{word}.{kind}"] = quantity.citation
        return found


def row_of(table: Mapping[str, Row], word: str) -> Row:
    """The row a word names.

    Raises:
        InvalidValue: no such row; the text lists the words there are.
    """
    if word not in table:
        raise _unknown(word, table)
    return table[word]


def _unknown(word: str, table: Mapping[str, object]) -> InvalidValue:
    return InvalidValue(f"'{word}' is not in the table; use one of {', '.join(table)}")


@cache
def load() -> Materials:
    """The shipped tables, read once.

    Raises:
        BadTable: a row without citation, an unknown key or word, or a number that cannot be.
    """
    return build(table("materials"))


def build(data: Mapping[str, Any]) -> Materials:
    """Tables from parsed YAML, checked.

    Raises:
        BadTable: as for `load`.
    """
    rows: dict[str, Any] = {}
    try:
        citations = {key: Citation(**each) for key, each in data["citations"].items()}
        responses = data["humidity_response"]
        rows["responses"] = {n: read_response(r) for n, r in responses.items()}
        rows["response_citations"] = {n: citations[r["cite"]] for n, r in responses.items()}
        for table in QUANTITY_TABLES:
            rows[table] = {n: read_quantity(q, citations) for n, q in data[table].items()}
        for table in ROW_TABLES:
            rows[table] = {w: read_row(w, r, citations) for w, r in data[table].items()}
    except (KeyError, TypeError, ValueError) as error:
        raise BadTable(f"materials.yaml: {error!r}") from error
    found = Materials(**rows)
    _cross_check(found, citations)
    return found


def _cross_check(found: Materials, declared: Mapping[str, Citation]) -> None:
    """Rows name rows that exist; every citation is used; each table knows `unknown`."""
    faults = [
        f"{row.word}: no {kind} '{name}'"
        for table in ROW_TABLES
        for row in getattr(found, table).values()
        for kind, name, there in (
            ("body", row.body, found.bodies),
            ("response", row.response, found.responses),
        )
        if name not in there
    ]
    faults += [
        f"{table} has no row 'unknown'"
        for table in ("floors", "footwear", "casters", "seats", "garments")
        if "unknown" not in getattr(found, table)
    ]
    used = set(found.citations().values())
    faults += [f"citation '{k}' is not used" for k, c in declared.items() if c not in used]
    if faults:
        raise BadTable("materials.yaml: " + "; ".join(faults))

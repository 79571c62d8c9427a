import dataclasses
import typing

import pytest

from triage import incident
from triage.clock import Moment
from triage.fields import Field, table
from triage.quantity import KINDS, Quantity

CLASSES = [
    each
    for each in vars(incident).values()
    if dataclasses.is_dataclass(each)
    and isinstance(each, type)
    and each.__module__ == incident.__name__
]
ROWS = [(each.__name__, name, row) for each in CLASSES for name, row in table(each)]
LISTS = ("persons", "statements", "items", "contacts", "checks")


def named(value: object) -> str:
    return value if isinstance(value, str) else ""


@pytest.mark.parametrize("each", CLASSES, ids=lambda each: each.__name__)
def test_a_part_of_a_record_cannot_be_changed(each: type) -> None:
    part = each()
    for name, _ in table(each):
        with pytest.raises((AttributeError, TypeError)):
            setattr(part, name, "x")
    with pytest.raises((AttributeError, TypeError)):
        part.another = "x"


@pytest.mark.parametrize("each", CLASSES, ids=lambda each: each.__name__)
def test_every_attribute_is_a_row_of_the_table(each: type) -> None:
    assert [field.name for field in dataclasses.fields(each)] == [name for name, _ in table(each)]


@pytest.mark.parametrize(("part", "name", "row"), ROWS, ids=named)
def test_every_field_says_what_is_asked_in_one_sentence(part: str, name: str, row: Field) -> None:
    assert row.help and row.help[-1] in ".?", f"{part}.{name}"
    assert len(row.help) <= 120


@pytest.mark.parametrize(("part", "name", "row"), ROWS, ids=named)
def test_every_field_is_bounded(part: str, name: str, row: Field) -> None:
    if row.kind == "quantity":
        assert row.quantity in KINDS and row.possible is not None
        low, high = row.possible
        assert low < high
        if row.plausible:
            assert low <= row.plausible[0] < row.plausible[1] <= high
    elif row.kind == "word":
        assert row.words
    elif row.kind in ("words", "reference"):
        assert bool(row.words) != bool(row.to)
        assert not row.to or row.to in LISTS
    else:
        assert row.kind in ("parts", "part", "text", "ident", "time", "count") and row.most > 0


@pytest.mark.parametrize("each", CLASSES, ids=lambda each: each.__name__)
def test_every_field_may_be_left_out_except_ids_and_the_schema(each: type) -> None:
    assert {name for name, row in table(each) if row.required} <= {"id", "schema"}


@pytest.mark.parametrize("each", CLASSES, ids=lambda each: each.__name__)
def test_the_annotation_says_what_the_field_holds(each: type) -> None:
    hints = typing.get_type_hints(each)
    held = {
        "time": Moment,
        "quantity": Quantity,
        "word": str,
        "text": str,
        "reference": str,
        "count": int,
    }
    for name, row in table(each):
        if row.kind in held:
            assert hints[name] == held[row.kind] | None, name
        elif row.kind == "parts":
            assert hints[name] == tuple[row.of, ...]


def test_what_a_later_reader_needs_is_in_the_table() -> None:
    # The facts that practice asks for and that cannot be added to old records later.
    have = {f"{part}.{name}" for part, name, _ in ROWS}
    assert have >= {
        "Scene.dependence", "Scene.heart_conductor", "Scene.live_contact", "Scene.log_clock_error",
        "Person.breach", "Person.signs", "Statement.language", "Statement.interpreter", "Statement.mapped_by",
        "Statement.talked", "Item.owner", "Item.last_good", "Item.last_good_value", "Item.home",
        "Check.calibration_due", "Check.disturbed", "Check.same_cord", "Check.unit_disputed", "Check.reason",
        "Surroundings.air_handling", "Surroundings.last_cleaned", "Surroundings.cleaning_product",
        "Supply.changed_since", "Supply.monitor_tested", "Incident.aware_at", "Incident.cross_references",
        "Outcome.how_confirmed", "Outcome.reportable", "Outcome.risk_accepted_until", "HandOver.contaminated",
    }  # fmt: skip


def test_no_field_asks_for_a_name_or_an_identifier_of_a_person() -> None:
    have = {name for part, name, _ in ROWS if part in ("Person", "Statement", "Entry")}
    assert not have & {"name", "birth", "patient_id", "email", "phone", "staff_number"}

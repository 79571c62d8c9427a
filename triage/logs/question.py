"""The question put to a log: when, for which record, with what the site file knows."""

from dataclasses import replace
from pathlib import Path

from triage.clock import Moment
from triage.clock import parse as parse_time
from triage.errors import CannotTell, CannotWrite
from triage.frozen import frozen
from triage.logs.into import values_for, with_values
from triage.logs.log import load
from triage.logs.options import Options
from triage.logs.reading import LogReading, reading_at
from triage.record import Record, loads
from triage.record import load as load_record
from triage.site import Room, Site


@frozen
class Question:
    """When the event was, and what is known beside the log.

    Args:
        at: time of the event as typed; None for the record's.
        record: file of the record, or None.
        site: the facility's own file.
    """

    at: str | None
    record: Path | None
    site: Site


def answer(file: Path, options: Options, question: Question) -> LogReading:
    """Read a log at the time of an event.

    The room of the record names the sensor that serves it, if its log is one of humidity.

    Raises:
        CannotTell: no time, no zone, or a log readable in more than one way.
        TriageError: as for reading a log, a record or a time.
    """
    record = load_record(question.record) if question.record else None
    moment, zone = _moment(question, record), question.site.file.zone
    mine = zone or options.zone
    if mine is None and moment.offset is None:
        raise CannotTell(f"'{moment.text}' has no offset; say --site or --zone, or add the offset")
    room = question.site.room(record.incident.place.room) if record else None
    named = room.sensor if room and options.kind == "humidity" else None
    log = load(file, replace(options, zone=options.zone or zone, sensor=options.sensor or named))
    own = named is not None and named.lower() in log.sensor.lower()
    if named and not own:
        asked = f"the site file names '{named}' for this room, this is '{log.sensor}': the same?"
        log = replace(log, flags=(*log.flags, asked))
    return reading_at(log, moment, mine or "UTC", sensor_doubt=_doubt(room) if own else 0.0)


def _doubt(room: Room | None) -> float:
    return room.sensor_doubt.value if room and room.sensor_doubt else 0.0


def _moment(question: Question, record: Record | None) -> Moment:
    if question.at is not None:
        return parse_time(question.at)
    found = record.incident.event.at if record else None
    if found is None:
        raise CannotTell("the time of the event is not known; say --at, or a --record that has it")
    return found


def write_into(reading: LogReading, record: Path | None, into: Path) -> None:
    """Write a copy of a record with the values of a log added.

    Args:
        reading: the reading.
        record: file of the record.
        into: file to write; it must not exist.

    Raises:
        CannotWrite: no record, the file exists, or a field already holds something else.
        TriageError: the copy would not be a record.
    """
    if record is None:
        raise CannotWrite("--into adds to a record: say --record too")
    text = with_values(record.read_text("utf-8-sig"), str(record), values_for(reading))
    loads(text, str(into))
    try:
        with into.open("x", encoding="utf-8") as file:
            file.write(text)
    except OSError as error:
        reason = error.strerror or "cannot be written"
        raise CannotWrite(f"{into}: {reason}; name a new file in a folder of yours") from None

"""A reading from a log in lines: value, doubt, trend, flags, and what to enter in the record."""

from collections.abc import Iterator

from triage.logs.into import as_typed, as_yaml, values_for
from triage.logs.options import EVENTS
from triage.logs.reading import LogReading, Trend


def log_lines(reading: LogReading) -> Iterator[str]:
    """Everything a log says about the time of an event."""
    log = reading.log
    yield f"{log.sheet.name}: {len(log.moments)} rows, read as"
    yield from (f"  {part}" for each in log.read_as for part in each.split("; "))
    yield _clock(reading)
    yield ""
    if log.options.kind != EVENTS:
        yield from _value(reading)
    else:
        yield "The rows around the event are in the excerpt below. A missing row of an"
        yield "alarm does not mean that there was none; not every log holds every alarm."
    for each in (*reading.flags, *log.flags):
        yield f"Look: {each}{'' if each.endswith('?') else '.'}"
    yield ""
    yield "To enter in the record:"
    yield from (f"  {line}" for line in as_yaml(values_for(reading)))
    yield from _to_answer(reading)


def _clock(reading: LogReading) -> str:
    ahead = reading.log.options.ahead
    if ahead:
        way = "ahead of" if ahead > 0 else "behind"
        return f"  the log's clock {abs(ahead):.0f} s {way} wall time, as said; times put right"
    return "  no clock error said: compare its clock with wall time, say --clock-error"


def _value(reading: LogReading) -> Iterator[str]:
    kind = reading.log.options.kind
    if reading.value is None:
        yield f"At {reading.moment.text}: not known; {reading.reason}."
    else:
        shown = as_typed(reading.value, kind, reading.bound)
        worst = {"monitor-current": "highest", "monitor-resistance": "lowest"}.get(kind)
        how = f"{worst} of the rows around it" if worst else "between its neighbours"
        yield f"At {reading.moment.text}: {shown}, {how},"
        yield f"  from '{reading.log.sensor}'."
    if reading.value is not None and reading.low is not None and reading.high is not None:
        yield f"Rows around it: {as_typed(reading.low, kind)} to {as_typed(reading.high, kind)}."
    if reading.doubt is not None and kind in ("humidity", "temperature"):
        own = "with" if reading.sensor_doubt else "without"
        yield f"Doubt (one standard deviation): {_difference(reading.doubt, kind)},"
        yield f"  {own} the doubt of the sensor itself, which only a site file can state."
    if reading.before:
        yield from _before(reading.before, kind)


def _before(trend: Trend, kind: str) -> Iterator[str]:
    rows = f"{trend.rows} row{'s' if trend.rows > 1 else ''}"
    low, high, mean = (as_typed(each, kind) for each in (trend.low, trend.high, trend.mean))
    yield f"Hour before ({rows}): {low} to {high}, mean {mean};"
    if trend.slope is None:
        yield "  too few rows for a trend."
    else:
        way = "rising" if trend.slope > 0 else "falling"
        yield f"  {way} by {_difference(abs(trend.slope), kind)} in an hour."


def _difference(size: float, kind: str) -> str:
    """A difference of two values, in points for humidity."""
    if kind == "humidity":
        return f"{size:.2g} points"
    return f"{size:.2g} K" if kind == "temperature" else as_typed(size, kind)


def _to_answer(reading: LogReading) -> Iterator[str]:
    """What the log cannot know."""
    kind = reading.log.options.kind
    yield ""
    if kind in ("humidity", "temperature"):
        yield "Add surroundings.humidity_where: at_place, same_room, same_air, elsewhere."
    elif kind == EVENTS:
        yield "If a row is the alarm or trip of that moment: supply.alarm or supply.trip"
        yield "yes, with its source log. Never 'no' from a missing row."
    else:
        yield "Add supply.changed_since: was anything plugged or unplugged before it?"
        yield "The least favourable row counts: a value between two rows hides a peak."

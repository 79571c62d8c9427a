"""What a person says about a log beside the file itself; everything unsaid must be proved by it."""

import re

from triage.errors import InvalidValue
from triage.frozen import frozen
from triage.quantity import parse

QUANTITY = {
    "humidity": "relative_humidity",
    "temperature": "temperature",
    "monitor-current": "current",
    "monitor-resistance": "resistance",
}
"""Kind of log to the kind of its quantity; a log of events has none."""
EVENTS = "events"
KINDS = (*QUANTITY, EVENTS)
"""The kinds of log."""
ENCODINGS = ("utf-8", "latin-1", "cp1252")
DELIMITERS = {"semicolon": ";", "comma": ",", "tab": "\t", "bar": "|"}
DECIMALS = {"point": ".", "comma": ","}
DATE_ORDERS = {"day-first": "dmy", "month-first": "mdy", "year-first": "ymd"}


@frozen
class Options:
    """What was said about a log; None means that the file must prove it.

    Args:
        kind: one of `KINDS`.
        zone: IANA zone of its times.
        sensor: name of the sensor, as in a header or in a column of names.
        column: header or number, from 1, of the column of values.
        unit: unit of the values.
        encoding: one of `ENCODINGS`.
        delimiter: one of the names in `DELIMITERS`.
        decimal: one of the names in `DECIMALS`.
        date_order: one of the names in `DATE_ORDERS`.
        ahead: seconds by which the log's clock is ahead of wall time.
    """

    kind: str = "humidity"
    zone: str | None = None
    sensor: str | None = None
    column: str | None = None
    unit: str | None = None
    encoding: str | None = None
    delimiter: str | None = None
    decimal: str | None = None
    date_order: str | None = None
    ahead: float = 0.0

    def __post_init__(self) -> None:
        """Refuse a word that is not on its list.

        Raises:
            InvalidValue: naming the list.
        """
        for name, known in (("kind", KINDS), ("encoding", ENCODINGS), ("delimiter", DELIMITERS),
                            ("decimal", DECIMALS), ("date_order", DATE_ORDERS)):  # fmt: skip
            said = getattr(self, name)
            if said is not None and said not in known:
                option = name.replace("_", "-")
                raise InvalidValue(f"--{option}: '{said}' is not one of: {', '.join(known)}")


def clock_error(text: str) -> float:
    """Seconds by which a clock is ahead of wall time, from text such as "+3 min".

    Raises:
        InvalidValue: no sign, no number, no unit, or more than a day.

    >>> clock_error("-90 s")
    -90.0
    """
    if not re.match(r"\s*[-+−]", text):
        raise InvalidValue(f"'{text}' has no sign: + if the log's clock is ahead, - if behind")
    seconds = parse(text, "duration").value
    if abs(seconds) > 86400:
        raise InvalidValue(f"'{text}' is more than a day; correct the log's clock and export again")
    return seconds

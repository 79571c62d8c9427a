import re
from datetime import UTC, datetime, timedelta
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

import triage
from triage.clock import before, find_zone, hours_between, now, parse
from triage.errors import InvalidValue

ZONES = ["UTC", "Europe/Berlin", "America/New_York", "Asia/Kolkata", "Australia/Lord_Howe",
         "America/Santiago", "Pacific/Kiritimati"]  # fmt: skip


@pytest.mark.parametrize(
    ("text", "precision", "start", "length"),
    [
        ("2026-01-14 07:20", "minute", datetime(2026, 1, 14, 7, 20), timedelta(minutes=1)),
        ("2026-01-14T07:20", "minute", datetime(2026, 1, 14, 7, 20), timedelta(minutes=1)),
        ("2026-01-14 07h", "hour", datetime(2026, 1, 14, 7), timedelta(hours=1)),
        ("2026-01-14 night", "part of day", datetime(2026, 1, 14), timedelta(hours=6)),
        ("2026-01-14 morning", "part of day", datetime(2026, 1, 14, 6), timedelta(hours=6)),
        ("2026-01-14 afternoon", "part of day", datetime(2026, 1, 14, 12), timedelta(hours=6)),
        ("2026-01-14 evening", "part of day", datetime(2026, 1, 14, 18), timedelta(hours=6)),
        ("2026-01-14", "date", datetime(2026, 1, 14), timedelta(days=1)),
        ("2028-02-29", "date", datetime(2028, 2, 29), timedelta(days=1)),
    ],
)
def test_a_time_keeps_its_text_and_the_precision_it_was_given_with(
    text: str, precision: str, start: datetime, length: timedelta
) -> None:
    found = parse(f" {text} ")
    assert (found.text, found.precision, found.start, found.length) == (
        text,
        precision,
        start,
        length,
    )


def test_the_four_parts_of_a_day_fill_it_without_gap_or_overlap() -> None:
    parts = [parse(f"2026-01-14 {p}") for p in ("night", "morning", "afternoon", "evening")]
    assert [p.start + p.length for p in parts[:-1]] == [p.start for p in parts[1:]]
    assert sum((p.length for p in parts), timedelta()) == timedelta(days=1)


@pytest.mark.parametrize(
    "text",
    ["07:20", "12:30", "14.01.2026", "01/14/2026 07:20", "2026-1-14", "2026-01-14 7:20",
     "2026-01-14 24:00", "2026-02-29", "2026-13-01", "2026-00-10", "2026-01-14 07:60", "2026-01-14 25h",
     "2026-01-14 07:20:30", "2026-01-14 07", "2026-01-14 noon", "2026-01-14 07:20 CET",
     "2026-01-14 07:20+15:00", "2026-01-14 07:20+1:00", "2026-01-14+01:00", "20260114", "", "now",
     "0001-01-01", "1899-12-31", "2200-01-01", "9999-12-31 23:59", "2026-01-14 07:20\nx",
     "\u0662\u0660\u0662\u0666-01-14"],
)  # fmt: skip
def test_another_shape_or_an_impossible_time_is_refused(text: str) -> None:
    with pytest.raises(InvalidValue):
        parse(text)


@pytest.mark.parametrize(
    "text", ["1900-01-01", "2199-12-31", "2199-12-31 23:59", "1900-01-01 night"]
)
@pytest.mark.parametrize("zone", ZONES)
def test_every_year_that_is_taken_has_an_interval_in_every_zone(text: str, zone: str) -> None:
    begin, end = parse(text).interval(zone)
    assert begin < end


@pytest.mark.parametrize(
    ("text", "zone", "utc"),
    [
        # Central European Time is UTC+1, summer time UTC+2 (Directive 2000/84/EC).
        ("2026-01-14 07:20", "Europe/Berlin", datetime(2026, 1, 14, 6, 20, tzinfo=UTC)),
        ("2026-07-14 07:20", "Europe/Berlin", datetime(2026, 7, 14, 5, 20, tzinfo=UTC)),
        ("2026-01-14 07:20", "Asia/Kolkata", datetime(2026, 1, 14, 1, 50, tzinfo=UTC)),
        ("2026-01-14 07:20Z", "Europe/Berlin", datetime(2026, 1, 14, 7, 20, tzinfo=UTC)),
        ("2026-01-14 07:20-05:00", "Europe/Berlin", datetime(2026, 1, 14, 12, 20, tzinfo=UTC)),
        ("2026-01-14 07h+05:30", "UTC", datetime(2026, 1, 14, 1, 30, tzinfo=UTC)),
    ],
)
def test_wall_time_is_read_in_the_sites_zone_unless_an_offset_was_typed(
    text: str, zone: str, utc: datetime
) -> None:
    assert parse(text).interval(zone)[0] == utc


# EU clocks go back at 01:00 UTC on the last Sunday of October (25 October 2026) and forward on the
# last Sunday of March (29 March 2026): Directive 2000/84/EC, articles 2 and 3.
@pytest.mark.parametrize(
    "text", ["2026-10-25 02:00", "2026-10-25 02:30", "2026-10-25 02:59", "2026-10-25 02h"]
)
def test_the_doubled_hour_needs_its_offset(text: str) -> None:
    with pytest.raises(InvalidValue, match="happens twice that day; add the offset"):
        parse(text).interval("Europe/Berlin")
    first, second = (parse(f"{text}{offset}") for offset in ("+02:00", "+01:00"))
    assert before(first, second, "Europe/Berlin") is True
    assert hours_between(first, second, "Europe/Berlin") >= 1


@pytest.mark.parametrize("text", ["2026-03-29 02:00", "2026-03-29 02:30", "2026-03-29 02h"])
def test_an_hour_that_the_clock_skips_does_not_exist(text: str) -> None:
    with pytest.raises(InvalidValue, match="does not exist"):
        parse(text).interval("Europe/Berlin")


@pytest.mark.parametrize(
    ("text", "hours"),
    [("2026-10-25", 25), ("2026-03-29", 23), ("2026-10-25 night", 7), ("2026-03-29 night", 5),
     ("2026-10-25 morning", 6), ("2026-10-24", 24)],
)  # fmt: skip
def test_a_day_of_clock_change_is_as_long_as_it_is(text: str, hours: int) -> None:
    begin, end = parse(text).interval("Europe/Berlin")
    assert (end - begin) == timedelta(hours=hours)


@pytest.mark.parametrize(
    "text", ["2026-10-25 01:59", "2026-10-25 03:00", "2026-03-29 01:59", "2026-03-29 03:00"]
)
def test_the_minutes_beside_a_clock_change_last_one_minute(text: str) -> None:
    begin, end = parse(text).interval("Europe/Berlin")
    assert end - begin == timedelta(minutes=1)


@pytest.mark.parametrize(
    ("first", "second", "answer"),
    [
        ("2026-01-14 07:20", "2026-01-14 07:21", True),
        ("2026-01-14 07:21", "2026-01-14 07:20", False),
        ("2026-01-14 07:20", "2026-01-14 07:20", None),
        ("2026-01-14 07:20", "2026-01-14 07h", None),
        ("2026-01-14 06:59", "2026-01-14 07h", True),
        ("2026-01-14 08:00", "2026-01-14 07h", False),
        ("2026-01-14", "2026-01-14 evening", None),
        ("2026-01-13", "2026-01-14 night", True),
        ("2026-01-14 morning", "2026-01-14 afternoon", True),
        ("2026-01-14 23:59", "2026-01-15", True),
    ],
)
def test_before_is_unknown_where_the_intervals_overlap(
    first: str, second: str, answer: bool | None
) -> None:
    assert before(parse(first), parse(second), "Europe/Berlin") is answer


def test_a_time_that_is_not_known_is_before_nothing_and_far_from_nothing() -> None:
    known = parse("2026-01-14")
    assert before(None, known, "UTC") is None and before(known, None, "UTC") is None
    assert hours_between(None, known, "UTC") is None and hours_between(known, None, "UTC") is None


def test_the_same_instant_in_two_offsets_is_neither_before_nor_after() -> None:
    assert before(parse("2026-01-14 07:20Z"), parse("2026-01-14 08:20+01:00"), "UTC") is None


@pytest.mark.parametrize(
    ("first", "second", "hours"),
    [("2026-01-14 07:00", "2026-01-14 09:00", 2 + 1 / 60), ("2026-01-14 09:00", "2026-01-14 07:00", 2 + 1 / 60),
     ("2026-01-14 07:00", "2026-01-14", 17), ("2026-01-14", "2026-01-16", 72)],
)  # fmt: skip
def test_a_distance_is_the_largest_that_both_intervals_allow(
    first: str, second: str, hours: float
) -> None:
    assert hours_between(parse(first), parse(second), "UTC") == pytest.approx(hours)


@pytest.mark.parametrize(
    "name", ["Mars/Olympus", "", "../etc/passwd", "Europe", "a\x00b", "x" * 5000, "/etc/localtime"]
)
def test_a_zone_that_is_no_iana_name_is_refused(name: str) -> None:
    with pytest.raises(InvalidValue, match="IANA"):
        find_zone(name)


def test_now_is_a_minute_in_utc() -> None:
    early = datetime.now(UTC) - timedelta(minutes=1)
    begin, _ = now().interval("Asia/Kolkata")
    assert early <= begin <= datetime.now(UTC)
    assert now().precision == "minute"


READS_THE_CLOCK = re.compile(
    r"datetime[.](?:now|utcnow|today)|date[.]today|time[.](?:time|localtime|gmtime)[(]"
)


def test_one_place_reads_the_clock() -> None:
    package = Path(triage.__file__).parent
    found = [
        path.name
        for path in package.rglob("*.py")
        if READS_THE_CLOCK.search(path.read_text("utf-8"))
    ]
    assert found == ["clock.py"]


MOMENTS = st.builds(
    lambda day, rest: parse(f"{day:%Y-%m-%d}{rest}"),
    st.dates(datetime(1900, 1, 1).date(), datetime(2199, 12, 31).date()),
    st.sampled_from(
        ["", " night", " morning", " evening", " 23:59Z", " 00:00-12:00", " 12h+14:00"]
    ),
)


@given(MOMENTS, MOMENTS, st.sampled_from(ZONES))
def test_at_most_one_of_two_times_is_before_the_other(first, second, zone: str) -> None:
    one, other = before(first, second, zone), before(second, first, zone)
    assert (one, other) in {(True, False), (False, True), (None, None)}


@given(st.text(max_size=30))
def test_any_text_is_a_time_or_a_clear_refusal(text: str) -> None:
    try:
        found = parse(text)
    except InvalidValue:
        return
    assert found.length > timedelta()

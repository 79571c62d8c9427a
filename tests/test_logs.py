"""Logs as systems export them: every shape is proved by the file or asked for, never guessed.

Outside references: zoneinfo for times, csv and statistics of the standard library for values.
"""

import csv
import io
import statistics
from datetime import UTC, datetime, timedelta
from zoneinfo import ZoneInfo

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from triage.clock import parse
from triage.errors import BadRecord, CannotTell, InvalidValue, TriageError
from triage.logs.log import Log, loads
from triage.logs.options import KINDS, Options, clock_error
from triage.logs.reading import LogReading, reading_at
from triage.logs.sheet import MOST_ROWS

VIENNA = "Europe/Vienna"


def log(text: str | bytes, **said: object) -> Log:
    data = text.encode() if isinstance(text, str) else text
    return loads(data, "air.csv", Options(**{"zone": "UTC", **said}))  # type: ignore[arg-type]


def read(text: str | bytes, at: str = "2026-01-14 07:20", **said: object) -> LogReading:
    return reading_at(log(text, **said), parse(at), "UTC")


def export(*rows: str, header: str = "Time,Humidity [%]") -> str:
    return "\n".join((header, *rows)) + "\n"


PLAIN = export("2026-01-14 07:10,24.0", "2026-01-14 07:20,24.5", "2026-01-14 07:30,25.0")

SHAPES = {
    "ISO with commas": (PLAIN, {}),
    "semicolons and decimal comma, day first proved by 14": (
        "Zeit;Humidity [%RH]\n14.01.2026 07:10;24,0\n14.01.2026 07:20;24,5\n14.01.2026 07:30;25,0\n",
        {},
    ),
    "tabs": (PLAIN.replace(",", "\t"), {}),
    "bars": (PLAIN.replace(",", "|"), {}),
    "month first with AM and PM": (
        export("01/14/2026 7:10 AM,24.0", "01/14/2026 7:20 AM,24.5", "01/14/2026 7:30 am,25.0"),
        {},
    ),
    "day first with two-digit years, as said: 2014-01-26 would fit too": (
        export("14/01/26 07:10,24.0", "14/01/26 07:20,24.5", "14/01/26 07:30,25.0"),
        {"date_order": "day-first"},
    ),
    "month in letters": (
        export("14-Jan-2026 07:10,24.0", "14-Jan-2026 07:20,24.5", "14-Jan-2026 07:30,25.0"),
        {},
    ),
    "ISO with an offset": (
        export("2026-01-14T08:10:00+01:00,24.0", "2026-01-14T08:20:00+01:00,24.5",
               "2026-01-14T08:30:00+01:00,25.0"),
        {"zone": None},
    ),
    "ISO with Z and parts of a second": (
        export("2026-01-14T07:10:00.250Z,24.0", "2026-01-14T07:20:00.000Z,24.5",
               "2026-01-14T07:30:00.000Z,25.0"),
        {"zone": None},
    ),
    "seconds since 1970": (
        export("1768374600,24.0", "1768375200,24.5", "1768375800,25.0"),
        {"zone": None},
    ),
    "milliseconds since 1970": (
        export("1768374600000,24.0", "1768375200000,24.5", "1768375800000,25.0"),
        {"zone": None},
    ),
    "date and time in two columns": (
        export("2026-01-14,07:10,24.0", "2026-01-14,07:20,24.5", "2026-01-14,07:30,25.0",
               header="Date,Time,RH (%)"),
        {},
    ),
    "lines above the header, blank lines, a line below": (
        "Trend export\nSite,Quillmere\n\n" + PLAIN.replace("07:20,24.5\n", "07:20,24.5\n\n,\n")
        + "End of report\n",
        {},
    ),
    "a row of units under the header": (
        "Time,Humidity\n,[%RH]\n" + PLAIN.split("\n", 1)[1],
        {},
    ),
    "units in the cells": (
        export("2026-01-14 07:10,24.0 %", "2026-01-14 07:20,24.5 %", "2026-01-14 07:30,25.0 %",
               header="Time,Humidity"),
        {},
    ),
    "a column of sensors and one of units": (
        export("2026-01-14 07:10,A,24.0,%", "2026-01-14 07:10,B,60.0,%", "2026-01-14 07:20,A,24.5,%",
               "2026-01-14 07:20,B,61.0,%", "2026-01-14 07:30,A,25.0,%", header="Time,Sensor,Value,Unit"),
        {"sensor": "A"},
    ),
    "quoted decimal comma between commas": (
        export('2026-01-14 07:10,"24,0"', '2026-01-14 07:20,"24,5"', '2026-01-14 07:30,"25,0"'),
        {},
    ),
    "byte order mark": (b"\xef\xbb\xbf" + PLAIN.encode(), {}),
    "UTF-16": (PLAIN.encode("utf-16"), {}),
    "old line ends": (PLAIN.replace("\n", "\r"), {}),
    "Latin-1, as said": (
        PLAIN.replace("Humidity", "Humidity Süd").encode("latin-1"),
        {"encoding": "latin-1"},
    ),
    "newest row first": (
        export("2026-01-14 07:30,25.0", "2026-01-14 07:20,24.5", "2026-01-14 07:10,24.0"),
        {},
    ),
}  # fmt: skip


@pytest.mark.parametrize("shape", SHAPES)
def test_every_shape_gives_the_same_reading(shape: str) -> None:
    text, said = SHAPES[shape]
    found = read(text, **said)
    # Middle of the minute 07:20: 24.5 + 0.5 * 30 s / 600 s, by hand.
    assert found.value == pytest.approx(24.525)
    assert (found.low, found.high) == (24.5, 25.0)


ASKED = {
    "order of the date": (
        export("03/04/2026 07:10,24.0", "03/04/2026 07:20,24.5"), {}, "--date-order"),
    "order of two-digit years": (export("14/01/26 07:10,24.0"), {}, "day-first or year-first"),
    "zone": (PLAIN, {"zone": None}, "--zone"),
    "encoding": (PLAIN.replace("H", "Ü").encode("latin-1"), {}, "--encoding"),
    "decimal sign": (
        export("2026-01-14 07:10;0,125", "2026-01-14 07:20;1,500", header="Time;Hazard current [µA]"),
        {"kind": "monitor-current"}, "--decimal"),
    "unit": (PLAIN.replace(" [%]", ""), {}, "--unit"),
    "column of two": (
        export("2026-01-14 07:20,24.5,30", header="Time,Humidity A [%],Humidity B [%]"),
        {}, "--column"),
    "column without a header": ("2026-01-14 07:10,24.0\n2026-01-14 07:20,24.5\n", {}, "--column"),
    "column that is a setpoint": (
        export("2026-01-14 07:20,45", header="Time,Humidity setpoint [%]"), {}, "--column"),
    "sensor": (
        export("2026-01-14 07:20,A,24,%", "2026-01-14 07:20,B,60,%", header="Time,Sensor,Value,Unit"),
        {}, "--sensor"),
    "delimiter": ("2026-01-14 07:20;2026-01-14 07:20,x\n2026-01-14 07:20,3\n2026-01-14 07:20;3\n",
                  {}, "--delimiter"),
    "two columns of time": (
        export("2026-01-14 07:20,2026-01-14 07:21,24", header="Logged,Received,Humidity [%]"),
        {}, "both hold a time"),
}  # fmt: skip


@pytest.mark.parametrize("what", ASKED)
def test_what_the_file_does_not_prove_is_asked_for(what: str) -> None:
    text, said, option = ASKED[what]
    with pytest.raises(CannotTell, match=option):
        log(text, **said)


def test_an_answer_settles_what_was_asked() -> None:
    text = export("03/04/2026 07:10,24.0", "03/04/2026 07:20,24.5", "03/04/2026 07:30,25.0")
    assert read(text, "2026-04-03 07:20", date_order="day-first").value == pytest.approx(24.525)
    assert read(text, "2026-03-04 07:20", date_order="month-first").value == pytest.approx(24.525)


@pytest.mark.parametrize(
    ("text", "hour"),
    [("12:30 AM", 0), ("1:30 am", 1), ("12:30 PM", 12), ("1:30 p.m.", 13), ("11:30PM", 23)],
)
def test_noon_and_midnight_of_the_twelve_hour_clock(text: str, hour: int) -> None:
    # The convention of 12 PM for noon: strptime %I %p of the standard library.
    plain = text.replace(".", "").replace(" ", "").upper()
    assert datetime.strptime(plain, "%I:%M%p").hour == hour
    at, _ = log(export(f"01/14/2026 {text},24")).moments[0]
    assert at == datetime(2026, 1, 14, hour, 30, tzinfo=UTC).timestamp()


def test_an_open_quote_does_not_swallow_the_rest_in_silence() -> None:
    with pytest.raises(BadRecord, match="not readable as CSV"):
        log(
            'Time,Humidity [%],Note\n2026-01-14 07:20,24,x\n2026-01-14 07:30,25,"y\n',
            delimiter="comma",
        )


def test_one_date_that_decides_decides_for_all() -> None:
    text = export("12/01/2026 07:20,24.0", "13/01/2026 07:20,25.0")
    assert [at for at, _ in log(text).moments] == [
        datetime(2026, 1, day, 7, 20, tzinfo=UTC).timestamp() for day in (12, 13)
    ]
    assert "line 3 shows it" in " ".join(log(text).read_as)


def test_a_date_against_the_order_said_is_a_fault() -> None:
    with pytest.raises(BadRecord, match="air.csv:2: this date is not month-first"):
        log(export("14/01/2026 07:20,24.5"), date_order="month-first")


def test_an_unquoted_decimal_comma_between_commas_is_a_fault() -> None:
    with pytest.raises(BadRecord, match="decimal comma"):
        log(export("2026-01-14 07:10,24,0", "2026-01-14 07:20,24,5"))


def test_cells_and_header_that_name_different_units_are_a_fault() -> None:
    text = export("2026-01-14 07:20,1.2 mA", header="Time,Hazard current [µA]")
    with pytest.raises(BadRecord, match="cells say mA"):
        log(text, kind="monitor-current")


def test_a_monitor_that_changes_its_unit_is_read_row_by_row() -> None:
    text = export("2026-01-14 07:10,900 µA", "2026-01-14 07:20,1.2 mA", "2026-01-14 07:30,950 µA",
                  header="Time,Hazard current")  # fmt: skip
    found = log(text, kind="monitor-current")
    assert [each.value for each in found.samples] == pytest.approx([0.9e-3, 1.2e-3, 0.95e-3])


@pytest.mark.parametrize(
    ("kind", "cells", "worst"),
    [("monitor-current", ("0.2 mA", "1.9 mA"), 1.9e-3),
     ("monitor-resistance", ("> 10 Mohm", "42 kohm"), 42e3)],
)  # fmt: skip
def test_of_a_monitor_the_least_favourable_row_counts(
    kind: str, cells: tuple[str, str], worst: float
) -> None:
    text = export(f"2026-01-14 07:15,{cells[0]}", f"2026-01-14 07:25,{cells[1]}",
                  header="Time,Insulation or current")  # fmt: skip
    found = read(text, kind=kind, column="2")
    assert found.value == pytest.approx(worst)


@pytest.mark.parametrize(
    ("kind", "worst"), [("monitor-current", 1.9e-3), ("monitor-resistance", 0.2e3)]
)
def test_of_two_rows_of_one_time_the_less_favourable_counts(kind: str, worst: float) -> None:
    unit = "mA" if kind == "monitor-current" else "kohm"
    text = export(f"2026-01-14 07:20,0.2 {unit}", f"2026-01-14 07:20,1.9 {unit}", header="Time,X")
    assert log(text, kind=kind, column="X").samples[0].value == pytest.approx(worst)


def test_a_reading_beyond_the_range_keeps_its_bound() -> None:
    text = export("2026-01-14 07:15,> 10 Mohm", "2026-01-14 07:25,> 10 Mohm",
                  header="Time,Insulation")  # fmt: skip
    found = read(text, kind="monitor-resistance")
    assert (found.value, found.bound) == (1e7, ">")


def test_humidity_beyond_the_range_is_not_interpolated() -> None:
    found = read(PLAIN.replace("25.0", "< 25.0"))
    assert found.value is None
    assert "beyond the sensor's range" in found.reason


def test_fahrenheit_is_read_as_celsius() -> None:
    # 68 and 77 degrees Fahrenheit are 20 and 25 degrees Celsius exactly.
    text = export("2026-01-14 07:10,68", "2026-01-14 07:20,77", header="Time,Room temp (°F)")
    assert [each.value for each in log(text, kind="temperature").samples] == pytest.approx([20, 25])


# Flags


@pytest.mark.parametrize(
    ("rows", "flag"),
    [
        (("2026-01-14 07:20,1", "2026-01-14 07:10,2", "2026-01-14 07:30,3"), "out of order in 1"),
        (("2026-01-14 07:20,1", "2026-01-14 07:20,1", "2026-01-14 07:30,3"), "0 of them with different"),
        (("2026-01-14 07:20,1", "2026-01-14 07:20,2", "2026-01-14 07:30,3"), "1 of them with different"),
        (("2026-01-14 07:30,1", "2026-01-14 07:20,2", "2026-01-14 07:10,3"), "newest first"),
        (("2026-01-14 07:20,", "2026-01-14 07:25,fault", "2026-01-14 07:30,3"), "lines 2, 3: left out, no number"),
        (("2026-01-14 07:20,130", "2026-01-14 07:30,3"), "line 2: left out, a value that cannot be"),
        (("2026-01-14 25:20,30", "2026-01-14 07:30,3"), "line 2: left out, a time that does not exist"),
        (("2026-01-14 07:20,30", "sum,3"), "line 3: left out, no time"),
        (("2026-01-14 07:00,1", "2026-01-14 07:10,2", "2026-01-14 07:20,2", "2026-01-14 09:00,3"),
         "1 gap, the longest 100 min from 2026-01-14 07:20"),
    ],
)  # fmt: skip
def test_what_is_odd_is_said(rows: tuple[str, ...], flag: str) -> None:
    assert flag in "\n".join(log(export(*rows)).flags)


def test_a_log_with_nothing_odd_has_no_flag() -> None:
    assert log(PLAIN).flags == ()
    assert read(PLAIN).flags == ()


def steady(value: str, hours: int, start: str = "2026-01-14 00:00") -> list[str]:
    begin = datetime.fromisoformat(start)
    return [
        f"{begin + timedelta(minutes=10 * n):%Y-%m-%d %H:%M},{value}" for n in range(6 * hours + 1)
    ]


def test_a_value_that_stands_still_for_hours_is_said_near_the_event_only() -> None:
    text = export(*steady("31.0", 8))
    assert "the same value in 49 rows" in " ".join(read(text).flags)
    moving = [f"2026-01-14 {9 + n // 6:02}:{n % 6 * 10:02},{40 + n / 10}" for n in range(20)]
    assert "same value" not in " ".join(
        read(export(*steady("31.0", 8), *moving), "2026-01-14 11:20").flags
    )


def test_a_sensor_that_gives_zero_is_doubted() -> None:
    assert "a failed sensor?" in " ".join(read(PLAIN.replace("25.0", "0.0")).flags)
    assert "a failed sensor?" not in " ".join(read(PLAIN.replace("24.0", "0.0")).flags)


def test_a_clock_that_drifts_against_its_step_is_said() -> None:
    begin = datetime(2026, 1, 14)
    slow = [
        f"{begin + timedelta(seconds=601 * n):%Y-%m-%d %H:%M:%S},{20 + n % 3}" for n in range(60)
    ]
    true = [
        f"{begin + timedelta(seconds=600 * n):%Y-%m-%d %H:%M:%S},{20 + n % 3}" for n in range(60)
    ]
    assert "rows wander +59 s" in " ".join(log(export(*slow)).flags)
    assert "wander" not in " ".join(log(export(*true)).flags)


def test_twelve_hour_times_without_am_and_pm_are_said() -> None:
    rows = [
        f"{day}.01.2026 {hour}:00;3{hour % 10}"
        for day in (14, 15)
        for hour in (*range(1, 13), *range(1, 13))
    ]
    found = log("Time;Humidity [%]\n" + "\n".join(rows))
    assert "without AM and PM" in " ".join(found.flags)


# Clock changes; the outside reference is zoneinfo


def test_the_doubled_hour_is_left_out_and_an_event_in_it_has_no_reading() -> None:
    # Vienna 2026-10-25: 02:00 to 03:00 happens twice.
    rows = [f"2026-10-25 {h:02}:{m:02},{30 + h}" for h in (1, 2, 2, 3, 4) for m in (0, 20, 40)]
    found = log(export(*rows), zone=VIENNA)
    assert "lines 5, 6, 7 and 3 more: left out, the clock change doubles" in " ".join(found.flags)
    assert reading_at(found, parse("2026-10-25 02:30+02:00"), VIENNA).value is None
    with pytest.raises(InvalidValue, match="twice"):
        reading_at(found, parse("2026-10-25 02:30"), VIENNA)
    assert reading_at(found, parse("2026-10-25 03:30"), VIENNA).value == pytest.approx(33.0)


def test_the_doubled_hour_with_offsets_is_read() -> None:
    rows = [f"2026-10-25T02:{m:02}:00{z},{v}" for z, v in (("+02:00", 30), ("+01:00", 36))
            for m in (0, 20, 40)]  # fmt: skip
    found = log(export(*rows), zone=None)
    assert reading_at(found, parse("2026-10-25 02:20+02:00"), VIENNA).value == pytest.approx(30)
    assert reading_at(found, parse("2026-10-25 02:20+01:00"), VIENNA).value == pytest.approx(36)


def test_a_time_that_the_zone_skips_shows_a_clock_that_does_not_follow() -> None:
    found = log(
        export("2026-03-29 01:50,30", "2026-03-29 02:10,31", "2026-03-29 03:10,31"), zone=VIENNA
    )
    assert "line 3: left out, the clock change skips this hour" in " ".join(found.flags)


@given(st.datetimes(datetime(2026, 1, 1), datetime(2026, 12, 31)))
@settings(max_examples=60, deadline=None)
def test_wall_times_are_placed_as_zoneinfo_places_them(wall: datetime) -> None:
    wall = wall.replace(second=0, microsecond=0)
    local = wall.replace(tzinfo=ZoneInfo(VIENNA))
    found = log(export(f"{wall:%Y-%m-%d %H:%M},30", "2025-01-01 00:00,30"), zone=VIENNA).moments
    plain = local.utcoffset() == local.replace(fold=1).utcoffset()
    assert (local.timestamp() in [at for at, _ in found]) == plain


# The reading


def test_doubt_joins_the_rows_the_step_of_the_values_and_the_sensor() -> None:
    # JCGM 100:2008: 4.3.7, half-width a gives a / sqrt(3), a = 0.25 between 24.5 and 25.0;
    # F.2.2.1, a step of 0.5 gives 0.29 times 0.5; 5.1.2, squares add. The sensor's own is 2.
    found = reading_at(log(PLAIN), parse("2026-01-14 07:20"), "UTC", sensor_doubt=2.0)
    assert found.doubt == pytest.approx((0.25**2 / 3 + (0.29 * 0.5) ** 2 + 2.0**2) ** 0.5, rel=1e-3)
    assert read(PLAIN).doubt == pytest.approx((0.25**2 / 3 + (0.29 * 0.5) ** 2) ** 0.5, rel=0.01)


def test_an_event_known_to_the_hour_has_the_doubt_of_the_hour() -> None:
    rows = [f"2026-01-14 {7 + n // 6:02}:{n % 6 * 10:02},{20 + n}" for n in range(13)]
    found = read(export(*rows), "2026-01-14 07h")
    assert (found.low, found.high) == (20, 26)
    assert found.value == pytest.approx(23)


@pytest.mark.parametrize(
    ("at", "reason"),
    [("2026-01-14 06:00", "covers 2026-01-14 07:10 to 2026-01-14 07:30"),
     ("2026-01-14 07:30", "not the whole time"),
     ("2026-01-14 morning", "not the whole time"),
     ("2026-01-14", "not the whole time")],
)  # fmt: skip
def test_outside_the_log_there_is_no_reading(at: str, reason: str) -> None:
    found = read(PLAIN, at)
    assert found.value is None
    assert reason in found.reason


def test_an_event_known_to_half_a_day_has_no_reading() -> None:
    assert "not known to the hour" in read(export(*steady("30", 14)), "2026-01-14 morning").reason


def test_a_hole_of_more_than_an_hour_is_not_bridged() -> None:
    found = read(export("2026-01-14 06:50,24", "2026-01-14 07:52,25"))
    assert found.value is None
    assert "62 min" in found.reason
    assert read(export("2026-01-14 06:50,24", "2026-01-14 07:50,25")).value is not None


def test_the_hour_before_agrees_with_the_statistics_of_the_standard_library() -> None:
    rows = [f"2026-01-14 {5 + n // 6:02}:{n % 6 * 10:02},{30 - n * n / 20:.2f}" for n in range(20)]
    text = export(*rows)
    hour = [(datetime.fromisoformat(a), float(b)) for a, b in list(csv.reader(io.StringIO(text)))[1:]
            if "2026-01-14 06:20" <= a <= "2026-01-14 07:20"]  # fmt: skip
    found = read(text).before
    assert found is not None
    assert found.rows == len(hour) == 7
    assert found.mean == pytest.approx(statistics.fmean(v for _, v in hour))
    line = statistics.linear_regression(
        [t.timestamp() / 3600 for t, _ in hour], [v for _, v in hour]
    )
    assert found.slope == pytest.approx(line.slope, rel=1e-4)


def test_a_clock_seven_minutes_slow_is_put_right() -> None:
    slow = export("2026-01-14 07:03,24.0", "2026-01-14 07:13,24.5", "2026-01-14 07:23,25.0")
    assert read(slow, ahead=clock_error("-7 min")).value == pytest.approx(24.525)


@pytest.mark.parametrize("text", ["3 min", "+3", "+3 apples", "+2 d"])
def test_a_clock_error_needs_sign_and_unit_and_is_below_a_day(text: str) -> None:
    with pytest.raises(InvalidValue):
        clock_error(text)


def test_the_excerpt_names_the_file_and_holds_the_rows_used() -> None:
    text = read(PLAIN).excerpt
    assert log(PLAIN).sheet.digest in text
    assert "3: 2026-01-14 07:20,24.5\n4: 2026-01-14 07:30,25.0" in text


def test_the_excerpt_fits_into_the_field_of_the_record() -> None:
    begin = datetime(2026, 1, 14, 6)
    rows = [f"{begin + timedelta(seconds=n):%Y-%m-%d %H:%M:%S},{20 + n % 7}" for n in range(6000)]
    found = read(export(*rows))
    assert len(found.excerpt) <= 6000
    assert "rows further from the event left out" in found.excerpt
    assert found.excerpt.endswith("2026-01-14 07:21:00,22")


def test_a_full_log_of_events_keeps_the_rows_nearest_to_the_event() -> None:
    begin = datetime(2026, 1, 14, 6)
    rows = [f"{begin + timedelta(seconds=10 * n):%Y-%m-%d %H:%M:%S},event {n}" for n in range(1000)]
    found = read(export(*rows), kind="events")
    assert "2026-01-14 07:20:00,event 480" in found.excerpt
    assert "event 400," not in found.excerpt
    assert len(found.excerpt) <= 6000


@pytest.mark.parametrize(
    ("kind", "cells", "flagged"),
    [("monitor-current", ("1.5 mA", "1.6 mA", "7.4 mA"), True),
     ("monitor-current", ("1.5 mA", "1.6 mA", "1.7 mA"), False),
     ("monitor-resistance", ("900 kohm", "900 kohm", "30 kohm"), True),
     ("monitor-resistance", ("900 kohm", "900 kohm", "890 kohm"), False)],
)  # fmt: skip
def test_a_monitor_that_is_worse_within_the_hour_raises_the_question_of_its_clock(
    kind: str, cells: tuple[str, ...], flagged: bool
) -> None:
    text = export(
        *(f"2026-01-14 07:{15 + 10 * n},{cell}" for n, cell in enumerate(cells)), header="Time,X"
    )
    assert (
        "is the log's clock right?" in " ".join(read(text, kind=kind, column="X").flags)
    ) == flagged


def test_a_log_of_events_keeps_its_rows_and_says_nothing_about_alarms() -> None:
    text = export("2026-01-14 07:19,ALARM", "2026-01-14 09:30,reset", header="Time,Event")
    found = read(text, kind="events")
    assert found.value is None
    assert "07:19,ALARM" in found.excerpt
    assert "reset" in found.excerpt  # one row beyond the hour after, so that its end is seen


# Properties

SERIES = st.lists(st.integers(0, 1000), min_size=4, max_size=30)


def rows_of(values: list[int], start: datetime) -> list[str]:
    return [
        f"{start + timedelta(minutes=7 * n):%Y-%m-%d %H:%M},{v / 10}" for n, v in enumerate(values)
    ]


def said(found: LogReading) -> tuple[object, ...]:
    return found.value, found.low, found.high, found.doubt, found.before, found.reason, found.flags


@given(SERIES, st.randoms(use_true_random=False))
@settings(max_examples=60, deadline=None)
def test_the_order_of_rows_changes_nothing_but_the_flag(values: list[int], shuffle: object) -> None:
    rows = rows_of(values, datetime(2026, 1, 14, 7))
    other = rows.copy()
    shuffle.shuffle(other)  # type: ignore[attr-defined]
    assert said(read(export(*rows))) == said(read(export(*other)))


@given(SERIES, st.integers(-(10**6), 10**6))
@settings(max_examples=60, deadline=None)
def test_moving_log_and_event_by_the_same_time_changes_nothing(values: list[int], by: int) -> None:
    move = timedelta(minutes=by)
    first = read(export(*rows_of(values, datetime(2026, 1, 14, 7))))
    start = datetime(2026, 1, 14, 7) + move
    at = datetime(2026, 1, 14, 7, 20) + move
    second = read(export(*rows_of(values, start)), f"{at:%Y-%m-%d %H:%M}")
    assert (first.value, first.low, first.high, first.doubt) == pytest.approx(
        (second.value, second.low, second.high, second.doubt), nan_ok=True
    )
    assert bool(first.reason) == bool(second.reason)


@given(SERIES)
@settings(max_examples=60, deadline=None)
def test_the_reading_lies_between_the_rows_around_it(values: list[int]) -> None:
    found = read(export(*rows_of(values, datetime(2026, 1, 14, 7, 5))))
    if found.value is not None and found.low is not None and found.high is not None:
        assert found.low - 1e-9 <= found.value <= found.high + 1e-9


# Hostile files

HOSTILE = {
    "empty": b"",
    "blank": b"\n\n \n",
    "no time at all": b"a,b\nc,d\n",
    "NUL": b"Time,Humidity [%]\n2026-01-14 07:20,2\x004\n",
    "binary": bytes(range(256)) * 50,
    "half a UTF-16 file": b"\xff\xfeT",
    "a cell of a megabyte": b'Time,Humidity [%]\n2026-01-14 07:20,"' + b"9" * 10**6 + b'"\n',
    "an open quote": b'Time,Humidity [%]\n2026-01-14 07:20,"24\n2026-01-14 07:30,25\n',
    "dates only": b"2026-01-14,24\n",
    "month 13": b"Time,Humidity [%]\n13/13/2026 07:20,24\n",
    "year 0": b"Time,Humidity [%]\n0000-01-14 07:20,24\n",
    "huge number": b"Time,Humidity [%]\n2026-01-14 07:20," + b"9" * 60 + b"\n",
    "a zip file": b"PK\x03\x04" + b"\x00" * 100,
}


@pytest.mark.parametrize("what", HOSTILE)
@pytest.mark.parametrize("kind", KINDS)
def test_a_hostile_file_is_one_message_or_no_reading(what: str, kind: str) -> None:
    try:
        found = read(HOSTILE[what], kind=kind)
    except TriageError as error:
        assert "air.csv" in str(error)
    else:
        assert found.value is None


def test_a_file_that_is_no_text_is_called_so() -> None:
    with pytest.raises(BadRecord, match="byte 4 is zero; not a text log"):
        log(HOSTILE["a zip file"])


def test_formulas_of_a_spreadsheet_stay_text_and_are_not_numbers() -> None:
    found = log(export("2026-01-14 07:20,=1+1", "2026-01-14 07:30,=cmd|'/c x'!A1"))
    assert found.samples == ()
    assert "lines 2, 3: left out, no number in it" in found.flags


def test_more_rows_than_allowed_are_refused_with_the_limit(monkeypatch: pytest.MonkeyPatch) -> None:
    assert MOST_ROWS == 1_000_000
    monkeypatch.setattr("triage.logs.sheet.MOST_ROWS", 100)
    assert len(log("Time,Humidity [%]\n" + "2026-01-14 07:20,2\n" * 100).moments) == 100
    with pytest.raises(BadRecord, match="more than 100 rows"):
        log("Time,Humidity [%]\n" + "2026-01-14 07:20,2\n" * 101)


@given(st.binary(max_size=300))
@settings(max_examples=150, deadline=None)
def test_any_bytes_give_a_reading_or_a_known_error(data: bytes) -> None:
    try:
        found = read(b"Time,Humidity [%]\n2026-01-14 07:20,24\n" + data)
    except TriageError as error:
        assert str(error)
    else:
        assert found.value is None or 0 <= found.value <= 100


@given(
    st.lists(st.text(st.sampled_from('0123456789.,;:-/ \t"AP M%RH<>TZ+'), max_size=30), max_size=8)
)
@settings(max_examples=300, deadline=None)
def test_any_text_like_a_log_gives_a_reading_or_a_known_error(lines: list[str]) -> None:
    try:
        found = read("\n".join(("Time,Humidity [%]", *lines, "2026-01-14 07:20,24")))
    except TriageError as error:
        assert str(error)
    else:
        assert found.value is None or 0 <= found.value <= 100

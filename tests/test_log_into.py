"""Values of a log go into a copy of the record, which says just that in addition."""

import subprocess
import sys
from pathlib import Path

import pytest
from typer.testing import CliRunner

from triage.cli import app
from triage.clock import parse as parse_time
from triage.documents.log_reading import log_lines
from triage.errors import CannotTell, CannotWrite
from triage.logs.into import as_yaml, values_for, with_values
from triage.logs.log import loads
from triage.logs.options import Options
from triage.logs.question import Question, answer
from triage.logs.reading import LogReading, reading_at
from triage.record import load as load_record
from triage.record import loads as record_from
from triage.site import load as load_site
from triage.site import loads as site_from
from triage.site import no_site
from triage.strict_yaml import parse

CSV = b"Time,OR wall sensor humidity [%]\n2026-01-14 07:10,24.0\n2026-01-14 07:30,25.0\n"
START = "# kept\nschema: 1\nid: 0123456789abcdef0123456789abcdef\nevent: {at: 2026-01-14 07:20}\n"
SITE = (
    "schema: 1\nzone: Etc/UTC\nrooms:\n"
    "- {id: or-1, area: operating_room, sensor: OR wall sensor, sensor_doubt: 2 points}\n"
)


def reading(kind: str = "humidity", data: bytes = CSV) -> LogReading:
    log = loads(data, "air.csv", Options(kind, "UTC"))
    return reading_at(log, parse_time("2026-01-14 07:20"), "UTC")


ENDINGS = {
    "no such section": "",
    "an empty section": "surroundings:\n",
    "a blank record's comments": "surroundings:\n  # humidity:  # Such as 24 %.\nsupply:\n",
    "a section of its own": "surroundings:\n  floor: vinyl  # stays\n  footwear: esd\nsupply: {kind: earthed}\n",
    "an unknown answer": "surroundings:\n    humidity: unknown\n    floor: vinyl\n",
    "braces": "surroundings: {floor: vinyl, humidity: unknown, footwear: esd}\n",
    "another section behind": "surroundings:\n  floor: vinyl\nitems:\n- {id: a, name: 'x: y'}\n",
    "no line end": "surroundings:\n  floor: vinyl",
    "an unknown section": "surroundings: unknown\n",
}


@pytest.mark.parametrize("ending", ENDINGS)
def test_the_copy_says_what_the_record_said_and_the_reading(ending: str) -> None:
    before = parse(START + ENDINGS[ending], "before").tree
    text = with_values(START + ENDINGS[ending], "record", values_for(reading()))
    after = parse(text, "after").tree
    own = before.get("surroundings")
    own = {k: v for k, v in own.items() if v != "unknown"} if isinstance(own, dict) else {}
    assert after.pop("surroundings") == own | values_for(reading())["surroundings"]
    before.pop("surroundings", None)
    assert after == before
    assert text.startswith("# kept\n")
    incident = record_from(text).incident
    assert incident.surroundings.humidity is not None
    assert incident.surroundings.humidity.text == "24.5 %"


@pytest.mark.parametrize(
    "ending", ["surroundings: {humidity: 40 %}\n", "surroundings:\n  log_excerpt: x\n"]
)
def test_an_answer_that_stands_is_never_replaced(ending: str) -> None:
    with pytest.raises(CannotWrite, match="already holds an answer"):
        with_values(START + ending, "record", values_for(reading()))


def test_a_form_of_file_that_is_not_understood_is_refused_and_not_damaged() -> None:
    with pytest.raises(CannotWrite, match="by hand"):
        with_values(
            "{schema: '1', surroundings: {floor: vinyl}}\n", "record", values_for(reading())
        )


@pytest.mark.parametrize(
    ("kind", "header", "cell", "section", "field", "text"),
    [("temperature", "Temp [degC]", "21.25", "surroundings", "temperature_at_sensor", "21.2 degC"),
     ("monitor-current", "Hazard current [mA]", "1.9", "supply", "current_reading", "1.90 mA"),
     ("monitor-resistance", "Insulation [kohm]", ">500", "supply", "resistance_reading", "> 500 kΩ")],
)  # fmt: skip
def test_each_kind_has_its_field(
    kind: str, header: str, cell: str, section: str, field: str, text: str
) -> None:
    data = f"Time,{header}\n2026-01-14 07:10,{cell}\n2026-01-14 07:30,{cell}\n".encode()
    values = values_for(reading(kind, data))
    assert values[section][field] == text
    made = with_values(START, "record", values)
    assert record_from(made).tree[section][field] == text


def test_what_is_printed_is_what_the_record_understands() -> None:
    lines = as_yaml(values_for(reading()))
    assert parse("\n".join(lines), "printed").tree == values_for(reading())


@pytest.mark.parametrize(
    "name", ["a: b.csv", "- x.csv", "#x.csv", "'x'.csv", " x.csv", "x\u202e.csv"]
)
def test_no_file_name_breaks_the_lines(name: str) -> None:
    log = loads(CSV, name, Options("humidity", "UTC"))
    values = values_for(reading_at(log, parse_time("2026-01-14 07:20"), "UTC"))
    assert parse("\n".join(as_yaml(values)), "printed").tree == values


def test_without_a_reading_only_the_excerpt_is_kept() -> None:
    found = reading(data=b"Time,Humidity [%]\n2026-01-14 09:10,24.0\n2026-01-14 09:30,25.0\n")
    assert list(values_for(found)["surroundings"]) == ["log_excerpt"]


def files(folder: Path, room: str = "or-1") -> tuple[Path, Path, Path]:
    (folder / "air.csv").write_bytes(CSV)
    (folder / "case.yaml").write_text(START + f"place: {{room: {room}}}\n")
    (folder / "site.yaml").write_text(SITE)
    return folder / "air.csv", folder / "case.yaml", folder / "site.yaml"


def test_the_room_of_the_record_names_the_sensor_and_its_doubt(tmp_path: Path) -> None:
    air, case, _ = files(tmp_path)
    found = answer(air, Options(), Question(None, case, site_from(SITE)))
    assert found.sensor_doubt == 2.0
    # Rows of 24 and 25: half-width 0.5, and a step of 1; JCGM 100:2008, 4.3.7 and F.2.2.1.
    assert found.doubt == pytest.approx((2.0**2 + 0.5**2 / 3 + 1 / 12) ** 0.5)


def test_another_sensor_than_the_rooms_is_said_and_does_not_lend_its_doubt(tmp_path: Path) -> None:
    air, case, _ = files(tmp_path)
    site = site_from(SITE.replace("OR wall", "AHU-2"))
    found = answer(air, Options(), Question(None, case, site))
    assert found.sensor_doubt == 0
    assert "the site file names 'AHU-2 sensor' for this room" in found.log.flags[-1]


def test_without_a_time_or_a_zone_it_asks(tmp_path: Path) -> None:
    air, _, _ = files(tmp_path)
    with pytest.raises(CannotTell, match="--at"):
        answer(air, Options(), Question(None, None, site_from(SITE)))
    with pytest.raises(CannotTell, match="--zone"):
        answer(air, Options(), Question("2026-01-14 07:20", None, no_site()))


def test_the_command_prints_and_writes_a_new_file_once(tmp_path: Path) -> None:
    air, case, site = files(tmp_path)
    new = tmp_path / "new.yaml"
    words = ["log", str(air), "--record", str(case), "--site", str(site), "--into", str(new)]
    done = CliRunner().invoke(app, words)
    assert done.exit_code == 0
    assert "At 2026-01-14 07:20: 24.5 %" in done.output
    assert record_from(new.read_text("utf-8")).incident.surroundings.sensor is not None
    before = new.read_bytes(), case.read_bytes()
    again = subprocess.run(
        [sys.executable, "-m", "triage", *words], capture_output=True, text=True, check=False
    )
    assert again.returncode == 1
    assert "name a new file" in again.stderr
    assert "Traceback" not in again.stderr
    assert (new.read_bytes(), case.read_bytes()) == before


@pytest.mark.parametrize("kind", ["humidity", "events"])
def test_every_sentence_of_the_command_fits_a_terminal(tmp_path: Path, kind: str) -> None:
    air, _, _ = files(tmp_path)
    done = CliRunner().invoke(
        app, ["log", str(air), "--at", "2026-01-14 07:20Z", "--zone", "UTC", "--kind", kind]
    )
    assert done.exit_code == 0
    assert all(len(line) <= 80 for line in done.output.splitlines() if not line.startswith("  "))


EXAMPLES = Path(__file__).parent.parent / "examples"
FIRST_FAULT = EXAMPLES / "incidents" / "or6-isolated-first-fault.yaml"


def test_the_example_logs_agree_with_the_example_record() -> None:
    site, record = load_site(EXAMPLES / "site.yaml"), load_record(FIRST_FAULT).incident
    said = Options(date_order="day-first")
    air = answer(EXAMPLES / "logs" / "or6-air.csv", said, Question(None, FIRST_FAULT, site))
    assert record.surroundings.humidity is not None
    assert air.value == pytest.approx(record.surroundings.humidity.value, abs=0.5)
    said = Options("monitor-current", zone="UTC", ahead=420)
    shown = answer(EXAMPLES / "logs" / "or6-monitor.csv", said, Question(None, FIRST_FAULT, site))
    assert record.supply.current_reading is not None
    assert shown.value == pytest.approx(record.supply.current_reading.value, rel=0.02)
    # Without the clock error the same log shows the supply as it was before the fault.
    said = Options("monitor-current", zone="UTC")
    early = answer(EXAMPLES / "logs" / "or6-monitor.csv", said, Question(None, FIRST_FAULT, site))
    assert early.value == pytest.approx(1.5e-3, rel=0.05)
    assert "is the log's clock right?\n" in "\n".join(log_lines(early))

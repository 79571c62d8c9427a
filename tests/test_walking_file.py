"""A recorded walking test: what can be read, what is refused, and what is printed to enter."""

from itertools import product

import pytest
from typer.testing import CliRunner

from triage.cli import app
from triage.documents.walking import CHECK, walking_lines
from triage.errors import BadRecord, CannotRead, InvalidValue
from triage.quantity import parse as quantity
from triage.walking_file import parse, read

# Drawn by hand: the highest five 90 80 70 60 50, the lowest five -40 -20 -10 0 5.
BY_HAND = [0, 50, 10, 90, -20, 60, 5, 40, -40, 80, 0, 70, -10, 30, 0]
SAMPLES = tuple((i / 10, float(v)) for i, v in enumerate(BY_HAND))


def written(mark: str, decimal: str, header: bool, end: str) -> str:
    head = [mark.join(("time (s)", "body voltage (V)"))] if header else []
    rows = [mark.join((str(t).replace(".", decimal), str(v).replace(".", decimal)))
            for t, v in SAMPLES]  # fmt: skip
    return end.join(head + rows) + end


@pytest.mark.parametrize(("form", "header", "end"), [*product(
    [(",", "."), (";", "."), (";", ","), ("\t", ","), ("\t", ".")], [True, False], ["\n", "\r\n"]
)])  # fmt: skip
def test_every_usual_way_of_writing_columns_is_read_alike(form, header, end):
    assert parse(written(*form, header, end), "walk.csv") == SAMPLES


@pytest.mark.parametrize("text", [
    "", "\n\n", "time,voltage\n", "0;1;2\n1;2;3\n", "0,1,2\n", "0 1\n1 2\n", "0;\n", "0;nan\n",
    "0;inf\n", "a;b\nc;d\n", "0;1\n1;x\n",
])  # fmt: skip
def test_what_is_not_two_columns_of_numbers_is_refused(text):
    with pytest.raises(BadRecord, match="walk.csv"):
        parse(text, "walk.csv")


@pytest.mark.parametrize("header", ["time (ms);V", "s;kV", "t in min,U in V"])
def test_another_unit_in_the_header_is_refused_and_never_read_as_volts(header):
    with pytest.raises(BadRecord, match="seconds and volts"):
        parse(f"{header}\n0;1\n", "walk.csv")


def test_a_fault_names_its_line_and_at_most_five_are_named():
    with pytest.raises(BadRecord, match="walk.csv:2: expected") as error:
        parse("0;1\n" + "x\n" * 50, "walk.csv")
    assert len(error.value.faults) == 5


def test_a_file_that_is_missing_or_no_text_is_refused(tmp_path):
    with pytest.raises(CannotRead, match="No such file"):
        read(tmp_path / "none.csv")
    (tmp_path / "binary.csv").write_bytes(b"\xff\xfe\x00\x01")
    with pytest.raises(CannotRead, match="UTF-8"):
        read(tmp_path / "binary.csv")


def test_the_printed_value_is_the_larger_mean_and_can_be_entered_as_it_stands():
    line = next(line for line in walking_lines(SAMPLES) if line.startswith("Enter: "))
    value = line.rsplit("value: ", 1)[1]
    assert quantity(value, "voltage").value == pytest.approx(70)
    assert f"kind: {CHECK}," in line


def test_a_person_charged_negatively_gets_the_same_value():
    turned = [(t, -v) for t, v in SAMPLES]
    lines = list(walking_lines(turned))
    assert any("value: 70" in line for line in lines)


def test_too_few_steps_are_refused():
    with pytest.raises(InvalidValue, match="5 peaks"):
        list(walking_lines(SAMPLES[:6]))


def test_the_command_prints_it_and_a_bad_file_is_one_message(tmp_path):
    path = tmp_path / "walk.csv"
    path.write_text(written(";", ",", True, "\n"), "utf-8")
    done = CliRunner().invoke(app, ["walking", str(path)])
    assert done.exit_code == 0 and "Enter: kind: static_reenactment" in done.stdout
    path.write_text("x", "utf-8")
    assert isinstance(CliRunner().invoke(app, ["walking", str(path)]).exception, BadRecord)

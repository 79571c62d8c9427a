"""A recorded walking test: a text file of time and voltage, two columns, read strictly."""

import re
from math import isfinite
from pathlib import Path

from triage.errors import BadRecord, CannotRead

MOST_BYTES = 20_000_000
MOST_SAMPLES = 1_000_000
_OTHER_UNIT = re.compile(r"\b(?:kV|mV|uV|ms|us|min|minutes?|h|hours?)\b")
_MARKS = ";\t,"


def read(path: Path) -> tuple[tuple[float, float], ...]:
    """Samples of a walking test.

    Args:
        path: a text file, one sample a line: time [s] and voltage [V], with comma, semicolon or
            tab between; with semicolon or tab a decimal comma is understood. A first line of
            words is taken as the header.

    Returns:
        (time [s], voltage [V]) in file order.

    Raises:
        CannotRead: no such file, a folder, no permission, not text.
        BadRecord: a line that is not two numbers, or a header that names other units.
    """
    try:
        with path.open("rb") as file:
            data = file.read(MOST_BYTES + 1)
        text = data.decode("utf-8-sig")
    except OSError as error:
        reason = error.strerror or "cannot be opened"
        raise CannotRead(f"{path}: {reason}; give the path of a text file") from None
    except UnicodeDecodeError:
        raise CannotRead(f"{path}: not UTF-8 text; export the samples as CSV") from None
    if len(data) > MOST_BYTES:
        raise BadRecord([f"{path}: more than {MOST_BYTES} bytes; export the walk alone"])
    return parse(text, str(path))


def parse(text: str, name: str) -> tuple[tuple[float, float], ...]:
    """Samples from the text of a file.

    Args:
        text: of the file. name: for messages.

    Raises:
        BadRecord: as for `read`; at most five faults are named.

    >>> parse("time (s);voltage (V)\\n0,0;12,5\\n0,1;-3", "walk.csv")
    ((0.0, 12.5), (0.1, -3.0))
    """
    lines = [(n, line) for n, line in enumerate(text.splitlines(), 1) if line.strip()]
    if lines and not any(each.isdigit() for each in re.split(f"[{_MARKS}]", lines[0][1])[0]):
        header = lines.pop(0)[1]
        if wrong := _OTHER_UNIT.search(header):
            raise BadRecord([f"{name}:1: the header says {wrong[0]}; export seconds and volts"])
    found: list[tuple[float, float]] = []
    faults: list[str] = []
    for number, line in lines[: MOST_SAMPLES + 1]:
        sample = _sample(line)
        if sample is None:
            faults.append(f"{name}:{number}: expected time and voltage, found '{line[:40]}'")
        else:
            found.append(sample)
    if len(lines) > MOST_SAMPLES:
        faults.append(f"{name}: more than {MOST_SAMPLES} samples; export the walk alone")
    if not found and not faults:
        faults.append(f"{name}: no samples in it")
    if faults:
        raise BadRecord(faults[:5])
    return tuple(found)


def _sample(line: str) -> tuple[float, float] | None:
    """Two numbers of one line, or None."""
    mark = next((each for each in _MARKS if each in line), None)
    if mark is None:
        return None
    cells = [cell.strip() for cell in line.strip().rstrip(mark).split(mark)]
    if mark != ",":
        cells = [cell.replace(",", ".") for cell in cells]
    if len(cells) != 2:
        return None
    try:
        time, voltage = float(cells[0]), float(cells[1])
    except ValueError:
        return None
    return (time, voltage) if isfinite(time) and isfinite(voltage) else None

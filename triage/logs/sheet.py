"""The file of a log as rows: encoding, delimiter, header and the columns of its times.

What the file does not prove is asked for by naming the option that decides.
"""

import csv
import io
from collections.abc import Iterable, Iterator
from hashlib import sha256
from itertools import islice
from pathlib import Path

from triage.errors import BadRecord, CannotRead, CannotTell
from triage.frozen import frozen
from triage.logs.options import DELIMITERS, Options
from triage.logs.stamps import SHAPES, holds_time, time_columns
from triage.logs.values import is_unit
from triage.quantity import KINDS
from triage.strict_yaml import BAD_CHARACTERS

MOST_BYTES = 200_000_000
MOST_ROWS = 1_000_000
_SAMPLE = 300  # lines looked at to find delimiter and header
_UTF16_MARKS = (b"\xff\xfe", b"\xfe\xff")
_LOOKED_AT = 100_000  # bytes; a file without text shows it early
_LONGEST = 400  # characters of a line that are kept for the excerpt
Row = tuple[int, list[str]]


@frozen
class Sheet:
    """A log as rows of text.

    Args:
        name: file name, for messages.
        digest: SHA-256 of the file.
        encoding: as read.
        delimiter: between cells.
        header: names of the columns; empty where the file has none.
        header_line: its line number, 0 where there is none.
        times: columns of the time, one, or two where date and time stand apart.
        rows: line number and cells of every row with a time.
        others: line numbers below the header that hold no time.
    """

    name: str
    digest: str
    encoding: str
    delimiter: str
    header: tuple[str, ...]
    header_line: int
    times: tuple[int, ...]
    rows: tuple[Row, ...]
    others: tuple[int, ...]

    def stamp(self, cells: list[str]) -> str:
        """The time of a row as text."""
        return " ".join(cells[each].strip() for each in self.times)

    def line(self, cells: list[str] | tuple[str, ...]) -> str:
        """A row as one line of text."""
        mark = self.delimiter
        return mark.join(f'"{c}"' if mark in c else c for c in cells)[:_LONGEST]


def read_sheet(path: Path, options: Options) -> Sheet:
    """Read a log file as rows.

    Raises:
        CannotRead: no such file, a folder, no permission.
        BadRecord: not text, no row with a time, too large.
        CannotTell: readable in more than one way.
    """
    try:
        with path.open("rb") as file:
            data = file.read(MOST_BYTES + 1)
    except OSError as error:
        reason = error.strerror or "cannot be opened"
        raise CannotRead(f"{path}: {reason}; give the path of a CSV file") from None
    return from_bytes(data, path.name, options)


def from_bytes(data: bytes, name: str, options: Options) -> Sheet:
    """The rows of a log from the bytes of its file; raises as `read_sheet`."""
    if len(data) > MOST_BYTES:
        raise BadRecord([f"{name}: more than {MOST_BYTES // 10**6} MB; export the day alone"])
    text, encoding = _decoded(data, name, options)
    mark = _delimiter(text, name, options)
    above, times, below = _parted(_rows(io.StringIO(text), mark, name), name)
    rows = tuple(row for row in below if holds_time(row[1], times))
    others = tuple(row[0] for row in below if not holds_time(row[1], times))
    header, line = _header(above, times)
    return Sheet(name, sha256(data).hexdigest(), encoding, mark, header, line, times,
                 rows, others)  # fmt: skip


def _decoded(data: bytes, name: str, options: Options) -> tuple[str, str]:
    if b"\0" in data[:_LOOKED_AT] and data[:2] not in _UTF16_MARKS:
        raise BadRecord([f"{name}: byte {data.index(0)} is zero; not a text log"])
    encoding = options.encoding or ("utf-16" if data[:2] in _UTF16_MARKS else "utf-8")
    try:
        text = data.decode("utf-8-sig" if encoding == "utf-8" else encoding)
    except UnicodeDecodeError as error:
        raise CannotTell(
            f"{name}: byte {error.start} is not {encoding}; say --encoding latin-1 or cp1252 if "
            "the system exports that, or export as UTF-8"
        ) from None
    bad = BAD_CHARACTERS.search(text)
    if bad:
        line = text.count("\n", 0, bad.start()) + 1
        raise BadRecord([f"{name}:{line}: control character U+{ord(bad[0]):04X}; not a text log"])
    return text.replace("\r\n", "\n").replace("\r", "\n"), encoding


def _rows(lines: Iterable[str], mark: str, name: str) -> Iterator[Row]:
    """Line number and cells of every row that is not blank."""
    reader = csv.reader(lines, delimiter=mark, strict=True)
    try:
        for cells in reader:
            if any(cell.strip() for cell in cells):
                yield reader.line_num, cells
    except csv.Error as error:
        raise BadRecord([f"{name}:{reader.line_num}: not readable as CSV: {error}"]) from None


def _delimiter(text: str, name: str, options: Options) -> str:
    """The one delimiter that leaves a time and something beside it in a row."""
    if options.delimiter:
        return DELIMITERS[options.delimiter]
    fits = {}
    for word, mark in DELIMITERS.items():
        try:
            rows = list(_rows(islice(io.StringIO(text), _SAMPLE), mark, name))
        except BadRecord:  # a quote that only makes sense between other delimiters
            continue
        if any(len(cells) > len(found) for _, cells in rows if (found := time_columns(cells))):
            fits[word] = mark
    if len(fits) == 1:
        return next(iter(fits.values()))
    if fits:
        raise CannotTell(f"{name}: delimiter could be {' or '.join(fits)}; say --delimiter")
    raise BadRecord([f"{name}: no row with a time and a value; times look like {SHAPES}"])


def _parted(rows: Iterator[Row], name: str) -> tuple[list[Row], tuple[int, ...], list[Row]]:
    """Rows above the first time, the columns of that time, and all rows from there."""
    above: list[Row] = []
    for row in rows:
        times = time_columns(row[1])
        if len(times) > 1:
            both = " and ".join(str(each[0] + 1) for each in times)
            raise CannotTell(
                f"{name}:{row[0]}: columns {both} both hold a time; export with one of them"
            )
        if times:
            return above, times[0], [row, *_limited(rows, name)]
        above.append(row)
    raise BadRecord([f"{name}: no row with a time; times look like {SHAPES}"])


def _limited(rows: Iterator[Row], name: str) -> list[Row]:
    found = list(islice(rows, MOST_ROWS))
    if len(found) == MOST_ROWS:
        raise BadRecord([f"{name}: more than {MOST_ROWS} rows; export the day alone"])
    return found


def _header(above: list[Row], times: tuple[int, ...]) -> tuple[tuple[str, ...], int]:
    """The last row above the data of the same width; a row of units under it is joined to it."""
    if not above or _width(above[-1]) < max(2, times[-1] + 1):
        return (), 0
    line, cells = above[-1]
    names = [cell.strip() for cell in cells]
    if len(above) > 1 and _width(above[-2]) > 1 and all(map(_is_unit, filter(None, names))):
        line, upper = above[-2]
        names += [""] * (len(upper) - len(names))
        names = [f"{a.strip()} [{b.strip('[]() ')}]" if b else a.strip()
                 for a, b in zip(upper, names, strict=False)]  # fmt: skip
    return tuple(names), line


def _width(row: Row) -> int:
    return len(row[1])


def _is_unit(cell: str) -> bool:
    bare = cell.strip("[]() ")
    return bare.lower() in ("%rh", "rh", "-") or any(is_unit(bare, kind) for kind in KINDS)

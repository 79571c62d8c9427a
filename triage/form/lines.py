"""Lines in and out: a terminal, a pipe or a file of answers, all read alike. Nothing is redrawn."""

import sys
from collections.abc import Iterator
from io import TextIOWrapper
from pathlib import Path
from textwrap import wrap

from triage.errors import CannotRead
from triage.frozen import frozen
from triage.strict_yaml import MOST_BYTES
from triage.visible import visible

WIDTH = 78


@frozen
class Lines:
    """Where answers come from.

    Args:
        source: the answers, one a line.
        talks: whether a person sits there, who can be asked again.
    """

    source: Iterator[str]
    talks: bool

    def next(self) -> str | None:
        """The next answer; None at the end. Blank lines count only where a person typed them."""
        print("> " if self.talks else "", end="", flush=True)
        try:
            for line in self.source:
                if line.strip() or self.talks:
                    return line.strip()
        except KeyboardInterrupt:
            print()
        return None


def from_terminal() -> Lines:
    """Answers typed, or piped in; bytes that are no text are refused where they stand."""
    if isinstance(sys.stdin, TextIOWrapper):
        sys.stdin.reconfigure(errors="surrogateescape")
    return Lines(iter(sys.stdin.readline, ""), sys.stdin.isatty())


def from_file(path: Path) -> Lines:
    """Answers of a file, one a line.

    Raises:
        CannotRead: it cannot be opened, is not UTF-8 or is far too large.
    """
    try:
        text = path.read_text("utf-8-sig")
    except (OSError, UnicodeDecodeError) as error:
        reason = getattr(error, "strerror", None) or "is not UTF-8"
        raise CannotRead(f"{path}: {reason}; give a text file with one answer a line") from None
    if len(text) > MOST_BYTES:
        raise CannotRead(f"{path}: too large for a file of answers")
    return Lines(iter(text.splitlines()), talks=False)


def say(text: str = "", indent: str = "") -> None:
    """Print one paragraph, wrapped for 80 columns."""
    lines = wrap(
        visible(text), WIDTH, initial_indent=indent, subsequent_indent=indent,
        break_long_words=False, break_on_hyphens=False,
    )  # fmt: skip
    print("\n".join(lines))

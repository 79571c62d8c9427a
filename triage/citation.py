"""Citation: where a number comes from and how well that is known."""

from dataclasses import dataclass

from triage.errors import BadTable

KNOWN = ("published", "memory", "judgement")
"""How a number is known: the source was read (`published`), it is recalled and still to be
verified (`memory`), or it is our own choice with a stated reason (`judgement`)."""


@dataclass(frozen=True, slots=True)
class Citation:
    """The source of one number.

    Args:
        source: document, edition and year, or for a judgement its reason.
        place: clause, table, section or page; may be empty for a judgement.
        known: one of `KNOWN`.

    Raises:
        BadTable: no source, or `known` is another word.

    >>> Citation("IEC 60479-1", "table 1", "memory").text()
    'IEC 60479-1, table 1 (memory)'
    """

    source: str
    place: str = ""
    known: str = "judgement"

    def __post_init__(self) -> None:
        """Refuse a citation that says nothing."""
        if not self.source.strip():
            raise BadTable("a citation needs a source")
        if self.known not in KNOWN:
            raise BadTable(
                f"'{self.known}' does not say how a number is known; use {', '.join(KNOWN)}"
            )

    def text(self) -> str:
        """One line for print: source, place, how known."""
        where = f"{self.source}, {self.place}" if self.place else self.source
        return f"{where} ({self.known})"

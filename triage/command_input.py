"""What every command takes in: site file, records, their faults said, the exit status."""

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from triage.errors import TriageError
from triage.visible import visible

if TYPE_CHECKING:
    from triage.assessment import Assessment
    from triage.record import Record
    from triage.site import Site

BAD_INPUT, USAGE, SEVERE = 1, 2, 3
"""Exit statuses beside 0: some input was bad; wrong use; done, and some disposition is severe."""

Files = Annotated[list[Path], typer.Argument(help="Incident records, YAML.", show_default=False)]
SiteFile = Annotated[
    Path | None, typer.Option("--site", help="The facility's own file.", show_default=False)
]


def site_from(path: Path | None) -> "Site":
    """The site file, held against the tables; shipped values where there is none.

    Raises:
        CannotRead: the file cannot be opened.
        BadRecord: every fault found in it.
    """
    from triage.site import load, no_site

    if path is None:
        return no_site()
    from triage.site_check import site_faults

    found = load(path)
    faults = site_faults(found)
    if faults:
        from triage.errors import BadRecord

        raise BadRecord([f"{path}: {fault}" for fault in faults])
    return found


def record_from(path: Path) -> "Record | None":
    """A record, or None after its faults were printed."""
    from triage.record import load

    try:
        return load(path)
    except TriageError as error:
        complain(error)
        return None


def assessed(files: list[Path], site: "Site") -> "list[Assessment | None]":
    """Every record assessed; None where its faults were printed."""
    from triage.assessment import assess as assess_record

    found: list[Assessment | None] = []
    for path in files:
        record = record_from(path)
        try:
            found.append(assess_record(record, site) if record else None)
        except TriageError as error:
            complain(error, str(path))
            found.append(None)
    return found


def complain(error: TriageError, where: str = "") -> None:
    """Say every line of an error, with the file it is about where that is not in it."""
    for line in str(error).splitlines():
        typer.echo(visible(f"triage: {where + ': ' if where else ''}{line}"), err=True)


def status(found: "list[Assessment | None]") -> int:
    """1 if any input was bad, else 3 if any disposition is one of the two most severe."""
    from triage.documents.summary import severe

    if any(each is None for each in found):
        return BAD_INPUT
    return SEVERE if any(severe(each) for each in found if each) else 0

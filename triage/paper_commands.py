"""The commands that write a paper to be carried; all of them are thin."""

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from triage.command_input import Files, SiteFile, assessed, site_from, status
from triage.visible import visible

if TYPE_CHECKING:
    from collections.abc import Callable

    from triage.assessment import Assessment
    from triage.documents.paper import Paper

OneFile = Annotated[Path, typer.Argument(help="Incident record, YAML.", show_default=False)]
PaperFile = Annotated[
    Path, typer.Option("-o", "--out", help="PDF file to write.", show_default=False)
]


def card(out: PaperFile, site: SiteFile = None) -> None:
    """Write the wall card: the first minute for people without this program."""
    from triage.documents.card import card as made

    _write_paper(made(site_from(site)), out)


def slip(out: PaperFile, site: SiteFile = None) -> None:
    """Write the half-page slip for a witness's own words, twice on a page."""
    from triage.documents.slip import slip as made

    _write_paper(made(site_from(site)), out)


def sheet(
    out: PaperFile,
    site: SiteFile = None,
    room: Annotated[
        str | None, typer.Option(help="Room of the site file, to be confirmed on the sheet.")
    ] = None,
) -> None:
    """Write the two-page sheet for pen or tablet, with the limits in force at the site."""
    from triage.documents.sheet import sheet as made

    _write_paper(made(site_from(site), room), out)


def tag(file: OneFile, out: PaperFile, site: SiteFile = None) -> None:
    """Write a tag for each item of a record, readable at arm's length."""
    from triage.documents.tag import tag as made

    _write_case_paper(made, file, out=out, site=site)


def workrequest(file: OneFile, out: PaperFile, site: SiteFile = None) -> None:
    """Write the work request to facilities: what to record first, tests, return box."""
    from triage.documents.work_request import work_request

    _write_case_paper(work_request, file, out=out, site=site)


def careslip(file: OneFile, out: PaperFile, site: SiteFile = None) -> None:
    """Write the page for occupational health; no cause is named on it."""
    from triage.documents.care_slip import care_slip

    _write_case_paper(care_slip, file, out=out, site=site)


def staffslip(file: OneFile, out: PaperFile, site: SiteFile = None) -> None:
    """Write the page for the person who felt it; no cause is named on it."""
    from triage.documents.staff_slip import staff_slip

    _write_case_paper(staff_slip, file, out=out, site=site)


def brief(
    files: Files,
    out: PaperFile,
    site: SiteFile = None,
    at: Annotated[
        str | None,
        typer.Option("--at", help="Time due dates are held against; now if left out."),
    ] = None,
) -> None:
    """Write the open cases for the next shift, worst first."""
    from triage import clock
    from triage.documents.brief import brief as made

    chosen = site_from(site)
    found = assessed(files, chosen)
    unread = [str(path) for path, each in zip(files, found, strict=True) if each is None]
    moment = clock.parse(at) if at else clock.now()
    _write_paper(made([a for a in found if a], chosen, at=moment, unread=unread), out)
    raise typer.Exit(status(found))


def _write_paper(paper: "Paper", out: Path) -> None:
    from triage.documents.paper import write_paper

    for note in write_paper(paper, out):
        typer.echo(visible(f"{out}: {note}"), err=True)
    typer.echo(visible(f"{out}"))


def _write_case_paper(
    made: "Callable[[Assessment], Paper]", file: Path, *, out: Path, site: Path | None
) -> None:
    found = assessed([file], site_from(site))
    for each in found:
        if each is not None:
            _write_paper(made(each), out)
    raise typer.Exit(status(found))


PAPERS = (card, slip, sheet, tag, workrequest, careslip, staffslip, brief)
"""Every command of this file, in the order of the help."""

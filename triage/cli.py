"""The commands: parse, call one function, print. Heavy imports stay inside the command."""

import sys
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

app = typer.Typer(
    add_completion=False,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    no_args_is_help=True,
    help="From a shock report to checks, decisions and a report. It supports the responsible "
    "engineer and does not decide in the engineer's place.",
)

Files = Annotated[list[Path], typer.Argument(help="Incident records, YAML.", show_default=False)]
SiteFile = Annotated[
    Path | None, typer.Option("--site", help="The facility's own file.", show_default=False)
]


@app.command()
def check(files: Files, site: SiteFile = None) -> None:
    """Validate records only: every fault at once, then questions."""
    from triage.record import clock_faults

    zone, bad = _site(site).zone, 0
    for path in files:
        record = _record(path)
        faults = clock_faults(record, zone) if record else []
        for fault in faults:
            _complain(TriageError(fault))
        if record is None or faults:
            bad += 1
            continue
        typer.echo(f"{path}: readable, case {record.case}")
        for question in record.questions:
            typer.echo(visible(f"{path}: please confirm: {question}"))
    raise typer.Exit(BAD_INPUT if bad else 0)


@app.command()
def assess(
    files: Files,
    site: SiteFile = None,
    json: Annotated[bool, typer.Option("--json", help="The same as data.")] = False,
    why: Annotated[bool, typer.Option("--why", help="Each weight and number with source.")] = False,
) -> None:
    """Person, dispositions, defects, ranked causes, estimates, what is unknown, next checks."""
    found = list(_assessed(files, _site(site)))
    made = [each for each in found if each is not None]
    if json:
        import json as encoder

        from triage.documents.as_data import as_data
        from triage.documents.summary import summarise

        data = [as_data(each, summarise(each)) for each in made]
        typer.echo(encoder.dumps(data, ensure_ascii=False, indent=1))
    else:
        from triage.documents.plain_text import plain_text

        typer.echo("\n".join(plain_text(each, why=why) for each in made), nl=False)
    raise typer.Exit(_status(found))


@app.command()
def report(
    files: Files,
    out: Annotated[Path, typer.Option("-o", "--out", help="PDF file, or a folder for several.")],
    site: SiteFile = None,
    page_one: Annotated[bool, typer.Option("--page-one", help="Page one only.")] = False,
) -> None:
    """Write the incident report for the risk office, one PDF for each record."""
    from triage.documents.incident_report import write_report

    chosen = _site(site)
    found = []
    for path, each in zip(files, _assessed(files, chosen), strict=True):
        found.append(each)
        if each is not None:
            single = out.suffix.lower() == ".pdf"
            if single and len(files) > 1:
                raise typer.BadParameter("name a folder for several records", param_hint="-o")
            target = out if single else out / f"{path.stem}.pdf"
            for note in write_report(each, target, page_one_only=page_one):
                typer.echo(f"{target}: {note}", err=True)
            typer.echo(f"{target}")
    raise typer.Exit(_status(found))


@app.command()
def blank(
    out: Annotated[Path, typer.Argument(help="File to write; it must not exist.")],
) -> None:
    """Write an empty record with a new id and a comment at every field."""
    from triage.canonical import new_record_id
    from triage.documents.field_guide import blank_record
    from triage.errors import CannotWrite

    try:
        with out.open("x", encoding="utf-8") as file:
            file.write(blank_record(new_record_id()))
    except OSError as error:
        reason = error.strerror or "cannot be written"
        raise CannotWrite(f"{out}: {reason}; name a new file in a folder of yours") from None
    typer.echo(f"{out}")


@app.command()
def fields() -> None:
    """Print every field of a record with its words, as Markdown."""
    from triage.documents.field_guide import field_guide

    typer.echo(field_guide(), nl=False)


def _site(path: Path | None) -> "Site":
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


def _record(path: Path) -> "Record | None":
    """A record, or None after its faults were printed."""
    from triage.record import load

    try:
        return load(path)
    except TriageError as error:
        _complain(error)
        return None


def _assessed(files: list[Path], site: "Site") -> "list[Assessment | None]":
    from triage.assessment import assess as assess_record

    found: list[Assessment | None] = []
    for path in files:
        record = _record(path)
        try:
            found.append(assess_record(record, site) if record else None)
        except TriageError as error:
            _complain(error, str(path))
            found.append(None)
    return found


def _complain(error: TriageError, where: str = "") -> None:
    for line in str(error).splitlines():
        typer.echo(visible(f"triage: {where + ': ' if where else ''}{line}"), err=True)


def _status(found: "list[Assessment | None]") -> int:
    """1 if any input was bad, else 3 if any disposition is one of the two most severe."""
    from triage.documents.summary import severe

    if any(each is None for each in found):
        return BAD_INPUT
    return SEVERE if any(severe(each) for each in found if each) else 0


def main() -> None:
    """Run the command line; a known error is one message and exit status 1."""
    if sys.argv[1:] == ["--version"]:
        from triage import __version__

        print(f"triage {__version__}")
        return
    try:
        app()
    except TriageError as error:
        _complain(error)
        raise SystemExit(BAD_INPUT) from None

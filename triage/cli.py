"""The commands: parse, call one function, print. Heavy imports stay inside the command."""

import sys
from io import TextIOWrapper
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from triage.errors import TriageError
from triage.log_command import log
from triage.visible import visible

if TYPE_CHECKING:
    from collections.abc import Callable

    from triage.assessment import Assessment
    from triage.documents.paper import Paper
    from triage.history import History
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

OneFile = Annotated[Path, typer.Argument(help="Incident record, YAML.", show_default=False)]
PaperFile = Annotated[
    Path, typer.Option("-o", "--out", help="PDF file to write.", show_default=False)
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
        typer.echo(visible(f"{path}: readable, case {record.case}"))
        for question in record.questions:
            typer.echo(visible(f"{path}: please confirm: {question}"))
    raise typer.Exit(BAD_INPUT if bad else 0)


@app.command()
def assess(
    files: Files,
    site: SiteFile = None,
    json: Annotated[bool, typer.Option("--json", help="The same as data.")] = False,
    why: Annotated[bool, typer.Option("--why", help="Each weight and number with source.")] = False,
    earlier: Annotated[
        Path | None,
        typer.Option(help="Folder of earlier records: same asset, outlet group, room are shown."),
    ] = None,
) -> None:
    """Person, dispositions, defects, ranked causes, estimates, what is unknown, next checks."""
    chosen = _site(site)
    found = _assessed(files, chosen)
    before = None if earlier is None else _assessed(_records_in(earlier), chosen)
    made = [(each, _history(each, before)) for each in found if each is not None]
    if json:
        from triage.documents.as_data import as_data, as_json
        from triage.documents.summary import summarise

        typer.echo(as_json([as_data(each, summarise(each), past) for each, past in made]))
    else:
        from triage.documents.plain_text import plain_text

        texts = [plain_text(each, why=why, earlier=past) for each, past in made]
        typer.echo("\n".join(texts), nl=False)
    raise typer.Exit(_status([*found, *([None] if before and None in before else [])]))


@app.command()
def report(
    files: Files,
    out: Annotated[Path, typer.Option("-o", "--out", help="PDF file, or a folder for several.")],
    site: SiteFile = None,
    page_one: Annotated[bool, typer.Option("--page-one", help="Page one only.")] = False,
) -> None:
    """Write the incident report for the risk office, one PDF for each record."""
    from triage.documents.incident_report import write_report

    targets = _targets(files, out)
    found = []
    for target, each in zip(targets, _assessed(files, _site(site)), strict=True):
        found.append(each)
        if each is not None:
            for note in write_report(each, target, page_one_only=page_one):
                typer.echo(visible(f"{target}: {note}"), err=True)
            typer.echo(visible(f"{target}"))
    raise typer.Exit(_status(found))


def _targets(files: list[Path], out: Path) -> list[Path]:
    """A PDF for each record; none is written over another."""
    if out.suffix.lower() == ".pdf":
        if len(files) > 1:
            raise typer.BadParameter("name a folder for several records", param_hint="-o")
        return [out]
    targets = [out / f"{path.stem}.pdf" for path in files]
    if len(set(targets)) < len(targets):
        raise typer.BadParameter("two records have the same file name; rename one")
    return targets


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
    typer.echo(visible(f"{out}"))


@app.command()
def fields() -> None:
    """Print every field of a record with its words, as Markdown."""
    from triage.documents.field_guide import field_guide

    typer.echo(field_guide(), nl=False)


@app.command()
def sources(
    known: Annotated[
        str | None,
        typer.Option(
            "--known", help="Only those: published, memory or judgement.", show_default=False
        ),
    ] = None,
) -> None:
    """Print every number the program can print, with its source and how it is known."""
    from triage.documents.all_sources import as_lines

    typer.echo("\n".join(as_lines(known)))


@app.command()
def explain(
    file: Annotated[Path, typer.Argument(help="Incident record, YAML.", show_default=False)],
    name: Annotated[
        str | None, typer.Argument(help="Such as person_walking.voltage.", show_default=False)
    ] = None,
    site: SiteFile = None,
) -> None:
    """Unfold one estimate of a record to its inputs; without a name, list what there is."""
    from triage.documents.explain import explain as unfold
    from triage.documents.explain import names

    for found in _assessed([file], _site(site)):
        if found is None:
            raise typer.Exit(BAD_INPUT)
        typer.echo(visible("\n".join(unfold(found, name) if name else names(found))))


@app.command()
def walking(
    file: Annotated[Path, typer.Argument(help="CSV: time in s, voltage in V.", show_default=False)],
) -> None:
    """Find the peaks of a recorded walking test, and print what to enter in the record."""
    from triage.documents.walking import walking_lines
    from triage.walking_file import read

    typer.echo(visible("\n".join(walking_lines(read(file)))))


@app.command()
def record(
    file: Annotated[
        Path | None,
        typer.Argument(help="Draft or record; a new one without it.", show_default=False),
    ] = None,
    site: SiteFile = None,
    answers: Annotated[
        Path | None,
        typer.Option("--answers", help="Text file, one answer a line.", show_default=False),
    ] = None,
    by: Annotated[
        str | None, typer.Option("--by", help="Your role, not a name.", show_default=False)
    ] = None,
) -> None:
    """Fill in a record question by question; go on with a draft; add to a record."""
    from triage.form.lines import from_file, from_terminal
    from triage.form.open_form import Opening, open_form

    lines = from_file(answers) if answers else from_terminal()
    found = open_form(file, Opening(_site(site), lines, by))
    raise typer.Exit(SEVERE if found else 0)


@app.command()
def card(out: PaperFile, site: SiteFile = None) -> None:
    """Write the wall card: the first minute for people without this program."""
    from triage.documents.card import card as made

    _write_paper(made(_site(site)), out)


@app.command()
def slip(out: PaperFile, site: SiteFile = None) -> None:
    """Write the half-page slip for a witness's own words, twice on a page."""
    from triage.documents.slip import slip as made

    _write_paper(made(_site(site)), out)


@app.command()
def sheet(
    out: PaperFile,
    site: SiteFile = None,
    room: Annotated[
        str | None, typer.Option(help="Room of the site file, to be confirmed on the sheet.")
    ] = None,
) -> None:
    """Write the two-page sheet for pen or tablet, with the limits in force at the site."""
    from triage.documents.sheet import sheet as made

    _write_paper(made(_site(site), room), out)


@app.command()
def tag(file: OneFile, out: PaperFile, site: SiteFile = None) -> None:
    """Write a tag for each item of a record, readable at arm's length."""
    from triage.documents.tag import tag as made

    _write_case_paper(made, file, out=out, site=site)


@app.command()
def workrequest(file: OneFile, out: PaperFile, site: SiteFile = None) -> None:
    """Write the work request to facilities: what to record first, tests, return box."""
    from triage.documents.work_request import work_request

    _write_case_paper(work_request, file, out=out, site=site)


@app.command()
def careslip(file: OneFile, out: PaperFile, site: SiteFile = None) -> None:
    """Write the page for occupational health; no cause is named on it."""
    from triage.documents.care_slip import care_slip

    _write_case_paper(care_slip, file, out=out, site=site)


@app.command()
def staffslip(file: OneFile, out: PaperFile, site: SiteFile = None) -> None:
    """Write the page for the person who felt it; no cause is named on it."""
    from triage.documents.staff_slip import staff_slip

    _write_case_paper(staff_slip, file, out=out, site=site)


@app.command()
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

    chosen = _site(site)
    found = _assessed(files, chosen)
    unread = [str(path) for path, each in zip(files, found, strict=True) if each is None]
    moment = clock.parse(at) if at else clock.now()
    _write_paper(made([a for a in found if a], chosen, at=moment, unread=unread), out)
    raise typer.Exit(_status(found))


def _write_paper(paper: "Paper", out: Path) -> None:
    from triage.documents.paper import write_paper

    for note in write_paper(paper, out):
        typer.echo(visible(f"{out}: {note}"), err=True)
    typer.echo(visible(f"{out}"))


def _write_case_paper(
    made: "Callable[[Assessment], Paper]", file: Path, *, out: Path, site: Path | None
) -> None:
    found = _assessed([file], _site(site))
    for each in found:
        if each is not None:
            _write_paper(made(each), out)
    raise typer.Exit(_status(found))


app.command()(log)


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


def _records_in(folder: Path) -> list[Path]:
    from triage.errors import CannotRead

    if not folder.is_dir():
        raise CannotRead(f"{folder}: not a folder; name the folder that holds the earlier records")
    return sorted(folder.glob("*.yaml"))


def _history(each: "Assessment", before: "list[Assessment | None] | None") -> "History | None":
    if before is None:
        return None
    from triage.history import history

    return history(each, [other for other in before if other is not None])


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
    for stream in (sys.stdout, sys.stderr):
        if isinstance(stream, TextIOWrapper):  # a terminal without µ or Ω still gets its lines
            stream.reconfigure(errors="backslashreplace")
    if sys.argv[1:] == ["--version"]:
        from triage import __version__

        print(f"triage {__version__}")
        return
    try:
        app()
    except TriageError as error:
        _complain(error)
        raise SystemExit(BAD_INPUT) from None

"""The commands: parse, call one function, print. Heavy imports stay inside the command."""

import sys
from io import TextIOWrapper
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from triage.command_input import (
    BAD_INPUT,
    SEVERE,
    Files,
    SiteFile,
    assessed,
    complain,
    record_from,
    site_from,
    status,
)
from triage.errors import TriageError
from triage.log_command import log
from triage.paper_commands import PAPERS
from triage.visible import visible

if TYPE_CHECKING:
    from triage.assessment import Assessment
    from triage.history import History

app = typer.Typer(
    add_completion=False,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    no_args_is_help=True,
    help="From a shock report to checks, decisions and a report. It supports the responsible "
    "engineer and does not decide in the engineer's place.",
)


@app.command()
def check(files: Files, site: SiteFile = None) -> None:
    """Validate records only: every fault at once, then questions."""
    from triage.record import clock_faults

    zone, bad = site_from(site).zone, 0
    for path in files:
        record = record_from(path)
        faults = clock_faults(record, zone) if record else []
        for fault in faults:
            complain(TriageError(fault))
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
    chosen = site_from(site)
    found = assessed(files, chosen)
    before = None if earlier is None else assessed(_records_in(earlier), chosen)
    made = [(each, _history(each, before)) for each in found if each is not None]
    if json:
        from triage.documents.as_data import as_data, as_json
        from triage.documents.summary import summarise

        typer.echo(as_json([as_data(each, summarise(each), past) for each, past in made]))
    else:
        from triage.documents.plain_text import plain_text

        texts = [plain_text(each, why=why, earlier=past) for each, past in made]
        typer.echo("\n".join(texts), nl=False)
    raise typer.Exit(status([*found, *([None] if before and None in before else [])]))


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
    for target, each in zip(targets, assessed(files, site_from(site)), strict=True):
        found.append(each)
        if each is not None:
            for note in write_report(each, target, page_one_only=page_one):
                typer.echo(visible(f"{target}: {note}"), err=True)
            typer.echo(visible(f"{target}"))
    raise typer.Exit(status(found))


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

    for found in assessed([file], site_from(site)):
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
    found = open_form(file, Opening(site_from(site), lines, by))
    raise typer.Exit(SEVERE if found else 0)


app.command()(log)
for each in PAPERS:
    app.command()(each)


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
        complain(error)
        raise SystemExit(BAD_INPUT) from None

"""The command that reads a log; its many options say what the file itself does not prove."""

from pathlib import Path
from typing import Annotated

import typer

from triage.command_input import SiteFile, site_from
from triage.visible import visible


def log(
    file: Annotated[Path, typer.Argument(help="CSV export of one log.", show_default=False)],
    at: Annotated[str | None, typer.Option("--at", help="Time of the event.")] = None,
    record: Annotated[
        Path | None, typer.Option("--record", help="Record: its time and room are taken.")
    ] = None,
    into: Annotated[
        Path | None, typer.Option("--into", help="New file: the record with the lines added.")
    ] = None,
    site: SiteFile = None,
    kind: Annotated[
        str,
        typer.Option(help="humidity, temperature, monitor-current, monitor-resistance or events."),
    ] = "humidity",
    sensor: Annotated[str | None, typer.Option(help="Name of the sensor.")] = None,
    column: Annotated[str | None, typer.Option(help="Column of values, name or number.")] = None,
    unit: Annotated[str | None, typer.Option(help="Unit of the values.")] = None,
    zone: Annotated[str | None, typer.Option(help="Zone of its times; else the site's.")] = None,
    clock_error: Annotated[
        str | None, typer.Option(help="+3min if its clock is ahead, -3min if behind.")
    ] = None,
    date_order: Annotated[
        str | None, typer.Option(help="day-first, month-first or year-first.")
    ] = None,
    decimal: Annotated[str | None, typer.Option(help="point or comma.")] = None,
    delimiter: Annotated[str | None, typer.Option(help="semicolon, comma, tab or bar.")] = None,
    encoding: Annotated[str | None, typer.Option(help="utf-8, latin-1 or cp1252.")] = None,
) -> None:
    """Read a log at the time of an event, and print what to enter in the record."""
    from triage.documents.log_reading import log_lines
    from triage.logs.options import Options
    from triage.logs.options import clock_error as seconds
    from triage.logs.question import Question, answer, write_into

    ahead = seconds(clock_error) if clock_error else 0.0
    options = Options(kind, zone, sensor, column, unit, encoding, delimiter, decimal, date_order,
                      ahead)  # fmt: skip
    reading = answer(file, options, Question(at, record, site_from(site)))
    if into:
        write_into(reading, record, into)
    typer.echo(visible("\n".join(log_lines(reading))))

"""The facility's own file: rooms, editions in force, wording, policy, approvals.

It may tighten and choose; it never loosens. What it changes is printed on every report.
"""

import re
from pathlib import Path

from triage import words as w
from triage.canonical import canonical, digest
from triage.clock import Moment, find_zone
from triage.errors import InvalidValue
from triage.fields import (
    Part,
    Reader,
    WordList,
    amount,
    count,
    ident,
    part,
    parts,
    record_part,
    several,
    text,
    time,
    word,
)
from triage.frozen import frozen
from triage.incident import SCHEMA
from triage.quantity import Quantity
from triage.strict_yaml import Plain, parse, read

LOWEST_MISS_RATIO = 50
"""No site may value a missed fault at less than this many needless holds (judgement)."""
SHIPPED_MISS_RATIO = 100
"""Miss against needless hold where the site says nothing: a day's loan device against a
possible serious injury (judgement)."""

_FORBIDDEN = re.compile(
    r"[a-z]:/|[a-z]{2,}:/|javascript:|data:|mailto:|www[.]|(?:^|\s)[~.]{0,2}/\w|[.][.]/|\\"
    r"|[{][{%#]|[%#}][}]|[$][{]|</?[a-z!]",
    re.IGNORECASE,
)
"""Addresses, paths, template marks and markup."""
_PAPER: WordList = {"A4": (None, "210 by 297 mm"), "Letter": (None, "8.5 by 11 in")}
_DUTY: WordList = {
    "us_device": (None, "US medical-device reporting"),
    "us_work_injury": (None, "US work-injury recording"),
    "uk_work_injury": (None, "UK injury reporting"),
    "eu_device": (None, "EU device vigilance"),
}


@record_part
class Room(Part):
    """One room; its id survives renaming."""

    id: str = ident("Room id.", required=True)
    name: str | None = text("Name today.", 120)
    former_names: tuple[str, ...] = several("Earlier ids of the same room.", {})
    area: str | None = word("Kind of care area.", w.AREA)
    supply: str | None = word("Supply of its outlets.", w.SUPPLY)
    voltage: Quantity | None = amount("Nominal voltage.", "voltage", possible=(1, 1000))
    frequency: Quantity | None = amount("Frequency.", "frequency", possible=(1, 1000))
    monitor: str | None = word("Kind of monitor.", w.MONITOR)
    floor: str | None = word("Floor.", w.FLOOR)
    footwear: str | None = word("Footwear worn there by rule.", w.FOOTWEAR)
    casters: str | None = word("Usual wheels there.", w.CASTERS)
    sensor: str | None = text("Humidity sensor that serves it.", 80)
    sensor_doubt: Quantity | None = amount("Its standard uncertainty.", "humidity_points",
                                           possible=(0, 20))  # fmt: skip
    humidity_ceiling: Quantity | None = amount("Highest humidity allowed.", "relative_humidity",
                                               possible=(0, 100))  # fmt: skip
    outlet_group: str | None = text("Outlet group or panel.", 80)


@record_part
class Edition(Part):
    """The edition of limits in force for one check."""

    check: str = ident("Check id.", required=True)
    edition: str | None = text("Edition id of the table of limits.", 80)


@record_part
class Tightened(Part):
    """A limit made stricter than shipped."""

    limit: str = ident("Limit id.", required=True)
    value: str | None = text("Stricter value with unit.", 60)


@record_part
class Raised(Part):
    """A cause made more probable than shipped; only mains faults may be raised."""

    cause: str = ident("Cause id.", required=True)
    times: int | None = count("Times the shipped probability.", 1, 20)
    reason: str | None = text("Why.", 300)


@record_part
class Policy(Part):
    """How careful the house is; never less than shipped."""

    miss_ratio: int | None = count("A missed fault weighs as many needless holds.",
                                   LOWEST_MISS_RATIO, 100_000)  # fmt: skip
    raised: tuple[Raised, ...] = parts("Causes made more probable.", Raised)
    survey_window_days: int | None = count(
        "Window for earlier reports on one outlet group.", 1, 3650
    )


@record_part
class Wording(Part):
    """Texts the organisation prints; plain text only."""

    facts_marking: str | None = text("Marking of the facts part.", 300)
    analysis_marking: str | None = text("Marking of the analysis part.", 300)
    circulation_note: str | None = text("Note on circulated copies.", 300)


@record_part
class Contacts(Part):
    """Whom to call, by role."""

    risk_office: str | None = text("Risk office.", 120)
    biomedical: str | None = text("Biomedical engineering.", 120)
    facilities: str | None = text("Facilities.", 120)
    occupational_health: str | None = text("Occupational health.", 120)
    blood_exposure: str | None = text("Blood-exposure line.", 120)


@record_part
class Approval(Part):
    """Who approved this site file."""

    role: str | None = text("Role.", 80)
    at: Moment | None = time("When.")
    review_due: Moment | None = time("Review due.")


@record_part
class Retention(Part):
    """How long cases are kept."""

    years: int | None = count("Years kept after closing.", 1, 100)
    rare_role_threshold: int | None = count("Roles with fewer holders are grouped.", 1, 100)


@record_part
class Cost(Part):
    """Cost of a static control measure at this site."""

    control: str = ident("Control id.", required=True)
    cost: str | None = text("Cost, as written.", 60)


@record_part
class PaperText(Part):
    """One sentence of the papers in the site's language."""

    id: str = ident("Id of the sentence in the catalogue of the papers.", required=True)
    text: str | None = text("The sentence in the language of this file.", 600)


@record_part
class SiteFile(Part):
    """The facility's own file."""

    schema: str = ident("Version of this form of file; always 1.", required=True)
    facility: str | None = text("Name of the facility as printed.", 120)
    zone: str | None = text("IANA time zone.", 60)
    language: str | None = text("Language tag.", 35)
    paper: str | None = word("Paper.", _PAPER)
    register: str | None = ident("Name of the register.")
    rooms: tuple[Room, ...] = parts("Rooms.", Room, 2000)
    editions: tuple[Edition, ...] = parts("Editions in force.", Edition)
    tightened: tuple[Tightened, ...] = parts("Limits made stricter.", Tightened)
    policy: Policy = part("Policy.", Policy)
    wording: Wording = part("Wording.", Wording)
    contacts: Contacts = part("Whom to call.", Contacts)
    duties: tuple[str, ...] = several("Duty regimes that apply.", _DUTY)
    retention: Retention = part("Retention.", Retention)
    costs: tuple[Cost, ...] = parts("Costs.", Cost)
    approvals: tuple[Approval, ...] = parts("Approvals.", Approval)
    papers: tuple[PaperText, ...] = parts("Sentences of the papers.", PaperText, 1000)


@frozen
class Site:
    """A site file as read.

    Args:
        file: its content.
        digest: SHA-256 of its canonical form; of nothing where no site file was given.
        questions: what looks doubtful in it.
    """

    file: SiteFile
    digest: str
    questions: tuple[str, ...] = ()

    @property
    def zone(self) -> str:
        """The zone that wall times are in; UTC where none was given."""
        return self.file.zone or "UTC"

    @property
    def miss_ratio(self) -> int:
        """Miss against needless hold."""
        return self.file.policy.miss_ratio or SHIPPED_MISS_RATIO

    def room(self, room_id: str | None) -> Room | None:
        """The room of an id, present or former."""
        for each in self.file.rooms:
            if room_id is not None and (each.id == room_id or room_id in each.former_names):
                return each
        return None


def no_site() -> Site:
    """Shipped values only, for a record assessed without a site file."""
    return Site(SiteFile(schema=SCHEMA), digest(b""))


def load(path: Path) -> Site:
    """Read a site file.

    Raises:
        CannotRead: the file cannot be opened.
        BadRecord: every fault found, each with its place.
    """
    return from_plain(read(path))


def loads(text: str, name: str = "site") -> Site:
    """Read a site file from text.

    Raises:
        BadRecord: every fault found, each with its place.
    """
    return from_plain(parse(text, name))


def from_plain(plain: Plain) -> Site:
    """Check a plain tree as a site file.

    Raises:
        BadRecord: every fault found, each with its place.
    """
    reader = Reader(plain)
    if not isinstance(plain.tree, dict) or not plain.tree:
        reader.fault("", "holds no site file; start with 'schema: 1'")
        reader.finish()
    _refuse_paths(reader, plain.tree, "")
    file: SiteFile = reader.build(SiteFile, plain.tree, "")
    if not reader.faults:
        _check(reader, file)
    reader.finish()
    return Site(file, digest(canonical(plain.tree)), tuple(reader.questions))


def _check(reader: Reader, file: SiteFile) -> None:
    if file.schema != SCHEMA:
        reader.fault(
            "schema", f"'{file.schema}' is not known here; this program reads schema {SCHEMA}"
        )
    if file.zone is not None:
        try:
            find_zone(file.zone)
        except InvalidValue as error:
            reader.fault("zone", str(error))
    seen: set[str] = set()
    for number, room in enumerate(file.rooms):
        for name in (room.id, *room.former_names):
            if name in seen:
                reader.fault(f"rooms[{number}].id", f"'{name}' names two rooms")
            seen.add(name)
    _check_once(reader, "editions", [each.check for each in file.editions])
    _check_once(reader, "tightened", [each.limit for each in file.tightened])
    _check_once(reader, "policy.raised", [each.cause for each in file.policy.raised])
    _check_once(reader, "papers", [each.id for each in file.papers])


def _check_once(reader: Reader, path: str, ids: list[str]) -> None:
    """Two rows for one thing: nobody could say which of them is in force."""
    for number, each in enumerate(ids):
        if each in ids[:number]:
            reader.fault(f"{path}[{number}]", f"'{each}' stands twice")


def _refuse_paths(reader: Reader, tree: object, path: str) -> None:
    """No paths, addresses or template marks anywhere in a site file."""
    if isinstance(tree, dict):
        for key, value in tree.items():
            _refuse_paths(reader, value, f"{path}.{key}" if path else str(key))
    elif isinstance(tree, list):
        for number, value in enumerate(tree):
            _refuse_paths(reader, value, f"{path}[{number}]")
    elif isinstance(tree, str):
        found = _FORBIDDEN.search(tree)
        if found:
            mark = found[0].strip()
            reader.fault(path, f"'{mark}' is not allowed; a site file holds plain words only")

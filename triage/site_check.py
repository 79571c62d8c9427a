"""A site file held against the shipped tables: it may tighten and choose, never loosen.

`site.py` reads the file alone; the command line asks here before it uses the file.
"""

import re
from collections.abc import Iterator

from triage.check_table import CheckKind, check_kinds
from triage.errors import InvalidValue
from triage.fields import table as rows_of
from triage.in_force import is_stricter
from triage.knowledge import knowledge
from triage.limits import Limit, load_limits
from triage.paper_texts import is_english, sentence_ids
from triage.quantity import parse
from triage.site import Edition, PaperText, Raised, Site, Tightened
from triage.tables import table


def site_faults(site: Site) -> list[str]:
    """Everything in a site file that the tables do not know or that would loosen them.

    Args:
        site: as read.

    Returns:
        One line a fault: path, what was found, what would do; empty for a sound file.
    """
    return list(_faults(site))


def _faults(site: Site) -> Iterator[str]:
    for number, edition in enumerate(site.file.editions):
        yield from _edition_faults(edition, f"editions[{number}]")
    for number, stricter in enumerate(site.file.tightened):
        yield from _tightened_faults(stricter, f"tightened[{number}]")
    for number, raised in enumerate(site.file.policy.raised):
        yield from _raised_faults(raised, f"policy.raised[{number}]")
    for number, sentence in enumerate(site.file.papers):
        yield from _paper_faults(sentence, site, f"papers[{number}]")
    for part in ("wording", "contacts"):
        for name, _ in rows_of(type(getattr(site.file, part))):
            yield from _wording_faults(getattr(getattr(site.file, part), name), f"{part}.{name}")


def _edition_faults(row: Edition, path: str) -> Iterator[str]:
    kind = check_kinds().get(row.check)
    if kind is None or not kind.limits_from:
        limited = ", ".join(k.id for k in check_kinds().values() if k.limits_from)
        yield f"{path}.check: '{row.check}' has no limit to choose; those with one: {limited}"
        return
    choices = _choices(kind)
    if row.edition not in choices:
        found = row.edition or "nothing"
        yield f"{path}.edition: '{found}' has no limit for {row.check}; use {', '.join(choices)}"


def _choices(kind: CheckKind) -> tuple[str, ...]:
    """Editions on file with a limit for a kind of check."""
    served = {source.check for source in kind.limits_from}
    rows = (r for r in load_limits().rows if r.check in served and r.kind == kind.quantity)
    return tuple(dict.fromkeys(row.edition.id for row in rows))


def _tightened_faults(row: Tightened, path: str) -> Iterator[str]:
    limit = next((each for each in load_limits().rows if each.id == row.limit), None)
    if limit is None:
        yield f"{path}.limit: no limit '{row.limit}' on file"
        return
    try:
        value = parse(row.value or "", limit.kind)
    except InvalidValue as error:
        yield f"{path}.value: {error}"
        return
    if value.bound or not (is_stricter(value.value, limit) or value.value == limit.value):
        yield f"{path}.value: '{value.text}' is not stricter; {_allowed(limit)}"


def _paper_faults(row: PaperText, site: Site, path: str) -> Iterator[str]:
    """A site brings its language; the shipped English sentences are not reworded."""
    if is_english(site.file.language or "en"):
        yield f"{path}: the papers are in English already; name another language or take it out"
    if row.id not in sentence_ids():
        yield f"{path}.id: '{row.id}' is no sentence of the papers"
    if not row.text:
        yield f"{path}.text: is empty; take the row out and the English sentence is printed"


def _allowed(limit: Limit) -> str:
    side = "at most" if limit.sense == "max" else "at least"
    return f"{limit.id} is {side} {limit.text}, and a site may only leave less room"


def _raised_faults(row: Raised, path: str) -> Iterator[str]:
    mains = knowledge().family("mains")
    if row.cause not in mains:
        yield f"{path}.cause: '{row.cause}' is not a mains fault; only {', '.join(mains)}"


def _wording_faults(text: str | None, path: str) -> Iterator[str]:
    """What no text of this program may say, the site's words may not say for it."""
    for never in table("cautions")["never_say"]:
        found = re.search(never, (text or "").lower())
        if found:
            yield f"{path}: '{found[0]}' may not be printed; it talks a fault away"

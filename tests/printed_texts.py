"""Everything that is printed about one incident, and rules that any of it must keep.

A helper of the tests; it holds no test.
"""

import json
import random
import re
from collections.abc import Iterator
from functools import cache
from pathlib import Path
from typing import Any

import random_records

from triage.assessment import Assessment, assess
from triage.canonical import canonical
from triage.documents.as_data import as_data, as_json
from triage.documents.incident_report import context
from triage.documents.plain_text import plain_text
from triage.documents.summary import summarise
from triage.record import load as load_record
from triage.record import loads as loads_record
from triage.render import Attachment, RenderedPdf, render_html, render_pdf
from triage.site import load as load_site
from triage.site import no_site

EXAMPLES = Path(__file__).resolve().parent.parent / "examples"
SITE = EXAMPLES / "site.yaml"
FILES = sorted((EXAMPLES / "incidents").glob("*.yaml"))
NAMES = [path.stem for path in FILES]


@cache
def example(name: str) -> Assessment:
    """The assessment of an example with the site file."""
    return assess(load_record(EXAMPLES / "incidents" / f"{name}.yaml"), load_site(SITE))


@cache
def drawn(seed: int) -> Assessment:
    """The assessment of a random record: any answers, or a static story with some spoiled."""
    rng = random.Random(seed)
    if seed % 3:
        tree = random_records.random_tree(rng)
    else:
        tree = random_records.clean_tree(rng, rng.choice(random_records.STATIC_STORIES))
        tree = random_records.spoil(rng, tree, rng.choice((0, 1, 3)))
    return assess(random_records.record(tree), no_site())


def from_text(text: str) -> Assessment:
    """The assessment of a record as typed."""
    return assess(loads_record(text), no_site())


def report_context(a: Assessment) -> dict[str, Any]:
    """What the report prints, before it is drawn."""
    return context(a, summarise(a))


def report(a: Assessment) -> RenderedPdf:
    """The whole report with its attachments, as the command makes it but for the file."""
    s = summarise(a)
    made = context(a, s)
    carried = [
        Attachment("record.json", canonical(a.record.tree), "The record in canonical form"),
        Attachment("assessment.json", json.dumps(as_data(a, s)).encode(), "The assessment"),
    ]
    return render_pdf(render_html("incident_report.html", made), title=made["title"],
                      attachments=carried, identifier=b"0" * 16)  # fmt: skip


def strings(tree: Any) -> Iterator[str]:
    """Every text of a context or of JSON, in the order it stands there, charts left out."""
    if isinstance(tree, str):
        yield tree
    elif isinstance(tree, dict):
        yield from (text for key, each in tree.items() if key != "svg" for text in strings(each))
    elif isinstance(tree, list | tuple):
        yield from (text for each in tree for text in strings(each))


def terminal(a: Assessment) -> str:
    """What `triage assess --why` prints."""
    return plain_text(a, why=True)


def data(a: Assessment) -> str:
    """What `triage assess --json` prints."""
    return as_json(as_data(a, summarise(a)))


def own_words(text: str, a: Assessment) -> str:
    """Printed text without what people typed: words of witnesses and free text of the record."""
    flat = " ".join(text.split())
    typed = {
        " ".join(each.split())
        for each in strings(a.record.tree)
        if " " in each.strip() and len(each) > 12
    }
    for each in sorted(typed, key=len, reverse=True):
        flat = flat.replace(each, "…")
    return flat


NOISE = re.compile(
    r"\bNone\b(?=[,)\]}]|\s*$)|frozenset\(|<\w+\.\w+|<Level|<class|\bobject at 0x|\bOrderedDict\(|"
    r"\b(?:True|False)\b|\{'|\['|\('|\bnan\b|\binf\b"
)
"""What Python prints of its own values."""

FULL_OR_NIL = re.compile(r"(?<![\d.,])(?:0|100)(?:\.0+)?\s?%(?! RH| (?:of|over|under|left) )")
"""A probability shown as certain; humidity and the share of a limit are another matter."""

UNDERSCORED = re.compile(r"(?<![\w./-])[a-z]+(?:_[a-z0-9]+)+(?![\w/])")
"""A word of the record's closed lists, as a program writes it."""

RAW = re.compile("[\x00-\x08\x0b-\x1f\x7f-\x9f\u200b\u200e\u200f\u202a-\u202e\u2066-\u2069\ufeff]")
"""Control and direction characters."""

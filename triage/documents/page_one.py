"""Page one of the report: the fullest form that stays on one page, the rest follows behind it.

The height is reckoned from the lettering of templates/document.css, so that nothing is drawn twice.
"""

from collections.abc import Iterator
from textwrap import wrap
from typing import Any

from triage.assessment import Assessment
from triage.documents.summary import Summary, person_lead, watch_line
from triage.frozen import frozen

PAGE_HEIGHT = {"A4": 742.0, "Letter": 706.0}
"""Points between the margins."""
_WIDTH = 394.0
"""Points of the text column on A4, the narrower of the two for it."""
_LETTER = 0.475
"""Mean width of a letter in its size, rounded up from English text; bold is wider."""
_BOLD = 0.53


@frozen
class Size:
    """Longest lists of one form of the page; quote is in characters."""

    care: int
    quotes: int
    quote: int
    causes: int
    estimates: int
    unknown: int
    checks: int
    cautions: int


SIZES = (
    Size(5, 2, 420, 5, 4, 8, 6, 3),
    Size(4, 2, 260, 4, 3, 6, 5, 2),
    Size(3, 2, 180, 4, 3, 4, 4, 2),
    Size(2, 1, 180, 4, 3, 3, 4, 2),
    Size(2, 1, 120, 3, 3, 3, 4, 1),
    Size(1, 1, 120, 3, 2, 3, 3, 1),
    Size(1, 1, 120, 3, 1, 3, 3, 1),
    Size(1, 1, 90, 2, 1, 2, 2, 1),
)
"""Fullest first (judgement: what fills a page without crowding it)."""


def page_one(a: Assessment, s: Summary, lines: list[str], paper: str) -> dict[str, Any]:
    """The fullest page one that fits the paper; the tersest where none does.

    Args:
        a: the assessment. s: its summary.
        lines: of the heading.
        paper: "A4" or "Letter".
    """
    made: dict[str, Any] = {}
    for size in SIZES:
        made = _built(a, s, size)
        if height(made, lines) <= PAGE_HEIGHT[paper]:
            break
    return made


def _built(a: Assessment, s: Summary, size: Size) -> dict[str, Any]:
    return {
        "marking": a.site.file.wording.analysis_marking or "",
        "person": _person(a, s, size.care),
        "equipment": {
            "condition": s.condition, "headline": s.headline, "rows": item_rows(s), "room": s.room,
        },
        "happened": {"summary": s.happened, "quotes": _quotes(s, size)},
        "causes": {
            "summary": s.causes_lead,
            "rows": [[c.cause, c.words, c.range] for c in s.causes[: size.causes]],
            "note": s.causes_note,
        },
        "estimates": [
            [e.quantity, e.middle, e.range or "—", e.rests_on]
            for e in s.estimates[: size.estimates]
        ],
        "not_known": _shortened(s, size.unknown),
        "next_checks": _first_checks(s, size.checks)
        or [{"who": "Nobody", "checks": ["None is open."]}],
        "cautions": _cautions(a, size.cautions),
    }  # fmt: skip


def _person(a: Assessment, s: Summary, most: int) -> list[str]:
    """The lead, the most urgent actions, what to watch for, the state of the review.

    No action that is needed now is ever left out.
    """
    now = sum(row.urgency == "now" for row in a.care.rows)
    general = len(s.person) - 1 - len(a.care.rows)
    lines = s.person[1 : general + max(now, most)]
    return [person_lead(a), " ".join(lines), watch_line(), " ".join(s.reviews)]


def item_rows(s: Summary) -> list[dict[str, Any]]:
    """A row for each outcome; items with the same defect and disposition share one."""
    rows: dict[tuple[str, int, str], list[str]] = {}
    for each in s.items:
        rows.setdefault((each.defect, each.severity, each.disposition), []).append(each.item)
    return [
        {"item": "; ".join(items), "defect": defect, "severity": severity, "disposition": text}
        for (defect, severity, text), items in rows.items()
    ]


def _quotes(s: Summary, size: Size) -> list[dict[str, str]]:
    found = []
    for each in [each for each in s.statements if each.words][: size.quotes]:
        heading = f"{each.by or 'Witness'} ({each.id})"
        text = _cut(each.words or "", size.quote)
        found.append({"heading": heading, "text": text, "language": each.language or "en"})
    return found


def _cut(words: str, most: int) -> str:
    if len(words) <= most:
        return words
    return words[: most - 2].rsplit(" ", 1)[0] + " …"


def _shortened(s: Summary, most: int) -> list[str]:
    """What is not known, the values to confirm first, so many that the rest is only counted."""
    confirm = [f"values to confirm, in the last part: {len(s.questions)}"] if s.questions else []
    lines = [*confirm, *s.unknown]
    if len(lines) <= most:
        return lines
    return [*lines[: most - 1], f"{len(lines) - most + 1} more, in the last part"]


def _first_checks(s: Summary, most: int) -> list[dict[str, Any]]:
    """The first checks overall, still grouped by who may do them."""
    groups, left = [], most
    for who, lines in s.next_checks:
        taken = lines[: min(left, max(most - 1, 1))]
        left -= len(taken)
        if taken:
            groups.append({"who": who, "checks": list(taken)})
    return groups


def _cautions(a: Assessment, most: int) -> list[str]:
    """The cautions of this outcome before the general ones, which stand in full later."""
    own = [c.text for c in a.cautions if c.when != "always"]
    general = [c.text for c in a.cautions if c.when == "always"]
    return [*own, *general][:most]


# --- height -------------------------------------------------------------------------------------


def height(page: dict[str, Any], lines: list[str]) -> float:
    """Points that a page one takes, title block included, a little more rather than less."""
    title = 19.2 + 1.7 + 8.5 + _text(" · ".join(lines), _WIDTH + 88, 9.0)
    # Measured on the examples, the sum is 4 to 12 % too high; half of the least is given back.
    return 0.98 * (title + sum(5.9 + part for part in _sections(page)))


def _sections(page: dict[str, Any]) -> Iterator[float]:
    person, equipment, causes = page["person"], page["equipment"], page["causes"]
    yield _lead(person[0]) + sum(_text(each) for each in person[1:] if each)
    rows = [[r["item"], r["defect"], f"    {r['disposition']}"] for r in equipment["rows"]]
    above = _text(equipment["condition"]) if equipment["condition"] else 0.0
    yield (above + _lead(equipment["headline"]) + _table((28, 26, 46), rows)
           + _text(equipment["room"]))  # fmt: skip
    quotes = page["happened"]["quotes"]
    yield _text(page["happened"]["summary"]) + sum(
        _text(f"{q['heading']}\n{q['text']}", _WIDTH - 10) + 1.2 for q in quotes
    )
    yield _lead(causes["summary"]) + _table((63, 17, 20), causes["rows"]) + _text(causes["note"])
    yield _table((41, 10, 20, 29), page["estimates"])
    yield _text(" · ".join(page["not_known"]))
    yield sum(
        max(_item(group["who"], 0.2 * _WIDTH - 7, 7.6),
            sum(_item(line, 0.8 * _WIDTH - 14, 7.6) for line in group["checks"]))
        for group in page["next_checks"]
    ) + 2.84  # fmt: skip
    yield sum(_item(line, _WIDTH - 13, 8.0) for line in page["cautions"]) + 2.84


def _text(words: str, width: float = _WIDTH, size: float = 8.0) -> float:
    return _lines(words, width, size * _LETTER) * size * 1.36 + 2.84


def _item(words: str, width: float, size: float) -> float:
    return _lines(words, width, size * _LETTER) * size * 1.34 + 1.2


def _lead(words: str) -> float:
    return _lines(words, _WIDTH, 9.4 * _BOLD) * 9.4 * 1.26 + 2.84


def _table(widths: tuple[int, ...], rows: list[list[str]]) -> float:
    """A table with its heading; a row is as high as its highest cell."""
    found = 13.9 + 3.4
    for row in rows:
        cells = zip(widths, row, strict=True)
        deep = max(_lines(cell, _WIDTH * w / 100 - 7.1, 7.6 * _LETTER) for w, cell in cells)
        found += deep * 7.6 * 1.32 + 2.9
    return found


def _lines(words: str, width: float, letter: float) -> int:
    return sum(
        max(1, len(wrap(each, max(1, int(width / letter))))) for each in words.splitlines() or [""]
    )

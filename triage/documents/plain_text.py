"""The assessment as plain text for a terminal: one fact a line, nothing by colour alone."""

from collections.abc import Iterator
from textwrap import wrap
from typing import TYPE_CHECKING

from triage.assessment import Assessment
from triage.documents.look_back import look_back_lines
from triage.documents.sources import source_lines
from triage.documents.summary import Summary, summarise
from triage.documents.witnesses import witness_lines
from triage.documents.wording import LEVEL_NAME, spoken
from triage.knowledge import knowledge
from triage.visible import visible

if TYPE_CHECKING:
    from triage.history import History

WIDTH = 78


def plain_text(a: Assessment, *, why: bool = False, earlier: "History | None" = None) -> str:
    """The whole assessment in the order it is read.

    Args:
        a: the assessment.
        why: add each weight, each flag and each number with its citation.
        earlier: reports on the same things or place, before the items where looked up.
    """
    s = summarise(a)
    lines = [f"Incident {a.record.case}", *_wrapped(s.happened), ""]
    for title, body in _sections(a, s, earlier):
        lines += [title, *body, ""]
    if why:
        lines += [line for title, body in _why(a) for line in (title, *body, "")]
    return visible("\n".join(lines).rstrip()) + "\n"


def _sections(
    a: Assessment, s: Summary, earlier: "History | None"
) -> Iterator[tuple[str, list[str]]]:
    yield "PERSON", _items((*s.person, *s.reviews))
    if earlier is not None:
        from triage.documents.earlier_reports import earlier_lines

        yield "EARLIER REPORTS", _items(earlier_lines(earlier))
    yield "DISPOSITION", _dispositions(s)
    yield "DEFECTS FOUND", _items(s.defects)
    causes = [f"{c.cause}: {c.words}; {c.range}" for c in s.causes]
    yield "RANKED CAUSES OF THE SENSATION", [
        *_wrapped(s.causes_lead), *_numbered(causes), *_wrapped(s.causes_note),
    ]  # fmt: skip
    rows = [
        f"{e.quantity}: {e.middle}{f', {e.range}' if e.range else ''} ({e.rests_on})"
        for e in s.estimates
    ]
    yield "ESTIMATES (middle, 9 in 10)", _items(rows)
    if a.care.ignition or any(item.immunity for item in a.incident.items):
        from triage.documents.static_detail import static_alerts

        yield "IF IT WAS STATIC: FIRE AND DEVICES", _items(list(static_alerts(a)) or ["Unknown."])
    yield "NOT KNOWN", _items(s.unknown)
    if s.questions:
        yield "PLEASE CONFIRM", _items(s.questions)
    checks: list[str] = []
    number = 1
    for who, group in s.next_checks:
        checks.append(f"  {who}:")
        checks += _numbered(group, number)
        number += len(group)
    yield "NEXT CHECKS", checks or ["  None."]
    yield "CAUTIONS", _items(s.cautions)


def _dispositions(s: Summary) -> list[str]:
    lines = _wrapped(s.condition) + _wrapped(s.headline) if s.condition else _wrapped(s.headline)
    for each in s.items:
        lines += _items([f"{each.item}: {each.disposition} Because: {each.why}."])
    return lines + _items([s.room])


def _why(a: Assessment) -> Iterator[tuple[str, list[str]]]:
    from triage.documents.static_detail import static_lines

    k = knowledge()
    first, second = (k.causes[c].name for c in a.posterior.pair)
    rows = [f"{weight.decibans:+6.1f}  {spoken(weight.label)}" for weight in a.posterior.weights]
    rows.append(f"{sum(weight.decibans for weight in a.posterior.weights):+6.1f}  odds of the pair")
    yield f"WEIGHTS in decibans: {first} (+) against {second} (-)", [f"  {r}" for r in rows]
    flags = [
        f"{f.flag.name}: {'cleared' if f.cleared else 'stands'} ({f.because}); {f.missing}"
        for f in a.flags
    ]
    yield "RED FLAGS", _items(flags or ["None."])
    gate = ["open"] if a.gate.open else [f"shut: {each}" for each in a.gate.shut_by]
    yield f"GATE TO {LEVEL_NAME[type(a.headline)(1)].upper()}", _items(gate)
    yield "IF IT WAS STATIC, IN DETAIL", _items(list(static_lines(a)))
    yield "THE CONCLUSION HANGS ON", _items([spoken(each) for each in a.sensitivity.hangs_on])
    positions = [f"{row.action} {each}" for row in a.care.rows for each in row.sources]
    if a.testimony.each:
        yield "WHOM ONE BELIEVES", _items(witness_lines(a))
    if a.look_back:
        yield "LOOK-BACK AFTER THE DEFECT", _items(look_back_lines(a))
    yield "PUBLISHED POSITIONS ON THE PERSON", _items(positions or ["None."])
    yield from _electrical(a)
    yield "NUMBERS AND THEIR SOURCES", _items(source_lines(a))


def _electrical(a: Assessment) -> Iterator[tuple[str, list[str]]]:
    """Currents, readings, other sources and checks in full; loaded only where it is printed."""
    from triage.documents.check_guide import check_lines
    from triage.documents.electrical import electrical_lines, other_source_lines
    from triage.documents.readings import limit_lines, reading_lines

    yield "MAINS CURRENT, CONTACT BY CONTACT", _items(list(electrical_lines(a)))
    yield "READINGS AGAINST LIMITS", _items(limit_lines(a) or ("None has a limit.",))
    yield "WHAT THE READINGS MEAN", _items(reading_lines(a) or ("None needs explaining.",))
    yield "SOURCES BESIDES MAINS LEAKAGE", _items(list(other_source_lines(a)) or ["Excluded."])
    yield "WHAT EACH OPEN CHECK PROVES", _items(list(check_lines(a)) or ["None is open."])


def _wrapped(text: str) -> list[str]:
    return _hung("", text)


def _items(lines: tuple[str, ...] | list[str]) -> list[str]:
    return [out for line in lines for out in _hung("- ", line)]


def _numbered(lines: tuple[str, ...] | list[str], start: int = 1) -> list[str]:
    return [out for n, line in enumerate(lines, start) for out in _hung(f"{n}. ", line)]


def _hung(mark: str, line: str) -> list[str]:
    indent = "  " + " " * len(mark)
    text = line.replace("\u00a0", " ")
    return wrap(text, WIDTH, initial_indent=f"  {mark}", subsequent_indent=indent,
                break_on_hyphens=False)  # ids of items hold hyphens  # fmt: skip

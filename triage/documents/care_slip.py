"""The care slip for occupational health: what may have acted on the person, no cause named."""

from collections.abc import Iterator

from triage import words as w
from triage.assessment import Assessment
from triage.documents.paper import Paper, case_paper, contact_lines
from triage.documents.wording import amount, item_name, meaning, meanings, room_name
from triage.electrical_story import lasted
from triage.incident import Contact, Person
from triage.paper_texts import PaperTexts
from triage.tables import table


def care_slip(a: Assessment) -> Paper:
    """One page for whoever treats the person.

    Args:
        a: the assessment.
    """
    t = PaperTexts(a.site)
    sections = [
        ("arrange", [{"kind": "list", "lines": _arrange(a)}]),
        ("exposure", [{"kind": "lines", "rows": list(_exposure(a, t))}]),
        ("person", [{"kind": "list", "lines": [_person(p) for p in a.incident.persons]
                     or ["not on record"]}]),
        ("watch", [{"kind": "list", "lines": list(table("care")["watch_for"])}]),
        ("what", [{"kind": "text", "text": t("care_slip.apart")},
                  {"kind": "lines", "rows": [[t("care_slip.sent"), ""], [t("care_slip.seen"), ""]]},
                  {"kind": "text", "class": "note", "text": " · ".join(contact_lines(
                      t, a.site, ("occupational_health", "blood_exposure")))}]),
    ]  # fmt: skip
    matter = {
        "form": "plain",
        "heading": f"{t('care_slip.title')} {a.record.case}",
        "lead": t("care_slip.lead"),
        "sections": [{"title": t(f"care_slip.{name}"), "blocks": blocks}
                     for name, blocks in sections],
    }  # fmt: skip
    return case_paper("paper.html", t, a=a, title=t("care_slip.title"), matter=matter)


def _arrange(a: Assessment) -> list[str]:
    return [row.action for row in a.care.rows]


def _person(each: Person) -> str:
    when = f" {each.review_at.text}" if each.review_at else ""
    parts = [each.role or meaning(w.WHO, each.who), meanings(w.SIGNS, each.signs),
             f"review: {meaning(w.REVIEW, each.review)}{when}"]  # fmt: skip
    return " · ".join(parts)


def _exposure(a: Assessment, t: PaperTexts) -> Iterator[list[str]]:
    incident = a.incident
    event = incident.event.at
    yield [t("care_slip.time"), f"{event.text if event else 'not known'}, {room_name(a)}"]
    paths = "; ".join(_path(c, a) for c in incident.contacts) or "not known"
    yield [t("care_slip.path"), paths]
    known = a.exposure.conditions.voltage_known
    volts = amount(a.exposure.conditions.voltage, "voltage")
    supply = meaning(w.SUPPLY, incident.supply.kind)
    yield [t("care_slip.supply"), f"{volts}{'' if known else ' taken, not recorded'}; {supply}"]
    yield [t("care_slip.current"), _current(a, t)]
    seconds = lasted(incident)
    yield [t("care_slip.duration"),
           amount(seconds, "duration") if seconds is not None else "not known"]  # fmt: skip
    moisture = dict.fromkeys(meaning(w.MOISTURE, c.moisture) for c in incident.contacts)
    yield [t("care_slip.moisture"), "; ".join(moisture) or "not known"]
    breach = dict.fromkeys(p.breach or "not known" for p in incident.persons)
    yield [t("care_slip.breach"), "; ".join(breach) or "not known"]
    fell = [p.id for p in incident.persons if {"fall", "thrown"} & {*p.signs}]
    yield [t("care_slip.fall"), f"yes ({', '.join(fell)})" if fell else "ask"]
    flammable = meanings(w.FLAMMABLE, incident.scene.flammable)
    yield [t("care_slip.ignition"), flammable]


def _path(contact: Contact, a: Assessment) -> str:
    items = ", ".join(item_name(a.incident, each) for each in contact.items) or "not known"
    also = contact.also_touching
    second = f", also touching: {meaning(w.ALSO_TOUCHING, also)}" if also else ""
    return f"{meaning(w.BODY_PART, contact.body_part)} at {items}{second}"


def worst_current(a: Assessment) -> float | None:
    """Upper end of the current through the person under the worst fault of the list [A].

    None where no fault has an estimate.
    """
    found = [each.electrical.current.interval()[1]
             for each in a.exposure.causes.values() if each.electrical is not None]  # fmt: skip
    return max(found, default=None)


def _current(a: Assessment, t: PaperTexts) -> str:
    worst = worst_current(a)
    if worst is None:
        return t("care_slip.no_bound")
    return f"{amount(worst, 'current')}: {t('care_slip.bound')}"

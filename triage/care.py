"""The person: what to arrange and what to watch for. Never medical advice to stay away."""

from collections.abc import Iterator
from functools import cache

from triage.citation import Citation
from triage.errors import BadTable
from triage.evidence import Evidence
from triage.frozen import frozen
from triage.incident import Incident
from triage.involvement import is_powered
from triage.tables import citation, table

URGENCY = ("route", "same_day", "now")
"""From the ordinary route to before anything else."""
_SIGN_WORDS = {
    "burn": "burn", "could_not_let_go": "grip", "lost_consciousness": "loss_of_consciousness",
    "chest_symptoms": "chest_symptoms", "palpitations": "palpitations", "weakness": "weakness",
    "thrown": "thrown", "fall": "fall",
}  # fmt: skip
_SENSATION_WORDS = {
    "grip": "grip", "heat": "burn", "thrown": "thrown", "sustained_pain": "pain_that_went_on",
}  # fmt: skip


@frozen
class CareRow:
    """One action for the person, by what was found."""

    id: str
    when: str
    action: str
    urgency: str
    sources: tuple[str, ...]
    citation: Citation


@frozen
class Care:
    """What to arrange for the persons.

    Args:
        urgency: the most urgent of the rows.
        rows: most urgent first.
        ignition: a spark could have met vapour or oxygen.
    """

    urgency: str
    rows: tuple[CareRow, ...]
    ignition: bool


@cache
def care_rows() -> tuple[CareRow, ...]:
    """The shipped table.

    Raises:
        BadTable: an urgency that is not known, or no row for nothing found.
    """
    rows = tuple(
        CareRow(r["id"], r["when"], " ".join(r["action"].split()), r["urgency"],
                tuple(r.get("sources") or ()), citation(r, f"data/care.yaml {r['id']}"))
        for r in table("care")["care"]
    )  # fmt: skip
    if any(r.urgency not in URGENCY for r in rows) or not any(r.when == "none" for r in rows):
        raise BadTable("data/care.yaml: unknown urgency, or no row for 'none'")
    return rows


def care_for(incident: Incident, evidence: Evidence) -> Care:
    """What to arrange for the persons of one incident."""
    found = set(_found(incident, evidence))
    words = (found or {"none"}) | {"always"}
    rows = [row for row in care_rows() if row.when in words]
    rows.sort(key=lambda row: -URGENCY.index(row.urgency))
    ignition = bool(set(incident.scene.flammable) - {"none"})
    return Care(rows[0].urgency, tuple(rows), ignition)


def _found(incident: Incident, evidence: Evidence) -> Iterator[str]:
    for sign in evidence.signs:
        if sign in _SIGN_WORDS:
            yield _SIGN_WORDS[sign]
    for statement in incident.statements:
        if statement.sensation in _SENSATION_WORDS:
            yield _SENSATION_WORDS[statement.sensation]
    if "breach" in evidence.facts or "pinpoint_mark" in evidence.signs:
        yield "skin_or_glove_breach"
    if any(p.who == "patient" for p in incident.persons) or any(
        c.also_touching == "patient" for c in incident.contacts
    ):
        yield "patient_affected"
    if "heart_conductor" in evidence.facts:
        yield "heart_conductor"
    if incident.supply.voltage and incident.supply.voltage.value >= 1000:
        yield "over_1000_v"
    powered = any(is_powered(item) for item in evidence.touched)
    two_hands = any(
        c.body_part == "both_hands" or len(c.items) > 1 or c.also_touching not in (None, "nothing")
        for c in incident.contacts
    )
    if two_hands and powered:
        yield "hand_to_hand_path"
    wet = evidence.observed.get("wet_contact")
    if wet and wet.state == "yes" and powered:
        yield "wet_mains_contact"

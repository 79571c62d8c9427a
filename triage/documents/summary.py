"""The conclusions in the order they are read: person, items, defects, causes, estimates, next.

One wording for page one, the terminal and every short form.
"""

from triage.assessment import Assessment, named_conflicts
from triage.check_table import PERFORMERS
from triage.disposition import Level
from triage.documents.witnesses import witness_verdict
from triage.documents.wording import (
    LEVEL_NAME,
    NBSP,
    amount,
    amount_range,
    condition,
    item_name,
    item_order,
    likelihood,
    meaning,
    percent,
    percent_range,
    room_line,
    room_name,
    spoken,
)
from triage.errors import InvalidValue
from triage.frozen import frozen
from triage.incident import Statement
from triage.knowledge import knowledge
from triage.next_checks import NextCheck
from triage.physics.sensation import after_noticing
from triage.static_exposure import StaticExposure
from triage.tables import table
from triage.words import AREA, FOOTWEAR, REVIEW

PERFORMER_NAME = {
    "any_staff": "Any staff",
    "biomedical": "Biomedical engineering",
    "licensed_electrician": "Licensed electrician",
}
_URGENCY_LEAD = {
    "now": "The person comes first: medical assessment now.",
    "same_day": "The person comes first: medical assessment today.",
    "route": "The person comes first: the occupational-health route.",
}
_FIRE = "Vapour or oxygen within reach of the spark: a fire matter, whatever the cause."
_SHOES = {word: meaning.split(",")[0] for word, (_, meaning) in FOOTWEAR.items()}
_OTHER_TOLD = 0.05
"""From here on the share of no named cause is told (judgement: below, it moves nothing)."""
METHOD_NOTE = (
    "The likelihoods behind the ranking are judged; no measured frequencies stand behind them."
)


@frozen
class ItemLine:
    """One item: name, defects found, severity 1 to 4, what happens to it, why."""

    item: str
    defect: str
    severity: int
    disposition: str
    why: str


@frozen
class CauseLine:
    """One ranked cause: name, in words, range."""

    cause: str
    words: str
    range: str


@frozen
class EstimateLine:
    """One estimate: what, middle, range, what it rests on."""

    quantity: str
    middle: str
    range: str
    rests_on: str


@frozen
class Summary:
    """Everything page one and the terminal print, worded and rounded."""

    person: tuple[str, ...]
    reviews: tuple[str, ...]
    condition: str
    headline: str
    items: tuple[ItemLine, ...]
    room: str
    defects: tuple[str, ...]
    happened: str
    statements: tuple[Statement, ...]
    causes_lead: str
    causes: tuple[CauseLine, ...]
    causes_note: str
    estimates: tuple[EstimateLine, ...]
    unknown: tuple[str, ...]
    next_checks: tuple[tuple[str, tuple[str, ...]], ...]
    cautions: tuple[str, ...]
    questions: tuple[str, ...]


def summarise(a: Assessment) -> Summary:
    """Word one assessment."""
    return Summary(
        person_lines(a), review_lines(a), condition(a.incident), headline(a), item_lines(a),
        room_line(a),
        defect_lines(a), _happened(a), a.incident.statements, causes_lead(a),
        cause_lines(a), causes_note(a),
        estimate_lines(a), unknown_lines(a), checks_by_performer(a),
        tuple(c.text for c in a.cautions), a.record.questions,
    )  # fmt: skip


def person_lines(a: Assessment) -> tuple[str, ...]:
    """The lead, then each action."""
    lines = [person_lead(a), *([_FIRE] if a.care.ignition else [])]
    return (*lines, *(row.action for row in a.care.rows), watch_line())


def person_lead(a: Assessment) -> str:
    """The person first: how soon, and the blood-exposure route beside it, never instead of it."""
    now = [row.when for row in a.care.rows if row.urgency == "now"]
    if "skin_or_glove_breach" not in now:
        return _URGENCY_LEAD[a.care.urgency]
    if len(now) == 1:
        return "The person comes first: blood-exposure route now."
    return "The person comes first: medical assessment and blood-exposure route now."


def watch_line() -> str:
    """What to report at once when it appears later."""
    return f"Watch for: {'; '.join(table('care')['watch_for'])}."


def review_lines(a: Assessment) -> tuple[str, ...]:
    """Where the medical review of each person stands."""
    persons = a.incident.persons
    if not persons:
        return ("Nobody is on record as affected; ask who was.",)
    return tuple(
        f"{_opened(p.role or p.who or p.id)}: {meaning(REVIEW, p.review)}." for p in persons
    )


def _opened(words: str) -> str:
    return words[0].upper() + words[1:]


def headline(a: Assessment) -> str:
    """The most severe disposition in a sentence."""
    level = a.headline
    named = [item_name(a.incident, i.item) for i in a.items if i.level == level]
    what = ", ".join(named) if named else "the room"
    return f"{LEVEL_NAME[level]}: {what}."


def item_lines(a: Assessment) -> tuple[ItemLine, ...]:
    """Each item, most severe first."""
    lines = []
    for each in sorted(a.items, key=lambda i: (-i.level, i.item)):
        lines.append(ItemLine(
            item_name(a.incident, each.item), _defects_of(each.item, a),
            int(each.level), item_order(each, a.incident), "; ".join(each.reasons),
        ))  # fmt: skip
    return tuple(lines)


def _defects_of(item: str, a: Assessment) -> str:
    """Defects of one item; where no valid check was done, that and not "none"."""
    found = [d.text for d in a.evidence.defects if d.item == item]
    if found:
        return "; ".join(found)
    done = any(v.check.of == item and v.state == "valid_pass" for v in a.verdicts)
    return "none found by the checks done" if done else "not known: no valid check yet"


def defect_lines(a: Assessment) -> tuple[str, ...]:
    """Every defect; without one, whether any valid check stands behind that."""
    found = tuple(f"{item_name(a.incident, d.item)}: {d.text}" for d in a.evidence.defects)
    if found:
        still = sum(each.answer is None for each in a.look_back)
        return (*found, f"Look-back opened by it: {still} of {len(a.look_back)} questions open.")
    done = any(v.state == "valid_pass" for v in a.verdicts)
    return ("None found by the checks done." if done else "Not known: no valid check yet.",)


def unknown_lines(a: Assessment) -> tuple[str, ...]:
    """What is not known and would matter; with every answer given, the checks that are open."""
    if a.unknown:
        return a.unknown
    needed = sum(each.mandatory for each in a.next_checks)
    if needed:
        return (f"no answer of those that decide is missing; checks needed for release: {needed}",)
    return ("no answer of those that decide is missing",)


def _happened(a: Assessment) -> str:
    event, area = a.incident.event, a.incident.place.area
    when = event.at.text if event.at else "time not known"
    where = room_name(a)
    if where == "place not known" and area:
        where = meaning(AREA, area)
    summary = f" {event.summary.strip()}" if event.summary else ""
    return f"{when}, {where}.{summary}"


def causes_lead(a: Assessment) -> str:
    """The ranking in a sentence, with how firm it is."""
    k, leader = knowledge(), a.posterior.ranked[0]
    p, mains = a.posterior.of(leader), a.sensitivity.mains
    firm = {"stable": "the first rank is stable", "leaning": "the first rank only leans",
            "open": "the first rank is open"}[a.sensitivity.firmness]  # fmt: skip
    lead = f"Not settled; first in rank: {k.causes[leader].name.lower()}" if p < 0.5 else (
        f"Most likely: {k.causes[leader].name.lower()}"
    )  # fmt: skip
    return (
        f"{lead} ({likelihood(p)}); {firm}. Any mains fault: {likelihood(mains.point)}, "
        f"{percent_range(mains)}."
    )


def cause_lines(a: Assessment, most: int = 5) -> tuple[CauseLine, ...]:
    """The most probable causes with words and range."""
    return tuple(
        CauseLine(
            knowledge().causes[c].name,
            likelihood(a.posterior.of(c)),
            percent_range(a.sensitivity.ranges[c]),
        )
        for c in a.posterior.ranked[:most]
    )


def causes_note(a: Assessment) -> str:
    """What does not fit, conflicts, and the method note."""
    k, parts = knowledge(), []
    other = 1 - sum(a.posterior.of(each) for each in a.posterior.ranked)
    if other >= _OTHER_TOLD:
        parts.append(f"None of the named causes: {likelihood(other)}, {percent(other)}.")
    for each in a.misfits:
        parts.append(f"Does not fit the first cause: {each.finding.name} ({spoken(each.state)}).")
    for finding, _ in named_conflicts(a.posterior):
        parts.append(f"All other facts speak against the answer on: {k.findings[finding].name}.")
    if "driven" in a.evidence.observed and k.causes[a.posterior.ranked[0]].mechanism == "static":
        parts.append(
            "Something kept acting, which static cannot do: the witness or static is wrong."
        )
    if a.evidence.disagreements:
        named = ", ".join(k.findings[f].name for f in sorted(a.evidence.disagreements))
        parts.append(f"Witnesses disagree on: {named}; the more adverse answer is used.")
        parts.append(witness_verdict(a))
    return " ".join([*parts, METHOD_NOTE])


def estimate_lines(a: Assessment) -> tuple[EstimateLine, ...]:
    """What was physically possible, the mechanism of the first cause first, then the ceiling."""
    static, mains = _static_lines(a), _mains_lines(a)
    leads = knowledge().causes[a.posterior.ranked[0]].mechanism
    lines = [*mains, *_ceiling_line(a), *static] if leads == "mains" else [*static, *mains]
    return tuple(lines if leads == "mains" else [*lines, *_ceiling_line(a)])


def _ceiling_line(a: Assessment) -> list[EstimateLine]:
    ceiling = a.exposure.ceiling
    if ceiling is None:
        return []
    binds = "one line to earth only" if ceiling.holds else "; ".join(ceiling.void)
    value = amount(ceiling.value, "current") if ceiling.holds else "none"
    return [EstimateLine("Most that one line could drive", value, "", binds)]


def best_of(a: Assessment, mechanism: str) -> str | None:
    """The most probable cause of a mechanism that has an estimate."""
    for cause in a.posterior.ranked:
        each = a.exposure.causes[cause]
        if knowledge().causes[cause].mechanism == mechanism and each.felt is not None:
            return cause
    return None


def _static_lines(a: Assessment) -> list[EstimateLine]:
    cause = best_of(a, "static")
    exposure = a.exposure.causes[cause].static if cause else None
    if cause is None or exposure is None:
        unknown = next((e.unknown for e in a.exposure.causes.values() if e.unknown), "no model")
        return [EstimateLine("Static charge", "not known", "", unknown)]
    name = knowledge().causes[cause].name.lower()
    return [
        *_felt_lines(exposure, name, rests_on(a)),
        EstimateLine("Chance that such a discharge is felt", percent(exposure.felt.value),
                     percent_range(exposure.felt), "charge against the felt threshold"),
    ]  # fmt: skip


def _felt_lines(exposure: StaticExposure, name: str, rests: str) -> list[EstimateLine]:
    """Voltage and energy given that it was felt; as they are where nobody could feel it."""
    threshold, given = exposure.threshold, " if felt"
    try:
        volts = after_noticing(exposure.voltage, exposure.charge, threshold)
        energy = after_noticing(exposure.energy, exposure.charge, threshold)
    except InvalidValue:
        volts, energy, given = exposure.voltage, exposure.energy, ""
    return [
        EstimateLine(f"Voltage{given}: {name}", amount(volts.median, "voltage"),
                     amount_range(volts.interval(), "voltage"), rests),
        EstimateLine(f"Discharge energy{given}", amount(energy.median, "energy"),
                     amount_range(energy.interval(), "energy"), "charge and capacitance"),
    ]  # fmt: skip


def _mains_lines(a: Assessment) -> list[EstimateLine]:
    """The most probable mains cause; two of them where a mains cause leads."""
    k, known = knowledge(), a.exposure.conditions.voltage_known
    with_model = [
        (c, e) for c in a.posterior.ranked if (e := a.exposure.causes[c].electrical) is not None
    ]
    leads = k.causes[a.posterior.ranked[0]].mechanism == "mains"
    volts = amount(a.exposure.conditions.voltage, "voltage")
    supply = f"supply {volts}" if known else f"{volts} taken"
    return [
        EstimateLine(f"Touch current if: {k.causes[c].name.lower()}",
                     amount(e.current.median, "current"),
                     amount_range(e.current.interval(), "current"),
                     f"{supply}; worst zone {e.zone}")
        for c, e in with_model[: 2 if leads else 1]
    ]  # fmt: skip


def rests_on(a: Assessment) -> str:
    """The circumstances behind the static estimates, in words."""
    c = a.exposure.conditions
    humidity = f"{c.humidity.fraction * 100:.0f}{NBSP}% RH" if c.humidity else "humidity not known"
    floor = f"{spoken(c.floor)} floor" if c.floor else "floor not known"
    if not c.object_kind:
        return f"{humidity}, {floor}, {_SHOES[c.footwear] if c.footwear else 'shoes not known'}"
    wheels = "no wheels" if c.casters == "none" else f"{spoken(c.casters or 'unknown')} wheels"
    return f"{humidity}, {floor}, {wheels}"


def checks_by_performer(a: Assessment) -> tuple[tuple[str, tuple[str, ...]], ...]:
    """Next checks grouped by who may do them, in order."""
    groups = []
    for performer in PERFORMERS:
        lines = tuple(check_line(n, a) for n in a.next_checks if n.kind.performer == performer)
        if lines:
            groups.append((PERFORMER_NAME[performer], lines))
    return tuple(groups)


def check_line(each: NextCheck, a: Assessment) -> str:
    """One check in a line: what, on what, minutes, precondition."""
    text = f"{each.kind.name}: {item_name(a.incident, each.item)}, {each.kind.minutes}{NBSP}min"
    if each.mandatory:
        text += ", needed for release"
    if each.after:
        text += f" — {'; '.join(each.after)}"
    return text


def severe(a: Assessment) -> bool:
    """Whether the headline is one of the two most severe dispositions."""
    return a.headline >= Level.WITHDRAW

"""Everything concluded about one incident: calls the rooms, nothing else."""

from triage import __version__, conditions
from triage.care import Care, care_for
from triage.cautions import Caution, cautions_for
from triage.check_table import check_kinds
from triage.clock import Moment
from triage.diagnosis import CONFLICT_NAMED, Posterior, diagnose, does_not_fit, prior
from triage.diagnosis import counted as findings_counted
from triage.disposition import Gate, Inputs, ItemDisposition, Level, decide
from triage.errors import BadRecord
from triage.evidence import Evidence, gather
from triage.exposure import Exposure, estimate_exposure
from triage.frozen import frozen
from triage.incident import SCHEMA, Incident
from triage.knowledge import knowledge
from triage.look_back import LookBackLine, look_back
from triage.next_checks import NextCheck, propose
from triage.record import Record, clock_faults
from triage.red_flags import Flag, raise_flags
from triage.sensitivity import Sensitivity, ranges
from triage.site import Site
from triage.tables import knowledge_digest
from triage.testimony import Testimony, testimony
from triage.told import Observed
from triage.validity import CheckVerdict, judge_checks


@frozen
class Assessment:
    """Everything concluded about one incident.

    Args:
        record: as filed. site: the site file used. at: time it speaks for, None if unknown.
        evidence: findings and defects. exposure: what was physically possible.
        posterior: the ranking. sensitivity: how firm it is.
        flags: red flags, cleared ones too. gate: why static may or may not be the disposition.
        items: disposition of each item. room: of the room.
        care: the persons. next_checks: what to check, in order. cautions: what to print with it.
        unknown: what is not known and would matter, in words.
        misfits: answers that the leading cause almost never gives.
        testimony: the ranking with each of several disagreeing statements.
        look_back: questions that a confirmed defect opens, with their answers.
        knowledge, version, schema: what it was made with.
    """

    record: Record
    site: Site
    at: Moment | None
    evidence: Evidence
    exposure: Exposure
    posterior: Posterior
    sensitivity: Sensitivity
    flags: tuple[Flag, ...]
    gate: Gate
    items: tuple[ItemDisposition, ...]
    room: ItemDisposition
    care: Care
    next_checks: tuple[NextCheck, ...]
    cautions: tuple[Caution, ...]
    unknown: tuple[str, ...]
    misfits: tuple[Observed, ...]
    testimony: Testimony
    look_back: tuple[LookBackLine, ...]
    knowledge: str
    version: str
    schema: str

    def __post_init__(self) -> None:
        """A standing red flag can never go with a reassuring disposition."""
        open_items = {i for f in self.flags for i in f.open_items}
        for each in self.items:
            if each.item in open_items and each.level < Level.HOLD:
                raise AssertionError(f"{each.item} is released under a standing red flag")

    @property
    def incident(self) -> Incident:
        """The record's content."""
        return self.record.incident

    @property
    def verdicts(self) -> tuple[CheckVerdict, ...]:
        """Every check, judged."""
        return self.evidence.verdicts

    @property
    def headline(self) -> Level:
        """The most severe disposition."""
        return max([self.room.level, *(each.level for each in self.items)])


def assess(record: Record, site: Site, at: Moment | None = None) -> Assessment:
    """Assess one record.

    Args:
        record: as filed.
        site: the site file, or `triage.site.no_site()`.
        at: time the assessment speaks for; by default the latest time in the record.

    Raises:
        BadRecord: a time that a clock change of the site's zone doubles or skips.
    """
    faults = clock_faults(record, site.zone)
    if faults:
        raise BadRecord(faults)
    incident = record.incident
    supply = conditions.supply_kind(incident, site)
    verdicts = judge_checks(incident, site)
    evidence = gather(incident, verdicts, supply)
    exposure = estimate_exposure(incident, site, verdicts)
    priors = prior(conditions.care_area(incident, site), supply, site)
    posterior = diagnose(priors, evidence, exposure)
    flags = raise_flags(incident, evidence, supply)
    given = Inputs(incident, evidence, exposure, flags, posterior, priors, supply, site)
    gate, items, room = decide(given)
    observed = findings_counted(evidence, exposure)
    return Assessment(
        record, site, at or latest(record, site), evidence, exposure, posterior,
        ranges(posterior, observed), flags, gate, items, room,
        care_for(incident, evidence), propose(given, items),
        cautions_for(_caution_words(given, gate)), _unknown(given),
        does_not_fit(posterior, observed),
        testimony(incident, evidence, priors, exposure, supply),
        look_back(incident, evidence), knowledge_digest(), __version__, SCHEMA,
    )  # fmt: skip


def latest(record: Record, site: Site) -> Moment | None:
    """The latest time in a record."""
    ended = [(each.interval(site.zone)[1], each.text, each) for _, each in record.moments]
    return max(ended)[2] if ended else None


def _caution_words(given: Inputs, gate: Gate) -> frozenset[str]:
    """The conditions under which further cautions are printed."""
    incident, evidence, k = given.incident, given.evidence, knowledge()
    leader = given.posterior.ranked[0]
    mechanism = k.causes[leader].mechanism
    humidity = given.exposure.conditions.humidity
    words = {"startle"}
    if mechanism == "static":
        words.add("static_complete" if gate.open else "static_incomplete")
        if humidity is None or humidity.fraction > 0.6:
            words.add("humidity_unknown_or_high")
    if evidence.defects:
        words.add("defect_found")
    elif given.posterior.family("mains") > 0.2:
        words.add("electrical_not_found")
    if given.posterior.of(leader) < 0.5:
        words.add("undetermined")
    conditional = {
        "isolated_supply": given.supply == "isolated",
        "electrosurgery": leader == "electrosurgery"
        or incident.event.electrosurgery_active == "yes",
        "stimulator": leader == "stimulator_pulse" or incident.event.pulse_delivered == "yes",
        "not_electrical": leader == "not_electrical",
        "invalid_or_late": any(v.state.startswith("invalid") for v in evidence.verdicts),
        "dependence": incident.scene.dependence != "none",
        "contaminated": any(h.contaminated == "yes" for h in incident.scene.custody),
        "heart_conductor": "heart_conductor" in evidence.facts,
        "ignition": bool(set(incident.scene.flammable) - {"none"}),
    }
    return frozenset(words | {word for word, holds in conditional.items() if holds})


def _unknown(given: Inputs) -> tuple[str, ...]:
    """What is not known and would matter, in words."""
    k, observed = knowledge(), given.evidence.answered
    found = [
        row.name for row in k.findings.values()
        if not row.measured and row.id not in observed and row.deciding
        and row.id not in ("driven", "humidity", "ground_path")
        and not (row.id == "monitor_alarm" and given.supply == "earthed")
    ]  # fmt: skip
    incident, conditions_ = given.incident, given.exposure.conditions
    others = {
        "humidity at the place": conditions_.humidity,
        "floor": conditions_.floor,
        "footwear": conditions_.footwear,
        "earthed or isolated supply": given.supply,
        "whether anybody depends on it": incident.scene.dependence,
        "what was changed before the scene was looked at": incident.scene.changes or None,
        "time of the event": incident.event.at,
        "kind of care area": conditions.care_area(incident, given.site),
    }
    found += [name for name, value in others.items() if value is None]
    not_done = [v for v in given.evidence.verdicts if v.state == "not_practicable" and v.kind]
    found += [f"{check_kinds()[v.kind.id].name}: not practicable, {'; '.join(v.reasons)}"
              for v in not_done if v.kind]  # fmt: skip
    return tuple(found)


def named_conflicts(posterior: Posterior) -> tuple[tuple[str, float], ...]:
    """Findings that all other facts contradict, strongest first."""
    found = [(f, v) for f, v in posterior.conflicts.items() if v >= CONFLICT_NAMED]
    return tuple(sorted(found, key=lambda pair: (-pair[1], pair[0])))

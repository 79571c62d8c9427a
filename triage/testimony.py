"""Witnesses who disagree, each believed in turn: does the ranking depend on whom one believes?"""

import dataclasses
from collections.abc import Mapping

from triage.diagnosis import diagnose
from triage.evidence import Evidence, gather
from triage.exposure import Exposure
from triage.frozen import frozen
from triage.incident import Incident
from triage.knowledge import knowledge


@frozen
class Believed:
    """The ranking if one statement alone is believed.

    Args:
        statement: its id. first: leading cause. probability: of that cause.
        mains: probability of any mains fault.
    """

    statement: str
    first: str
    probability: float
    mains: float


@frozen
class Testimony:
    """What the ranking becomes with each of several disagreeing statements.

    Args:
        each: one row a statement, in the order of the record; empty where nobody disagrees.
        matters: whether the leading cause depends on whom one believes.
    """

    each: tuple[Believed, ...]
    matters: bool


def testimony(
    incident: Incident,
    evidence: Evidence,
    priors: Mapping[str, float],
    exposure: Exposure,
    supply: str | None,
) -> Testimony:
    """Each statement tried alone, everything that was seen or measured kept.

    Shown beside the ranking, never put in its place: the ranking takes the more adverse answer.

    Args:
        incident: the record. evidence: of the whole record. priors: cause id to probability.
        exposure: what was physically possible. supply: of the place, None if not known.
    """
    if not evidence.disagreements:
        return Testimony((), False)
    disputing = {s for said in evidence.disagreements.values() for s in said}
    tried = tuple(
        _believing(dataclasses.replace(incident, statements=(each,)),
                   evidence, priors, exposure, supply)
        for each in incident.statements if each.id in disputing
    )  # fmt: skip
    return Testimony(tried, len({each.first for each in tried}) > 1)


def _believing(
    incident: Incident, evidence: Evidence, priors: Mapping[str, float], exposure: Exposure,
    supply: str | None,
) -> Believed:  # fmt: skip
    found = diagnose(priors, gather(incident, evidence.verdicts, supply), exposure)
    first = found.ranked[0]
    mains = sum(found.of(c) for c in knowledge().family("mains"))
    return Believed(incident.statements[0].id, first, found.of(first), mains)

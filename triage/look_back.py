"""The questions that a confirmed defect opens: who else was, or still is, exposed to it."""

from functools import cache

from triage.citation import Citation
from triage.errors import BadTable
from triage.evidence import Evidence
from triage.frozen import frozen
from triage.incident import Incident
from triage.knowledge import knowledge
from triage.tables import citation, table

OWNERS = frozenset({"biomedical", "ward", "electrician", "risk"})
_TEACHES_NOTHING = frozenset({None, "by_exclusion", "never_established"})


@frozen
class Question:
    """One look-back question.

    Args:
        id: its name. ask: in words. owner: who usually knows. citation: why it is asked.
    """

    id: str
    ask: str
    owner: str
    citation: Citation


@frozen
class LookBackLine:
    """One question with its answer.

    Args:
        question: what is asked. answer: as recorded, None while not yet done. by: which role.
    """

    question: Question
    answer: str | None
    by: str | None


@cache
def questions() -> tuple[Question, ...]:
    """Every look-back question, in order.

    Raises:
        BadTable: an owner that is not known, or a name used twice.
    """
    found = tuple(
        Question(row["id"], " ".join(row["ask"].split()), row["owner"], citation(row, row["id"]))
        for row in table("look_back")["questions"]
    )
    for each in found:
        if each.owner not in OWNERS:
            raise BadTable(f"data/look_back: {each.id}: owner {each.owner} is not known")
    if len({each.id for each in found}) < len(found):
        raise BadTable("data/look_back: a question stands there twice")
    return found


def is_confirmed(incident: Incident, evidence: Evidence) -> bool:
    """Whether a defect stands: found by a check or seen, or a mains cause confirmed.

    The ranking alone never opens a look-back, and a cause left over by exclusion confirms nothing.
    """
    outcome = incident.outcome
    mains = outcome.confirmed_cause in knowledge().family("mains")
    return bool(evidence.defects) or (mains and outcome.how_confirmed not in _TEACHES_NOTHING)


def look_back(incident: Incident, evidence: Evidence) -> tuple[LookBackLine, ...]:
    """Every question with its answer; empty where no defect is confirmed.

    An answer without text leaves its question open.

    Args:
        incident: the record. evidence: its findings and defects.
    """
    if not is_confirmed(incident, evidence):
        return ()
    told = {each.question: each for each in incident.outcome.look_back if each.answer}
    return tuple(
        LookBackLine(each, told[each.id].answer, told[each.id].by)
        if each.id in told else LookBackLine(each, None, None)
        for each in questions()
    )  # fmt: skip

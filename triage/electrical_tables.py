"""Two tables of the electrical part: what monitors see, and sources besides mains leakage."""

from dataclasses import dataclass
from functools import cache
from typing import Any

from triage.citation import Citation
from triage.errors import BadTable, InvalidValue
from triage.tables import table

SEEN = ("yes", "no", "partly")
"""Whether a kind of monitor sees a condition; `partly` never counts as seen."""

WORTH = ("valid", "invalid", "unreliable")
"""What a test taken from an isolated outlet is worth."""


@dataclass(frozen=True, slots=True)
class Sight:
    """One condition of an isolated supply and who sees it.

    Args:
        id: of the condition. condition: in words. hazard, resistance, balance: one of `SEEN`
            for the hazard-current kind, the insulation-resistance kind and the old bridge.
        note: for the reader.
    """

    id: str
    condition: str
    hazard: str
    resistance: str
    balance: str
    note: str


@dataclass(frozen=True, slots=True)
class Void:
    """A reason why the ceiling from a reading must not be used.

    Args:
        id: of the reason. reason: in words. question: what to ask to find out.
    """

    id: str
    reason: str
    question: str


@dataclass(frozen=True, slots=True)
class OutletTest:
    """A test taken from an isolated outlet.

    Args:
        id: of the test. test: in words. worth: one of `WORTH`. why: reason.
        instead: the retest to ask for; empty when valid.
    """

    id: str
    test: str
    worth: str
    why: str
    instead: str


@dataclass(frozen=True, slots=True)
class OtherSource:
    """A source besides mains leakage.

    Args:
        id: of the source. causes: ids of causes it belongs to. output, felt_as: in words.
        question: ties it to a moment. shows, excludes: what proves it or rules it out.
        numbers: SI, the unit ends the key. note, citation: for the reader.
    """

    id: str
    causes: tuple[str, ...]
    output: str
    felt_as: str
    question: str
    shows: str
    excludes: str
    numbers: dict[str, float]
    note: str
    citation: Citation


@dataclass(frozen=True, slots=True)
class MonitorTables:
    """All of data/monitors.yaml.

    Args:
        sight: who sees what. void: when a ceiling is void. outlet_tests: from an isolated outlet.
        false_alarms: causes of alarms without a fault. rule: what still must be done.
        response: steps after an alarm. citations: by table name.
    """

    sight: tuple[Sight, ...]
    void: tuple[Void, ...]
    outlet_tests: tuple[OutletTest, ...]
    false_alarms: tuple[str, ...]
    rule: str
    response: tuple[str, ...]
    citations: dict[str, Citation]


@cache
def monitor_tables() -> MonitorTables:
    """What monitors see and what is void, read once.

    Raises:
        BadTable: an unknown word, or an id given twice.
    """
    given = table("monitors")
    tables = MonitorTables(
        sight=tuple(Sight(**each) for each in given["sight"]),
        void=tuple(Void(**each) for each in given["void"]),
        outlet_tests=tuple(OutletTest(**each) for each in given["isolated_outlet_tests"]),
        false_alarms=tuple(given["false_alarms"]["causes"]),
        rule=given["false_alarms"]["rule"],
        response=tuple(given["response"]["steps"]),
        citations={
            "sight": Citation(**given["sight_citation"]),
            "void": Citation(**given["void_citation"]),
            "outlet_tests": Citation(**given["isolated_outlet_citation"]),
            "false_alarms": Citation(**given["false_alarms"]["citation"]),
            "response": Citation(**given["response"]["citation"]),
        },
    )
    for sight in tables.sight:
        _check_words(sight.id, (sight.hazard, sight.resistance, sight.balance), SEEN)
    for test in tables.outlet_tests:
        _check_words(test.id, (test.worth,), WORTH)
        if (test.worth == "valid") == bool(test.instead):
            raise BadTable(f"monitors.yaml: {test.id} needs a retest exactly when not valid")
    for rows in (tables.sight, tables.void, tables.outlet_tests):
        _check_unique("monitors.yaml", [each.id for each in rows])
    return tables


@cache
def other_sources() -> tuple[OtherSource, ...]:
    """Sources besides mains leakage, read once.

    Raises:
        BadTable: a source without its question, proof or exclusion, or an id given twice.
    """
    sources = tuple(_source(each) for each in table("other_sources")["sources"])
    _check_unique("other_sources.yaml", [each.id for each in sources])
    for each in sources:
        if not (each.causes and each.question and each.shows and each.excludes):
            raise BadTable(f"other_sources.yaml: {each.id} lacks causes, question or proof")
    return sources


def sees(condition: str, monitor: str) -> bool:
    """Whether a kind of monitor can be relied on to see a condition; `partly` is no.

    Args:
        condition: id of a `Sight`. monitor: `hazard`, `resistance` or `balance`.

    Raises:
        InvalidValue: no such condition or kind.

    >>> sees("earth_open", "hazard"), sees("capacitive_leak", "resistance")
    (False, False)
    """
    rows = {each.id: each for each in monitor_tables().sight}
    if condition not in rows or monitor not in ("hazard", "resistance", "balance"):
        raise InvalidValue(f"nothing is known of a {monitor} monitor and '{condition}'")
    return bool(getattr(rows[condition], monitor) == "yes")


def _source(given: dict[str, Any]) -> OtherSource:
    parts = dict(given)
    parts["causes"] = tuple(given["causes"])
    parts["numbers"] = {key: float(value) for key, value in given["numbers"].items()}
    parts["citation"] = Citation(**{key: str(each) for key, each in given["citation"].items()})
    return OtherSource(**parts)


def _check_words(where: str, words: tuple[str, ...], known: tuple[str, ...]) -> None:
    strange = [word for word in words if word not in known]
    if strange:
        raise BadTable(f"monitors.yaml: {where} has unknown word {strange}")


def _check_unique(name: str, ids: list[str]) -> None:
    twice = sorted({each for each in ids if ids.count(each) > 1})
    if twice:
        raise BadTable(f"{name}: ids given twice: {', '.join(twice)}")

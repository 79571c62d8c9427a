"""Every example against the outcome a clinical engineer set down for it before it was run.

The expectations lie beside the records in examples/expected. Their source is judgement on the cause
table's published mechanisms: each file says in `why` what the engineer would answer.
"""

from collections.abc import Iterator
from functools import cache
from pathlib import Path
from typing import Any

import pytest
import yaml

from triage.assessment import Assessment, assess
from triage.disposition import Level
from triage.knowledge import knowledge
from triage.record import from_plain
from triage.record import load as load_record
from triage.site import Site
from triage.site import load as load_site
from triage.strict_yaml import Plain, read

EXAMPLES = Path(__file__).parent.parent / "examples"
NAMES = sorted(path.stem for path in (EXAMPLES / "incidents").glob("*.yaml"))
EXPECTED = sorted(path.stem for path in (EXAMPLES / "expected").glob("*.yaml"))
PARTLY = ("question", "shut", "ceiling")
"""Facts named by a part of their text; all others are named whole."""

example = pytest.mark.parametrize("name", NAMES)


@cache
def site() -> Site:
    return load_site(EXAMPLES / "site.yaml")


@cache
def assessment(name: str) -> Assessment:
    return assess(load_record(EXAMPLES / "incidents" / f"{name}.yaml"), site())


@cache
def expected(name: str) -> dict[str, Any]:
    text = (EXAMPLES / "expected" / f"{name}.yaml").read_text(encoding="utf-8")
    found: dict[str, Any] = yaml.safe_load(text)
    return found


def without(name: str, *checks: str) -> Assessment:
    """The same incident as if some of its checks had not been made."""
    plain = read(EXAMPLES / "incidents" / f"{name}.yaml")
    kept = [check for check in plain.tree["checks"] if check["id"] not in checks]
    assert len(kept) == len(plain.tree["checks"]) - len(checks)
    return assess(from_plain(Plain(plain.name, plain.tree | {"checks": kept})), site())


def word(level: Level) -> str:
    return level.name.lower()


def facts(found: Assessment) -> frozenset[str]:
    """What a conclusion says, as short marks such as `defect:pump/earth_continuity`."""
    return frozenset(_of_decision(found)) | frozenset(_of_evidence(found))


def _of_decision(found: Assessment) -> Iterator[str]:
    yield f"gate:{'open' if found.gate.open else 'shut'}"
    yield f"leading:{found.posterior.ranked[0]}"
    yield from (f"shut:{text}" for text in found.gate.shut_by)
    for item in found.items:
        yield f"{item.item}:{word(item.level)}"
        yield f"level:{word(item.level)}"
        yield from (f"missing:{item.item}/{check}" for check in item.missing)
    yield f"level:{word(found.room.level)}"
    yield from (f"care:{row.id}" for row in found.care.rows)
    yield from (f"caution:{row.id}" for row in found.cautions)
    yield from (f"question:{text}" for text in found.record.questions)
    yield from (f"unknown:{text}" for text in found.unknown)


def _of_evidence(found: Assessment) -> Iterator[str]:
    for flag in found.flags:
        yield f"{'cleared' if flag.cleared else 'standing'}:{flag.flag.id}"
    for defect in found.evidence.defects:
        yield from (f"defect:{defect.item}", f"defect:{defect.item}/{defect.check}")
    for verdict in found.verdicts:
        state = verdict.state.split("_")[0]
        kinds = {"as_left"} if verdict.as_left else set()
        kinds.add("not_practicable" if verdict.state == "not_practicable" else state)
        yield from (f"{kind}:{verdict.check.id}" for kind in kinds)
    yield from (f"disagreement:{finding}" for finding in found.evidence.disagreements)
    ceiling = found.exposure.ceiling
    if ceiling is not None:
        reading = found.incident.supply.current_reading
        yield f"ceiling:{'void' if ceiling.void else 'binds'} {reading.text if reading else ''}"


def said(mark: str, found: frozenset[str]) -> bool:
    kind, _, text = mark.partition(":")
    if kind not in PARTLY:
        return mark in found
    return any(each.startswith(f"{kind}:") and text in each for each in found)


def test_every_record_has_its_expectation_and_the_other_way_round() -> None:
    assert NAMES == EXPECTED
    assert len(NAMES) >= 16


def test_the_site_file_says_that_it_is_invented_and_raises_no_question() -> None:
    assert "INVENTED" in (EXAMPLES / "site.yaml").read_text(encoding="utf-8").splitlines()[0]
    assert site().questions == ()


def test_no_two_examples_share_an_id() -> None:
    assert len({assessment(name).incident.id for name in NAMES}) == len(NAMES)


@example
def test_the_room_of_an_example_stands_in_the_site_file(name: str) -> None:
    place = assessment(name).incident.place
    room = site().room(place.room)
    assert room is not None
    assert place.area in (None, room.area)


@example
def test_every_expectation_gives_its_reason_in_words(name: str) -> None:
    assert len(expected(name)["why"].split()) >= 12


@example
def test_each_item_gets_the_disposition_an_engineer_would_give(name: str) -> None:
    found = {each.item: word(each.level) for each in assessment(name).items}
    wrong = {
        item: (found.get(item), levels)
        for item, levels in expected(name)["disposition"].items()
        if found.get(item) not in levels
    }
    assert not wrong


@example
def test_room_and_headline_are_as_severe_as_expected(name: str) -> None:
    found, wanted = assessment(name), expected(name)
    assert word(found.room.level) in wanted["room"]
    assert word(found.headline) in wanted["headline"]


@example
def test_the_first_ranked_cause_and_its_mechanism_are_acceptable(name: str) -> None:
    leader = assessment(name).posterior.ranked[0]
    wanted = expected(name)
    assert "any" in wanted["leading"] or leader in wanted["leading"]
    assert wanted["family"] in ("any", knowledge().causes[leader].mechanism)


@example
def test_gate_care_and_questions_are_as_expected(name: str) -> None:
    found, wanted = assessment(name), expected(name)
    assert found.gate.open is wanted["gate_open"]
    assert found.care.urgency == wanted["care_urgency"]
    assert len(found.record.questions) == wanted["questions"]


@example
def test_what_must_be_said_is_said(name: str) -> None:
    found = facts(assessment(name))
    assert [mark for mark in expected(name)["must_mention"] if not said(mark, found)] == []


@example
def test_what_must_not_be_concluded_is_not_concluded(name: str) -> None:
    found = facts(assessment(name))
    assert [mark for mark in expected(name)["forbidden"] if said(mark, found)] == []


@pytest.mark.parametrize("name", [n for n in NAMES if "same_without" in expected(n)])
def test_checks_as_left_change_no_byte_of_the_ranking(name: str) -> None:
    later = expected(name)["same_without"]
    assert repr(without(name, *later).posterior) == repr(assessment(name).posterior)


@pytest.mark.parametrize("check", ["k1", "k2", "k3", "k4"])
def test_without_any_one_of_the_clearing_checks_the_charged_cart_is_held(check: str) -> None:
    found = without("instrument-cart-four-shocked", check)
    assert not found.gate.open
    assert found.headline == Level.HOLD

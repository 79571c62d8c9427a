"""The conclusions in the order they are read: what each line may and may not say."""

import random

import pytest
import random_records
from printed_texts import NAMES, drawn, example

from triage.assessment import assess
from triage.disposition import Level
from triage.documents.summary import (
    METHOD_NOTE,
    causes_lead,
    causes_note,
    defect_lines,
    estimate_lines,
    item_lines,
    person_lead,
    person_lines,
    review_lines,
    severe,
    summarise,
    unknown_lines,
    watch_line,
)
from triage.knowledge import knowledge
from triage.site import no_site


def spoiled(**persons: object):
    """A static story whose person has further marks."""
    tree = random_records.clean_tree(random.Random(1), "plate")
    tree["persons"][0] |= persons
    return assess(random_records.record(tree), no_site())


@pytest.mark.parametrize("seed", range(0, 200, 5))
def test_the_person_is_told_every_action_and_what_to_watch_for(seed: int) -> None:
    a = drawn(seed)
    lines = person_lines(a)

    assert lines[0] == person_lead(a) and lines[-1] == watch_line()
    assert [row.action for row in a.care.rows if row.action not in lines] == []


def test_a_blood_exposure_stands_beside_a_medical_emergency_and_not_in_its_place() -> None:
    assert person_lead(spoiled(breach="yes")) == "The person comes first: blood-exposure route now."
    both = person_lead(spoiled(breach="yes", signs=["lost_consciousness"]))
    assert "medical assessment" in both and "blood-exposure route" in both


def test_a_role_keeps_its_capital_letters() -> None:
    assert review_lines(spoiled(role="ICU nurse", review="seen")) == ("ICU nurse: seen.",)


def test_without_a_valid_check_no_item_is_said_to_be_without_defect() -> None:
    a = drawn(0)
    none = assess(random_records.record(a.record.tree | {"checks": []}), no_site())

    assert none.evidence.defects == () or defect_lines(none)
    for seed in range(60):
        a = drawn(seed)
        passed = {v.check.of for v in a.verdicts if v.state == "valid_pass"}
        items = sorted(a.items, key=lambda i: (-i.level, i.item))
        for each, line in zip(items, item_lines(a), strict=True):
            assert (line.defect == "none found by the checks done") <= (each.item in passed)
        if not a.evidence.defects:
            assert defect_lines(a)[0].startswith("None" if passed else "Not known")


@pytest.mark.parametrize("name", NAMES)
def test_nothing_missing_is_never_called_nothing_that_matters(name: str) -> None:
    a = example(name)
    lines = unknown_lines(a)

    if a.unknown:
        assert lines == a.unknown
    else:
        needed = sum(each.mandatory for each in a.next_checks)
        assert len(lines) == 1 and (str(needed) in lines[0]) == bool(needed)


@pytest.mark.parametrize("seed", range(0, 200, 5))
def test_a_leader_under_even_odds_is_not_settled(seed: int) -> None:
    a = drawn(seed)
    p = a.posterior.of(a.posterior.ranked[0])

    assert causes_lead(a).startswith("Not settled" if p < 0.5 else "Most likely")
    assert causes_note(a).endswith(METHOD_NOTE)


@pytest.mark.parametrize("seed", range(0, 200, 5))
def test_estimates_begin_with_the_mechanism_of_the_first_cause(seed: int) -> None:
    a = drawn(seed)
    lines = estimate_lines(a)
    mains = knowledge().causes[a.posterior.ranked[0]].mechanism == "mains"

    assert lines and all(each.middle and each.rests_on for each in lines)
    if mains and any(e.electrical for e in a.exposure.causes.values()):
        assert not lines[0].quantity.startswith(("Voltage", "Discharge"))


@pytest.mark.parametrize("seed", range(0, 200, 5))
def test_items_stand_most_severe_first_and_the_headline_is_the_most_severe(seed: int) -> None:
    a = drawn(seed)
    levels = [line.severity for line in item_lines(a)]

    assert levels == sorted(levels, reverse=True)
    assert int(a.headline) == max([int(a.room.level), *levels])
    assert severe(a) == (a.headline in (Level.WITHDRAW, Level.ISOLATE))
    assert all(line.why for line in item_lines(a))


def test_an_estimate_that_nobody_could_feel_is_printed_as_it_is(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    from triage.documents import summary
    from triage.errors import InvalidValue

    def impossible(*_: object) -> None:
        raise InvalidValue("the observation is impossible under this estimate")

    a = example("corridor-push-plate")
    felt = [each.quantity for each in estimate_lines(a)]
    monkeypatch.setattr(summary, "after_noticing", impossible)
    bare = [each.quantity for each in estimate_lines(a)]

    assert any("if felt" in each for each in felt)
    assert not any("if felt" in each for each in bare) and len(bare) == len(felt)


@pytest.mark.parametrize("seed", range(0, 100, 5))
def test_checks_are_the_next_checks_each_once_under_who_may_do_them(seed: int) -> None:
    a = drawn(seed)
    groups = summarise(a).next_checks

    assert sum(len(lines) for _, lines in groups) == len(a.next_checks)
    assert len({who for who, _ in groups}) == len(groups)

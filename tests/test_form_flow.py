"""The form without a terminal: branches, going back, random answers, and never milder by silence."""

import random
from pathlib import Path

import pytest
from form_answers import MAINS, STATIC
from form_walk import NOW, again, find, fresh, random_walk, walked

from triage.errors import InvalidValue
from triage.fields import Field
from triage.form.change import answer, confirmed
from triage.form.draft import written
from triage.form.first_minute import assess_state
from triage.form.flow import before, first_minute_is_over, is_answered, next_step, progress, steps
from triage.form.state import State, get
from triage.record import from_plain, loads
from triage.site import load, no_site
from triage.strict_yaml import Plain, parse

NO_SITE = no_site()
SITE = load(Path(__file__).parent.parent / "examples" / "site.yaml")


def test_a_whole_static_incident_takes_at_most_sixty_answers() -> None:
    assert len(STATIC) <= 60
    assert next_step(walked(fresh(), STATIC, NO_SITE), NO_SITE) is None


def test_a_whole_incident_of_a_device_on_an_isolated_supply_is_asked_to_the_end() -> None:
    state = walked(fresh(), MAINS, SITE)
    assert next_step(state, SITE) is None
    assert get(state.tree, "items[0].outlet") == "outlet1"
    assert get(state.tree, "items[1].supply") == "isolated"


def test_the_provisional_disposition_needs_at_most_eight_answers() -> None:
    for typed, site in ((STATIC, NO_SITE), (MAINS, SITE)):
        over = [
            n for n in range(10) if first_minute_is_over(walked(fresh(), typed[:n], site), site)
        ]
        assert over[0] <= 8


def test_the_person_comes_first_and_what_changes_soonest_before_the_statements() -> None:
    order = list(dict.fromkeys(each.section.id for each in steps(fresh(), NO_SITE)))
    assert order[:5] == ["first_minute", "persons", "danger", "soonest", "statements"]


def test_what_cannot_apply_is_not_asked() -> None:
    keys = {each.key for each in steps(walked(fresh(), STATIC, NO_SITE), NO_SITE)}
    assert "supply.current_reading" not in keys
    assert "items[0].equipment_class" not in keys
    assert "first_plugged" not in keys


def test_going_back_across_a_branch_drops_what_no_longer_applies_and_says_so() -> None:
    state = walked(fresh(), MAINS, SITE)
    change = again(state, "supply.kind", "earthed", SITE)
    assert get(change.state.tree, "supply.current_reading") is None
    assert any(
        "What current does the monitor show now? (1.4 mA)" in each for each in change.dropped
    )
    assert get(state.tree, "supply.current_reading") == "1.4 mA", (
        "the earlier state stays as it was"
    )


def test_an_adverse_answer_never_vanishes_because_of_a_branch() -> None:
    state = walked(fresh(), MAINS, SITE)
    change = again(state, "supply.kind", "earthed", SITE)
    assert get(change.state.tree, "supply.alarm") == "yes"
    assert find(change.state, "supply.alarm", SITE), "it can still be taken back itself"


def test_an_outlet_that_only_one_answer_named_goes_with_that_answer() -> None:
    state = walked(fresh(), MAINS, SITE)
    change = again(state, "items[0].outlet", "outlet 5 at the wall", SITE)
    names = [each.get("name") for each in change.state.tree["items"]]
    assert "pendant outlet W3" not in names
    assert "outlet 5 at the wall" in names
    assert any("outlet1" in each for each in change.dropped)


def test_a_person_taken_back_leaves_no_reference_behind() -> None:
    state = walked(
        fresh(), [*STATIC[:11], "yes", "staff", "surgeon", "none", "no", "not yet", "no"], NO_SITE
    )
    assert [each["id"] for each in state.tree["persons"]] == ["p1", "p2"]
    state.tree["statements"][0]["person"] = "p2"
    change = again(state, "another:persons:1", "no", NO_SITE)
    assert [each["id"] for each in change.state.tree["persons"]] == ["p1"]
    assert "person" not in change.state.tree["statements"][0]
    assert change.dropped == ("persons p2",)


def test_a_first_answer_given_again_takes_back_what_it_had_set() -> None:
    state = walked(fresh(), STATIC[:7], NO_SITE)
    change = again(state, "first_felt", "again", NO_SITE)
    assert change.state.tree["statements"][0] == {"id": "s1", "repeat_at_once": "yes"}


def test_of_two_short_answers_that_disagree_the_more_adverse_one_counts() -> None:
    change = answer(
        fresh(), next_step(fresh(), NO_SITE), typed="nobody burn", site=NO_SITE, present=NOW
    )
    assert change.state.tree["persons"][0]["signs"] == ["burn"]
    assert change.dropped == ("none: a more adverse answer stands beside it",)


def test_choosing_nothing_adverse_in_the_first_minute_does_not_count_as_no() -> None:
    state = walked(fresh(), [*STATIC[:4], "snap"], NO_SITE)
    assert "repeat_at_once" not in state.tree["statements"][0]
    assert "others_felt" not in state.tree["statements"][0]


def test_a_reassuring_answer_beside_an_adverse_one_is_refused_later_on() -> None:
    state = walked(fresh(), STATIC, NO_SITE)
    with pytest.raises(InvalidValue, match="cannot stand beside"):
        again(state, "items[0].condition", "intact wet", NO_SITE)


def test_the_step_before_is_the_one_asked_before() -> None:
    state = walked(fresh(), STATIC[:9], NO_SITE)
    step = next_step(state, NO_SITE)
    assert step and step.key == "persons[0].breach"
    assert before(step, state, NO_SITE).key == "persons[0].signs", "answered in the first minute"
    first = next(iter(steps(state, NO_SITE)))
    assert before(first, state, NO_SITE) is None


def test_progress_never_says_that_more_was_answered_than_asked() -> None:
    state = fresh()
    for typed in STATIC:
        done, total = progress(state, NO_SITE)
        assert 0 <= done < total
        state = walked(state, [typed], NO_SITE)
    done, total = progress(state, NO_SITE)
    assert done == total


def test_what_the_room_brings_counts_only_once_confirmed() -> None:
    upto = MAINS.index("or-6") + 1
    asked = walked(fresh(), MAINS[:upto], SITE)
    assert get(asked.tree, "supply.kind") is None
    yes = walked(asked, ["yes"], SITE)
    assert get(yes.tree, "supply.voltage") == "230 V"
    assert "supply.voltage" in confirmed(yes, SITE)
    no = walked(asked, ["no"], SITE)
    assert get(no.tree, "supply.kind") is None
    assert confirmed(no, SITE) == []


def test_a_default_taken_back_is_asked_for_again() -> None:
    yes = walked(fresh(), MAINS[: MAINS.index("or-6") + 2], SITE)
    no = again(yes, "defaults:or-6", "no", SITE).state
    assert get(no.tree, "supply.voltage") is None
    assert next_step(no, SITE).key == "place.area"


@pytest.mark.parametrize("seed", range(60))
def test_random_answers_never_crash_and_always_leave_a_valid_record(seed: int) -> None:
    rng = random.Random(seed)
    site = rng.choice((NO_SITE, SITE))
    state = walked(fresh(), MAINS[: rng.randint(0, 60)], SITE) if seed % 3 == 0 else fresh()
    state = random_walk(rng, state, SITE if seed % 3 == 0 else site, rng.choice((10, 25, 60)))
    from_plain(Plain("walk", state.tree))
    assert parse(written(state.tree), "walk").tree == state.tree


@pytest.mark.parametrize("seed", range(10))
def test_a_random_draft_can_be_assessed_at_any_time(seed: int) -> None:
    state = random_walk(random.Random(1000 + seed), fresh(), SITE, 40)
    assert assess_state(state, SITE).headline >= 2


def calm_only(state: State) -> list[tuple[str, str]]:
    """Paths of every reassuring answer of a record, with the name of the field."""
    found = []
    for each in steps(state, NO_SITE):
        if each.kind == "field" and is_answered(each, state) and each.question:
            row: Field = each.question.field
            value = get(state.tree, each.key)
            words = value if isinstance(value, list) else [value]
            if any((row.order(w) or 0) < 0 for w in words if w in row.words):
                found.append((each.key, row.kind))
    return found


@pytest.mark.parametrize("count", range(0, 61, 3))
def test_fewer_answers_are_never_milder_than_the_whole_form(count: int) -> None:
    whole = assess_state(walked(fresh(), STATIC, NO_SITE), NO_SITE)
    part = assess_state(walked(fresh(), STATIC[:count], NO_SITE), NO_SITE)
    assert part.headline >= whole.headline


def with_checks(state: State) -> State:
    """A complete form with a valid pass of every mandatory check."""
    from random_records import complete_checks

    tree = dict(state.tree)
    tree["checks"] = complete_checks(tree)
    return State(tree, state.marks)


def test_every_reassuring_answer_of_a_released_form_is_needed_or_settled() -> None:
    whole = with_checks(walked(fresh(), STATIC, NO_SITE))
    released = assess_state(whole, NO_SITE)
    assert released.headline == 1, released.gate.shut_by
    calm = calm_only(whole)
    assert len(calm) >= 15
    for key, _ in calm:
        part = whole.copy()
        holder, _, name = key.rpartition(".")
        get(part.tree, holder).pop(name)
        assert assess_state(part, NO_SITE).headline >= released.headline


def test_what_the_form_writes_is_read_back_as_the_same_record() -> None:
    state = walked(fresh(), STATIC, NO_SITE)
    assert loads(written(state.tree)).tree == state.tree

import itertools

import pytest

from triage import words as w
from triage.check_table import cannot_be_released, check_kinds, mandatory_checks
from triage.knowledge import knowledge
from triage.limits import load_limits
from triage.quantity import KINDS

SUPPLIES = ("earthed", "isolated", "none", None)
CONTACTS = [
    frozenset(c) for n in range(4) for c in itertools.combinations(("plain", "wet", "two_metal"), n)
]


def test_checks_come_in_the_fixed_safety_order() -> None:
    assert [kind.order for kind in check_kinds().values()] == list(range(1, len(check_kinds()) + 1))


@pytest.mark.parametrize("kind", check_kinds().values(), ids=lambda kind: kind.id)
def test_a_check_has_a_quantity_with_a_range_or_none_at_all(kind) -> None:
    if kind.quantity is None:
        assert kind.low is kind.high is None and not kind.limits_from
        assert not any(each.value_needed for each in kind.accepts)
    else:
        assert kind.quantity in KINDS and kind.low < kind.high


@pytest.mark.parametrize("kind", check_kinds().values(), ids=lambda kind: kind.id)
def test_every_accepted_method_stands_once_and_every_limit_names_accepted_methods(kind) -> None:
    methods = [each.method for each in kind.accepts]
    assert methods and len(methods) == len(set(methods))
    assert all(
        each.supplies <= {"any", "earthed", "isolated", "own_source"} for each in kind.accepts
    )
    for source in kind.limits_from:
        assert source.methods <= set(methods)
        rows = load_limits().find(check=source.check, edition=source.edition, method=source.method,
                                  kind=kind.quantity)  # fmt: skip
        assert rows, f"{kind.id}: no limit of {source.edition} for {source.check}"


@pytest.mark.parametrize("kind", check_kinds().values(), ids=lambda kind: kind.id)
def test_a_check_says_what_it_shows_and_what_it_does_not(kind) -> None:
    assert kind.how and kind.shows_pass and kind.shows_fail and kind.does_not_show and kind.retest
    assert set(kind.separates) <= set(knowledge().causes)


@pytest.mark.parametrize("item", w.ITEM_KIND)
def test_every_kind_of_item_has_a_mandatory_set_or_is_never_released_here(item: str) -> None:
    sets = [mandatory_checks(s, item, c) for s in SUPPLIES for c in CONTACTS]
    assert all(bool(each) != (item in cannot_be_released()) for each in sets)


@pytest.mark.parametrize("item", w.ITEM_KIND)
def test_not_knowing_the_supply_or_the_contact_never_shortens_the_list(item: str) -> None:
    unknown_contact = frozenset()
    for supply, contact in itertools.product(SUPPLIES, CONTACTS):
        known = set(mandatory_checks(supply, item, contact))
        assert known <= set(mandatory_checks(None, item, contact))
        assert known <= set(mandatory_checks(supply, item, unknown_contact))


@pytest.mark.parametrize("item", w.ITEM_KIND)
def test_one_more_contact_word_never_shortens_the_list(item: str) -> None:
    for supply, contact in itertools.product(SUPPLIES, CONTACTS[1:]):
        more = set(mandatory_checks(supply, item, contact | {"wet", "two_metal"}))
        assert set(mandatory_checks(supply, item, contact)) <= more


def test_a_kind_that_is_not_known_has_no_set_and_so_no_release() -> None:
    assert mandatory_checks("earthed", None, frozenset()) == ()


@pytest.mark.parametrize("item", [kind for kind in w.ITEM_KIND if kind not in cannot_be_released()])
def test_every_mandatory_check_can_be_made_on_its_kind_of_item(item: str) -> None:
    for check in mandatory_checks(None, item, frozenset()):
        assert item in check_kinds()[check].applies_to, check


@pytest.mark.parametrize("supply", ["earthed", "isolated"])
@pytest.mark.parametrize(
    "item", ["device_mains", "electrosurgical_unit", "stimulator_defibrillator"]
)
def test_a_mains_item_is_never_released_without_earth_insulation_and_leakage(
    item: str, supply: str
) -> None:
    for contact in CONTACTS:
        have = set(mandatory_checks(supply, item, contact))
        assert have >= {
            "visual_inspection",
            "earth_continuity",
            "insulation_resistance",
            "touch_current",
        }
        assert have & {"outlet_test", "isolated_alarm_test"}

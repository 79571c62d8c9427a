import pytest
from test_validity import EARTH, check, verdict

from triage.in_force import is_stricter, tightened
from triage.limits import load_limits
from triage.site import Site
from triage.site import loads as load_site
from triage.validity import CheckVerdict


def site(text_: str) -> Site:
    return load_site(f"schema: 1\n{text_}\n")


def limit_of(found: CheckVerdict) -> str:
    assert found.limit is not None
    return found.limit.edition.id


def test_the_edition_in_force_decides() -> None:
    # IEC 62353: 0.3 ohm with cord; NFPA 99-2012: 0.5 ohm.
    between = {**EARTH, **check(value="0.4 ohm", result=None)}
    nfpa = site("editions: [{check: earth_continuity, edition: nfpa99-2012}]")
    assert verdict(between).state == "valid_fail"
    assert (verdict(between, nfpa).state, limit_of(verdict(between, nfpa))) == (
        "valid_pass",
        "nfpa99-2012",
    )


@pytest.mark.parametrize("edition", ["nowhere-2030", "iso20345", "working"])
def test_an_edition_without_a_limit_for_the_check_leaves_the_shipped_one(edition: str) -> None:
    strange = site(f"editions: [{{check: touch_current, edition: {edition}}}]")
    assert verdict(check(value="20 mA"), strange).state == "valid_fail"
    assert limit_of(verdict({}, strange)) == limit_of(verdict())


def test_a_site_may_make_a_limit_stricter() -> None:
    found = verdict(EARTH)
    assert found.limit is not None
    tight = site(f"tightened: [{{limit: {found.limit.id}, value: 0.05 ohm}}]")
    stricter = verdict(EARTH, tight)
    assert stricter.state == "valid_fail" and stricter.limit is not None
    assert (stricter.limit.text, stricter.limit.citation.known) == ("0.05 ohm", "judgement")
    assert (
        "site file" in stricter.limit.citation.source
        and found.limit.text in stricter.limit.citation.source
    )


@pytest.mark.parametrize(
    "value", ["5 ohm", "0 ohm", "<0.01 ohm", "nonsense", "unknown", "0.05 V", "-1 ohm"]
)
def test_a_site_never_makes_a_limit_looser_nor_unreadable(value: str) -> None:
    shipped = verdict(EARTH).limit
    assert shipped is not None
    loose = site(f"tightened: [{{limit: {shipped.id}, value: '{value}'}}]")
    assert tightened(shipped, loose) == shipped
    assert verdict({**EARTH, **check(value="1 ohm")}, loose).state == "valid_fail"


@pytest.mark.parametrize("limit", load_limits().rows, ids=lambda each: each.id)
def test_stricter_means_less_room_on_the_side_of_the_limit(limit) -> None:
    inside, outside = (0.9, 1.1) if limit.sense == "max" else (1.1, 0.9)
    assert is_stricter(limit.value * inside, limit)
    assert not is_stricter(limit.value * outside, limit)
    assert not is_stricter(limit.value, limit) and not is_stricter(0, limit)


def test_at_least_the_limit_may_be_the_limit_itself_and_more_than_the_limit_may_not() -> None:
    # IEC 62353: at most 0.3 ohm with cord, and 0.3 ohm itself passes.
    assert verdict({**EARTH, **check(value="0.3 ohm", result=None)}).state == "valid_pass"
    assert verdict({**EARTH, **check(value="\u22650.3 ohm", result=None)}).state == "not_done"
    assert verdict({**EARTH, **check(value=">0.3 ohm", result=None)}).state == "valid_fail"

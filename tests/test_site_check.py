import pytest

from triage.check_table import check_kinds
from triage.knowledge import knowledge
from triage.limits import load_limits
from triage.quantity import worded
from triage.site import loads, no_site
from triage.site_check import site_faults


def found(text: str) -> list[str]:
    return site_faults(loads(f"schema: 1\n{text}\n"))


def test_a_site_file_without_departures_is_sound() -> None:
    assert site_faults(no_site()) == []
    assert found("facility: x\nwording: {facts_marking: Confidential}") == []


@pytest.mark.parametrize(
    ("check", "edition"),
    [("earth_continuity", "nfpa99-2012"), ("earth_continuity", "iec62353-2014"), ("touch_current", "iec60601-1-ed3"),
     ("isolated_alarm_test", "csa204-old")],
)  # fmt: skip
def test_a_shipped_edition_may_be_chosen(check: str, edition: str) -> None:
    assert found(f"editions: [{{check: {check}, edition: {edition}}}]") == []


@pytest.mark.parametrize(
    ("check", "edition", "says"),
    [
        ("touch_current", "iso20345", "'iso20345' has no limit for touch_current; use "),
        ("touch_current", "nowhere-2030", "'nowhere-2030' has no limit"),
        ("touch_current", "unknown", "'nothing' has no limit"),
        ("touch_current", "csa204-old", "'csa204-old' has no limit for touch_current"),
        ("isolated_alarm_test", "iec60364-7-710", "has no limit for isolated_alarm_test"),
        ("visual_inspection", "iec60601-1-ed3", "'visual_inspection' has no limit to choose"),
        ("toaster", "iec60601-1-ed3", "'toaster' has no limit to choose"),
    ],
)  # fmt: skip
def test_an_edition_without_a_limit_for_the_check_is_a_fault(
    check: str, edition: str, says: str
) -> None:
    (fault,) = found(f"editions: [{{check: {check}, edition: {edition}}}]")
    assert fault.startswith("editions[0].") and says in fault


USED = [row for row in load_limits().rows if row.check != "reference"]


@pytest.mark.parametrize("limit", USED, ids=lambda each: each.id)
def test_every_limit_may_be_made_stricter_and_none_looser(limit) -> None:
    stricter, looser = (0.5, 2.0) if limit.sense == "max" else (2.0, 0.5)
    typed = "tightened: [{{limit: {}, value: {}}}]"
    for factor, sound in ((stricter, True), (looser, False)):
        value = _typed(limit.value * factor, limit.kind)
        assert (found(typed.format(limit.id, value)) == []) is sound, value
    assert found(typed.format(limit.id, limit.text)) == []


def _typed(value: float, kind: str) -> str:
    return worded(value, kind, 6).replace("\u03a9", "ohm")


@pytest.mark.parametrize(
    ("value", "says"),
    [("5", "has no unit"), ("5 V", "is not a unit of current"), ("0 uA", "is not stricter"), ("-5 uA", "not stricter"),
     ("<50 uA", "is not stricter"), ("unknown", "write it like"), ("1 A", "may only leave less room")],
)  # fmt: skip
def test_a_stricter_value_needs_to_be_a_plain_value_above_zero(value: str, says: str) -> None:
    limit = next(row for row in USED if row.check == "touch_current" and row.sense == "max")
    (fault,) = found(f"tightened: [{{limit: {limit.id}, value: '{value}'}}]")
    assert fault.startswith("tightened[0].value: ") and says in fault


def test_an_unknown_limit_is_a_fault() -> None:
    assert found("tightened: [{limit: nowhere, value: 1 V}]") == [
        "tightened[0].limit: no limit 'nowhere' on file"
    ]


@pytest.mark.parametrize("cause", knowledge().causes)
def test_only_mains_faults_may_be_made_more_probable(cause: str) -> None:
    faults = found(f"policy: {{raised: [{{cause: {cause}, times: 2, reason: old wiring}}]}}")
    assert (faults == []) is (knowledge().causes[cause].mechanism == "mains")


def test_an_unknown_cause_is_a_fault() -> None:
    assert (
        "'gremlins' is not a mains fault"
        in found("policy: {raised: [{cause: gremlins, times: 2}]}")[0]
    )


@pytest.mark.parametrize(
    "words", ["This device is safe to use", "No risk", "It was only static", "HARMLESS"]
)
@pytest.mark.parametrize(
    "field", ["wording: {facts_marking", "wording: {circulation_note", "contacts: {biomedical"]
)
def test_the_sites_wording_may_not_talk_a_fault_away(words: str, field: str) -> None:
    faults = found(f"{field}: {words}}}")
    assert faults and all("talks a fault away" in each for each in faults)


def test_every_fault_comes_at_once_and_control_costs_are_free() -> None:
    faults = found(
        "editions: [{check: a, edition: b}]\ntightened: [{limit: c, value: 1 V}]\n"
        "policy: {raised: [{cause: d, times: 2}]}\ncosts: [{control: anything, cost: about 300}]"
    )
    assert [each.split(":")[0] for each in faults] == [
        "editions[0].check", "tightened[0].limit", "policy.raised[0].cause",
    ]  # fmt: skip


def test_every_check_with_a_limit_offers_its_shipped_edition() -> None:
    for kind in check_kinds().values():
        for source in kind.limits_from:
            assert found(f"editions: [{{check: {kind.id}, edition: {source.edition}}}]") == []

"""The limits table: printed values, gradings, choices, and what loading refuses."""

import copy
from pathlib import Path

import pytest
import yaml

from triage.errors import BadTable, InvalidValue
from triage.limits import CHECKS, load_limits, read_limits

TESTS = Path(__file__).parent
PUBLISHED = yaml.safe_load((TESTS / "published/electrical.yaml").read_text())
TABLE = yaml.safe_load((TESTS.parent / "triage/data/limits.yaml").read_text())
LIMITS = load_limits()


def changed(row_id: str, **change: object) -> dict:
    table = copy.deepcopy(TABLE)
    row = next(each for each in table["limits"] if each["id"] == row_id)
    row.update(change)
    return table


@pytest.mark.parametrize(
    ("check", "edition", "condition", "equipment_class", "part", "method", "value"),
    PUBLISHED["published_limits"],
    ids=lambda each: str(each),
)
def test_a_printed_limit_is_found_by_its_properties(
    check, edition, condition, equipment_class, part, method, value
):
    rows = LIMITS.find(
        check=check,
        edition=edition,
        condition=condition,
        equipment_class=equipment_class,
        part=part,
        method=method,
    )
    found = [row for row in rows if row.value == pytest.approx(value, rel=0.002)]
    assert len(found) == 1
    assert found[0].citation.known == "published"


# Values no readable source prints: they must carry the warning wherever they go.
@pytest.mark.parametrize(
    "row_id",
    [
        "nfpa2012-touch-fixed", "nfpa2012-lead-nc", "nfpa2012-lead-open", "nfpa2018-touch-open",
        "nfpa2012-outlet-existing", "nfpa2012-metal-critical", "nfpa2012-metal-general",
        "nfpa2012-new-wiring", "ed3-ap-total-b-nc", "ed3-pe-system", "iec61010-touch-nc",
        "ul101-portable", "iec61557-response", "ed3-plug-pins", "t62353-2007-alt-ii-b",
    ],
)  # fmt: skip
def test_a_value_from_memory_carries_the_warning(row_id):
    row = next(each for each in LIMITS.rows if each.id == row_id)
    assert row.citation.known == "memory"
    assert "verify against the edition in force" in row.warning


def test_only_undisputed_published_values_are_free_of_a_warning():
    for row in LIMITS.rows:
        assert bool(row.warning) == (row.citation.known != "published" or row.disputed)


def test_where_sources_disagree_both_values_are_shown():
    rows = LIMITS.find(
        check="earth_leakage", edition="iec62353-2007", equipment_class="II", method="alternative"
    )
    assert sorted(row.text for row in rows) == ["200 uA", "500 uA"]
    assert all(row.disputed and row.warning for row in rows)


def test_a_mobile_x_ray_set_has_its_own_alternative_and_direct_values():
    def texts(method: str, item: str) -> list[str]:
        rows = LIMITS.find(check="earth_leakage", edition="iec62353-2007", method=method, item=item)
        return [row.text for row in rows]

    assert texts("alternative", "mobile_xray_with_extra_earth") == ["5000 uA"]
    assert texts("alternative", "mobile_xray") == ["2000 uA"]
    assert texts("direct", "mobile_xray") == ["2500 uA"]


def test_a_single_fault_row_answers_an_open_earth_and_an_open_neutral():
    for condition in ("open_earth", "open_neutral", "single_fault"):
        rows = LIMITS.find(check="touch_current", edition="iec60601-1-ed3", condition=condition)
        assert [row.text for row in rows] == ["500 uA"]


def test_not_knowing_a_property_keeps_every_row_it_could_be():
    wide = set(LIMITS.find(check="touch_current", edition="nfpa99-2012"))
    for condition in ("normal", "open_earth"):
        narrow = LIMITS.find(check="touch_current", edition="nfpa99-2012", condition=condition)
        assert narrow and set(narrow) < wide


def test_every_check_has_an_edition_to_choose_but_each_edition_only_its_own_rows():
    for check in CHECKS:
        assert LIMITS.choices(check)
        for edition in LIMITS.choices(check):
            rows = LIMITS.find(check=check, edition=edition.id, item=None)
            assert rows and {row.edition for row in rows} == {edition}


def test_every_limit_can_be_looked_up_by_its_reader():
    for row in LIMITS.rows:
        assert row.citation.source and row.text and row.edition.standard
        assert row.value > 0


@pytest.mark.parametrize(
    "question",
    [
        {"check": "touch"},
        {"edition": "nfpa99-2049"},
        {"condition": "wet"},
        {"method": "guess"},
        {"item": "lamp"},
    ],
)
def test_a_word_the_table_does_not_know_is_refused_not_answered_with_nothing(question):
    with pytest.raises(InvalidValue, match="known"):
        LIMITS.find(**question)


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"value": "500"}, "unit"),
        ({"value": "500 ohm"}, "unit"),
        ({"kind": "colour"}, "colour"),
        ({"check": "touching"}, "check"),
        ({"sense": "about"}, "sense"),
        ({"edition": "nfpa99-2049"}, "edition"),
        ({"condition": "wet"}, "wet"),
        ({"class": ["III"]}, "III"),
        ({"part": ["D"]}, "D"),
        ({"method": ["guess"]}, "guess"),
        ({"item": "lamp"}, "lamp"),
        ({"known": "heard"}, "heard"),
        ({"source": " "}, "source"),
        ({"colour": "red"}, "colour"),
        ({"id": "nfpa2005-touch"}, "twice"),
        ({"condition": "normal"}, "undisputed"),
        ({"disputed": True}, "disputed"),
    ],
)
def test_a_row_that_contradicts_the_table_fails_loading(change, message):
    with pytest.raises(BadTable, match=message):
        read_limits(changed("nfpa2012-touch-open", **change))


def test_a_row_without_a_note_or_citation_fails_loading():
    for key in ("note", "source", "known", "clause"):
        table = changed("nfpa2012-touch-open")
        del next(r for r in table["limits"] if r["id"] == "nfpa2012-touch-open")[key]
        with pytest.raises(BadTable, match=key):
            read_limits(table)


def test_an_edition_of_an_unknown_scope_fails_loading():
    table = copy.deepcopy(TABLE)
    table["editions"][0]["scope"] = "kitchen"
    with pytest.raises(BadTable, match="kitchen"):
        read_limits(table)

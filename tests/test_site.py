import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from triage.canonical import canonical, digest
from triage.errors import BadRecord, TriageError
from triage.site import LOWEST_MISS_RATIO, SHIPPED_MISS_RATIO, SiteFile, from_plain, loads, no_site
from triage.strict_yaml import Plain


def faults(text: str) -> str:
    with pytest.raises(BadRecord) as caught:
        loads(f"schema: 1\n{text}\n", "s.yaml")
    return str(caught.value)


def test_without_a_site_file_the_shipped_values_hold() -> None:
    site = no_site()
    assert (site.zone, site.miss_ratio, site.digest) == ("UTC", SHIPPED_MISS_RATIO, digest(b""))
    assert site.room("any") is None and site.room(None) is None


def test_a_site_file_is_read_with_its_digest() -> None:
    site = loads("schema: 1\nzone: Europe/Berlin\npaper: A4\npolicy: {miss_ratio: 200}\n")
    assert (site.zone, site.miss_ratio, site.file.paper) == ("Europe/Berlin", 200, "A4")
    tree = {"schema": "1", "zone": "Europe/Berlin", "paper": "A4", "policy": {"miss_ratio": "200"}}
    assert site.digest == digest(canonical(tree))


@pytest.mark.parametrize("paper", ["A4", "Letter", "letter"])
def test_both_papers_can_be_chosen(paper: str) -> None:
    assert loads(f"schema: 1\npaper: {paper}\n").file.paper.lower() == paper.lower()


@pytest.mark.parametrize("ratio", ["49", "0", "1", "-100", "49.9", "5e1"])
def test_a_missed_fault_never_weighs_less_than_fifty_needless_holds(ratio: str) -> None:
    assert LOWEST_MISS_RATIO == 50
    assert "is not a whole number from 50" in faults(f"policy: {{miss_ratio: '{ratio}'}}")


@pytest.mark.parametrize("times", ["0", "0.5", "-2", "21"])
def test_a_cause_is_made_more_probable_or_left_alone(times: str) -> None:
    assert "whole number from 1 to 20" in faults(
        f"policy: {{raised: [{{cause: moisture, times: '{times}'}}]}}"
    )


@pytest.mark.parametrize(
    "bad",
    ["http://x.example", "see https://x", "ftp://x", "file:/etc/passwd", "/etc/passwd", "see /etc/passwd",
     "~/x", "./x", "../x", "a/../b", "C:/x", "C:\\\\x", "www.x.example", "mailto:a@b", "javascript:x",
     "data:text/html", "{{ x }}", "{% if x %}", "{# x #}", "${HOME}", "<script>", "<b>x</b>", "</div>", "<!-- x"],
)  # fmt: skip
@pytest.mark.parametrize(
    "field", ["facility", "wording.facts_marking", "contacts.risk_office", "rooms.name"]
)
def test_no_address_path_template_or_markup_passes(bad: str, field: str) -> None:
    part, _, name = field.partition(".")
    value = f'"{bad}"'
    text = {
        "": f"{part}: {value}",
        "name": f"rooms: [{{id: r1, name: {value}}}]",
    }.get(name, f"{part}: {{{name}: {value}}}")
    assert "a site file holds plain words only" in faults(text)


@pytest.mark.parametrize("key", ["{{x}}", "/etc/passwd"])
def test_a_key_is_no_back_door_either(key: str) -> None:
    assert "no field of that name" in faults(f'"{key}": x')


@pytest.mark.parametrize(
    "good",
    ["Privileged & confidential, 5 < 10 %", "Ward 3/4", "in/out", "24 h / 7 d", "ext. 4000", "50 % RH (see note)",
     "Quality review: do not copy", "Ärztlicher Dienst", "1/2"],
)  # fmt: skip
def test_ordinary_words_pass(good: str) -> None:
    assert (
        loads(f'schema: 1\nwording: {{facts_marking: "{good}"}}\n').file.wording.facts_marking
        == good
    )


def test_texts_have_a_greatest_length() -> None:
    assert "at most 300" in faults("wording: {facts_marking: " + "x" * 301 + "}")


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("schema: 2", "key 'schema' appears twice"),
        ("zone: Mars/Olympus", "is not a time zone"),
        ("zone: ''\nzones: UTC", "did you mean 'zone'?"),
        ("paper: A3", "'A3' is not one of: A4, Letter"),
        ("duties: [uk]", "is not one of: us_device"),
        ("rooms: [{id: a}, {id: a}]", "'a' names two rooms"),
        ("rooms: [{id: a}, {id: b, former_names: [a]}]", "'a' names two rooms"),
        ("rooms: [{name: x}]", "'id' is required"),
        ("rooms: [{id: a, voltage: 230}]", "needs a unit"),
        ("editions: [{check: touch_current, edition: a}, {check: touch_current, edition: b}]", "stands twice"),
        ("tightened: [{limit: a, value: 1 V}, {limit: a, value: 2 V}]", "stands twice"),
        ("policy: {raised: [{cause: a, times: 2}, {cause: a, times: 3}]}", "stands twice"),
        ("templates: x", "no field of that name"),
        ("include: x", "no field of that name"),
    ],
)  # fmt: skip
def test_a_site_file_that_cannot_be_taken_says_where_and_why(text: str, says: str) -> None:
    found = faults(text)
    assert says.replace("needs a unit", "has no unit") in found
    assert found.startswith("s.yaml:")


@pytest.mark.parametrize("empty", ["", "[]", "x", "{}"])
def test_a_file_without_content_is_refused_with_how_to_start(empty: str) -> None:
    with pytest.raises(BadRecord, match="start with 'schema: 1'"):
        loads(empty)


def test_another_schema_is_refused() -> None:
    with pytest.raises(BadRecord, match="reads schema 1"):
        loads("schema: 3\n")
    with pytest.raises(BadRecord, match="'schema' is required"):
        loads("zone: UTC\n")


def test_a_room_is_found_by_its_present_and_its_former_name() -> None:
    site = loads("schema: 1\nrooms: [{id: or-4, former_names: [theatre-4]}, {id: or-6}]\n")
    assert site.room("or-4") is site.room("theatre-4") is site.file.rooms[0]
    assert site.room("or-9") is None


TREES = st.recursive(
    st.one_of(st.text(max_size=8), st.sampled_from(["1", "a", "230 V", "{{", "2026-01-14"])),
    lambda below: st.one_of(
        st.lists(below, max_size=3),
        st.dictionaries(st.sampled_from([*SiteFile.__dataclass_fields__, "id", "name", "value", "cause"]),
                        below, max_size=4),
    ),
    max_leaves=10,
)  # fmt: skip


@settings(deadline=None)
@given(TREES)
def test_any_tree_is_a_site_file_or_a_deliberate_error(tree: object) -> None:
    try:
        site = from_plain(Plain("s", {"schema": "1", **tree} if isinstance(tree, dict) else tree))
    except TriageError as error:
        assert str(error)
    else:
        assert site.miss_ratio >= LOWEST_MISS_RATIO

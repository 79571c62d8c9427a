"""Earlier reports on the same things are shown, demand a survey, and never touch the ranking."""

import json
import random
from pathlib import Path

import pytest
import sample_records
from random_records import clean_tree, record

from triage.assessment import assess
from triage.cli import app
from triage.documents.earlier_reports import earlier_lines
from triage.history import history
from triage.site import no_site

EXAMPLES = Path(__file__).parents[1] / "examples"


def report(number, asset="BM-1", group="Panel A, circuit 6", room="w3", **more):
    tree = sample_records.tree() | {"id": f"{number:032x}", "place": {"area": "ward", "room": room}}
    tree["items"][0] |= {"asset": asset, "outlet_group": group}
    return assess(record(tree | more), no_site())


def static(number, asset):
    tree = clean_tree(random.Random(4), "cart") | {"id": f"{number:032x}"}
    tree["items"][0]["asset"] = asset
    found = assess(record(tree), no_site())
    assert found.gate.open
    return found


def marks(found):
    return [(m.kind, m.name) for each in found.reports for m in each.shared]


def test_what_is_shared_is_named_and_nothing_else_is_shown():
    other = report(2, asset="X-9", group="Panel B", room="w9")
    found = history(report(1), [report(3, group="Panel B", room="w9"), other])
    assert marks(found) == [("asset", "BM-1")]
    assert found.looked_at == 2


def test_case_and_blanks_of_a_typed_name_do_not_count():
    found = history(report(1), [report(2, asset="bm -1", group="PANEL A,circuit 6", room="x")])
    assert marks(found) == [("asset", "BM-1"), ("outlet group", "Panel A, circuit 6")]


def test_a_second_unsettled_report_on_one_outlet_group_demands_a_survey():
    found = history(report(1), [report(2, asset="X", room="x")])
    ((mark, cases),) = found.surveys
    assert mark.kind == "outlet group" and len(cases) == 2
    assert earlier_lines(found)[0].startswith("Survey outlet group Panel A, circuit 6 today")


def test_the_same_room_alone_demands_no_survey():
    found = history(report(1), [report(2, asset="X", group="B"), report(3, asset="Y", group="C")])
    assert len(found.reports) == 2 and found.surveys == ()


def test_reports_settled_as_static_demand_none():
    found = history(static(1, "CART-1"), [static(2, "CART-1"), static(3, "CART-1")])
    assert [each.ended for each in found.reports] == ["static", "static"]
    assert found.surveys == ()


def test_a_static_report_at_hand_does_not_hide_two_unsettled_ones_before_it():
    found = history(static(1, "BM-1"), [report(2, group="B"), report(3, group="C")])
    assert [len(cases) for _, cases in found.surveys] == [2]


@pytest.mark.parametrize(("how", "ended"), [
    ("static_measured", "static"), ("by_exclusion", "undetermined"), (None, "undetermined"),
])  # fmt: skip
def test_only_a_cause_confirmed_by_something_counts_as_settled(how, ended):
    outcome = {"confirmed_cause": "person_walking"} | ({"how_confirmed": how} if how else {})
    found = history(report(1), [report(2, outcome=outcome, checks=[])])
    assert found.reports[0].ended == ended


def test_a_defect_outweighs_a_confirmed_static_cause():
    tree = sample_records.spoiled({"items.0.condition": ["damaged"]})["items"]
    tree[0] |= {"asset": "BM-1"}
    outcome = {"confirmed_cause": "person_walking", "how_confirmed": "static_measured"}
    found = history(report(1), [report(2, items=tree, outcome=outcome)])
    assert found.reports[0].ended == "fault"


def test_the_record_itself_among_the_earlier_ones_does_not_count():
    found = history(report(1), [report(1)])
    assert found.reports == () and found.looked_at == 0
    assert earlier_lines(found) == [
        "None on the same asset, outlet group or room; 0 earlier records compared."
    ]


def test_order_of_the_earlier_records_changes_nothing():
    before = [report(n) for n in range(2, 7)]
    assert earlier_lines(history(report(1), before)) == earlier_lines(
        history(report(1), before[::-1])
    )


def test_on_the_command_line_they_are_shown_and_change_nothing_else(tmp_path, capsys):
    record_file, site = (str(EXAMPLES / n) for n in ("incidents/or6-isolated-first-fault.yaml",
                                                     "site.yaml"))  # fmt: skip
    alone, beside = [], []
    for found, more in ((alone, []), (beside, ["--earlier", str(EXAMPLES / "incidents")])):
        with pytest.raises(SystemExit):
            app(["assess", record_file, "--site", site, "--json", *more])
        found += json.loads(capsys.readouterr().out)
    assert alone[0].pop("earlier") is None
    assert len(beside[0].pop("earlier")["surveys"]) == 1
    assert alone == beside


def test_a_folder_that_is_none_or_a_bad_record_in_it_is_told(tmp_path, capsys):
    record_file = str(EXAMPLES / "incidents/clinic-sparse-report.yaml")
    (tmp_path / "broken.yaml").write_text("schema: [", "utf-8")
    with pytest.raises(SystemExit) as end:
        app(["assess", record_file, "--earlier", str(tmp_path)])
    heard = capsys.readouterr()
    assert end.value.code == 1 and "broken.yaml" in heard.err
    assert "0 earlier records compared" in " ".join(heard.out.split())

"""The shipped knowledge is complete and agrees with itself; a broken table is refused."""

import copy
import math

import pytest

import triage.knowledge as module
from triage import words as w
from triage.check_table import check_kinds
from triage.errors import BadTable
from triage.knowledge import MECHANISMS, knowledge
from triage.tables import table

K = knowledge()


def test_every_likelihood_sums_to_one_and_none_is_0_or_1():
    for row in K.findings.values():
        for cause in K.causes:
            cells = [row.likelihood[state][cause] for state in row.likelihood]
            assert math.fsum(cells) == pytest.approx(1, abs=1e-12)
            assert all(0 < cell < 1 for cell in cells)


def test_tempered_likelihoods_sum_to_one_too():
    for row in K.findings.values():
        for cause in K.causes:
            total = math.fsum(math.exp(row.tempered[s][cause]) for s in row.likelihood)
            assert total == pytest.approx(1, abs=1e-12)


def test_no_prior_is_0_or_1_and_every_area_sums_to_one():
    for row in K.priors.values():
        assert math.fsum(row.values()) == pytest.approx(1, abs=1e-12)
        assert all(0 < p < 1 for p in row.values())


def test_every_care_area_but_other_has_priors_and_reference_conditions():
    assert set(K.area_priors) == set(w.AREA) - {"other"} == set(K.reference)


def test_the_eight_mains_causes_are_the_family_that_release_must_exclude():
    assert len(K.family("mains")) == 8
    assert {c.mechanism for c in K.causes.values()} == set(MECHANISMS)


def test_what_a_store_of_charge_cannot_do_is_nearly_excluded_for_every_static_cause():
    driven = K.findings["driven"]
    assert driven.tempering == 1.0
    assert all(driven.likelihood["yes"][c] == pytest.approx(0.005) for c in K.family("static"))


def test_every_flag_has_either_a_clearing_rule_with_a_role_or_a_reason_why_never():
    for flag in K.red_flags.values():
        assert bool(flag.never) != bool(flag.role)
        assert flag.never or flag.passes or flag.measured
        assert flag.findings or flag.signs or flag.facts
        assert set(flag.passes) | {m.check for m in flag.measured} <= set(check_kinds())
        assert flag.signs <= set(w.SIGNS)


def test_every_adverse_answer_of_a_deciding_question_raises_a_flag():
    raised = {pair for flag in K.red_flags.values() for pair in flag.findings}
    merged = {("repeat_at_once", "yes"), ("timing", "while_holding")}  # become "driven"
    for row in K.findings.values():
        if row.deciding and not row.measured:
            assert {(row.id, state) for state in row.adverse} <= raised | merged, row.id


def test_energised_sources_outside_the_family_have_an_answer_and_a_check_that_close_them():
    closing = {c.id: (c.closing_answer, c.closing_check) for c in K.causes.values()
               if c.closing_answer}  # fmt: skip
    assert set(closing) == {"electrosurgery", "stimulator_pulse", "line_surge", "stored_charge"}
    assert all(check in check_kinds() for _, check in closing.values())


def test_every_finding_from_a_check_has_a_check_and_every_check_names_a_known_finding():
    named = {kind.finding for kind in check_kinds().values() if kind.finding}
    assert {f.id for f in K.findings.values() if f.measured} <= named
    assert named <= set(K.findings)


def test_every_pair_of_mechanisms_is_told_apart_by_some_check():
    separated = [set(kind.separates) for kind in check_kinds().values()]
    for one in K.family("mains"):
        assert any(one in group for group in separated)


BREAKS = {
    "a likelihood of one": lambda t: t["findings"]["findings"][1]["likelihood"].update(
        person_walking=1
    ),
    "a likelihood of nought": lambda t: t["findings"]["findings"][1]["likelihood"].update(
        person_walking=0
    ),
    "a cause without a likelihood": lambda t: t["findings"]["findings"][1]["likelihood"].pop(
        "person_walking"
    ),
    "too few states": lambda t: t["findings"]["findings"][0]["likelihood"]["induction"].pop(),
    "a prior for a cause that is not there": lambda t: t["causes"]["priors"]["ward"].update(x=0.1),
    "a cause without a prior": lambda t: t["causes"]["priors"]["ward"].pop("moisture"),
    "an unknown mechanism": lambda t: t["causes"]["causes"][0].update(mechanism="magic"),
    "a flag on an answer that is not there": lambda t: t["red_flags"]["red_flags"][2]["when"].append(
        {"finding": "sensation", "is": "itch"}
    ),
    "a flag on an unknown fact": lambda t: t["red_flags"]["red_flags"][0]["when"].append(
        {"fact": "ghost"}
    ),
    "a flag without a clearing rule": lambda t: t["red_flags"]["red_flags"][0].pop("never"),
    "a flag with an unknown floor": lambda t: t["red_flags"]["red_flags"][0].update(floor="none"),
    "an answer both adverse and reassuring": lambda t: t["findings"]["findings"][0].update(
        reassuring=["snap", "grip"]
    ),
}  # fmt: skip


@pytest.mark.parametrize("what", BREAKS)
def test_a_broken_table_is_refused(what, monkeypatch):
    tables = {n: copy.deepcopy(table(n)) for n in ("causes", "findings", "red_flags")}
    BREAKS[what](tables)
    monkeypatch.setattr(module, "table", lambda name: tables[name])
    with pytest.raises(BadTable):
        module.knowledge.__wrapped__()

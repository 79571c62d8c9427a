"""What a discharge is held against: the table and what it refuses."""

from copy import deepcopy

import pytest

from triage.errors import BadTable, InvalidValue
from triage.static_limits import build, load
from triage.tables import table

LIMITS = load()


def test_every_row_has_a_citation():
    found = LIMITS.citations()
    assert len(found) > 20
    assert all(c.source for c in found.values())


# Nothing on ignition in oxygen could be read; such figures must say so.
def test_ignition_energies_are_marked_as_from_memory():
    assert {fuel.citation.known for fuel in LIMITS.fuels.values()} == {"memory"}


def test_published_lists_that_disagree_are_all_kept():
    assert LIMITS.fuels["acetone"].in_air == pytest.approx((0.55e-3, 1.15e-3))
    assert LIMITS.fuels["diethyl_ether"].in_oxygen[0] == pytest.approx(1.2e-6)


# IEC 60601-1-2 Ed. 3: 6 kV contact, 8 kV air; Ed. 4: 8 and 15 kV (device declarations).
def test_declared_immunity_levels():
    assert max(LIMITS.immunity["ed3_2007"].air) == 8000
    assert max(LIMITS.immunity["ed4_2014"].contact) == 8000
    assert max(LIMITS.immunity["ed4_2014"].air) == 15000


@pytest.mark.parametrize(
    ("rule", "fraction", "allowed"),
    [
        ("ashrae_170", 0.20, True),
        ("ashrae_170", 0.19, False),
        ("ashrae_170", 0.61, False),
        ("nfpa_99_1999", 0.30, False),
        ("nfpa_99_1999", 0.90, True),
        ("synthetic_floor", 0.30, True),
        ("heas_02_1998", 0.40, False),
    ],
)
def test_rooms_are_held_against_the_rule(rule, fraction, allowed):
    assert LIMITS.room_humidity[rule].allows(fraction) is allowed


def test_words_follow_each_other_without_a_gap():
    words = list(LIMITS.words)
    bounds = [LIMITS.between(w) for w in words]
    assert bounds[0][0] == 0
    assert bounds[-1][1] is None
    assert all(a[1] == b[0] for a, b in zip(bounds, bounds[1:], strict=False))
    assert LIMITS.words["prick"].charge == pytest.approx(0.27e-6)
    assert LIMITS.words["prick"].voltage == 3000
    # Japanese guidance ladder: needle prick at 3 kV on 90 pF, 0.27 uC.
    low, high = LIMITS.between("prick")
    assert low < 0.27e-6 < high


def test_an_unknown_word_is_refused_with_the_words_there_are():
    with pytest.raises(InvalidValue, match="prick"):
        LIMITS.between("zapped")


@pytest.mark.parametrize(
    ("path", "value"),
    [
        (("fuels", "ethanol", "air_mj"), [28]),
        (("fuels", "propane", "oxygen_mj"), [0.5]),
        (("fuels", "ethanol", "citation"), None),
        (("immunity", "ed3_2007", "air_kv"), ["many"]),
        (("room_humidity", "ashrae_170", "high_pct"), 10),
        (("room_humidity", "ashrae_170", "low_pct"), -1),
        (("room_humidity", "ashrae_170", "high_pct"), 101),
        (("words", "ladder", "prick", "kv"), 30),
        (("words",), None),
    ],
)
def test_a_table_that_cannot_be_is_refused(path, value):
    data = deepcopy(table("static_limits"))
    place = data
    for key in path[:-1]:
        place = place[key]
    place[path[-1]] = value
    with pytest.raises(BadTable):
        build(data)

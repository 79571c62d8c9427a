"""One estimate unfolded: every input is named with how it is known, its share and what it saves."""

import re
from pathlib import Path

import pytest
from random_records import record
from typer.testing import CliRunner

from triage.assessment import assess
from triage.cli import app
from triage.documents.explain import KIND_NAME, explain, names
from triage.errors import InvalidValue
from triage.site import no_site

ROOT = Path(__file__).parent.parent
CART = ROOT / "examples" / "incidents" / "instrument-cart-four-shocked.yaml"


def case(**parts):
    return assess(record({"schema": "1", "id": "0123456789abcdef" * 2} | parts), no_site())


BARE = case(event={"activity": "walking"}, surroundings={"floor": "vinyl"})


@pytest.mark.parametrize("name", names(BARE))
def test_every_name_unfolds_to_value_formula_and_inputs(name):
    lines = explain(BARE, name)
    assert lines[0].startswith(f"{name}: ")
    assert any(line.startswith("  How: ") for line in lines)
    inputs = [line for line in lines if line.startswith("  - ")]
    assert inputs
    estimates = [
        line for line in inputs if "together. Share" not in line and "Reading the" not in line
    ]
    assert all(any(f", {kind}: " in line for kind in KIND_NAME.values()) for line in estimates)


@pytest.mark.parametrize("quantity", ["voltage", "charge", "felt"])
def test_every_source_of_the_estimate_is_listed_with_its_citation(quantity):
    static = BARE.exposure.causes["person_walking"].static
    basis = static.voltage.basis if quantity == "voltage" else static.felt.basis
    text = "\n".join(explain(BARE, f"person_walking.{quantity}"))
    for source, each in static.voltage.basis.items() if quantity == "voltage" else basis.items():
        if quantity == "charge" and source.endswith(("threshold", "people")):
            continue
        assert each.source in text
        assert each.citation is None or each.citation.text() in text


def test_the_largest_share_comes_first():
    lines = explain(BARE, "person_walking.voltage")
    shares = [float(m[1]) for line in lines if (m := re.search(r"Share (\d+)", line))]
    assert shares[0] == max(shares)


def test_a_measured_input_is_called_measured_and_nothing_is_offered_for_it():
    lines = CliRunner().invoke(app, ["explain", str(CART), "charged_object.voltage"]).stdout
    assert "Measured voltage, measured: voltage after the same act, read as 6200 V" in lines
    assert "Reading the voltage" not in lines


def test_without_a_name_the_names_are_listed():
    done = CliRunner().invoke(app, ["explain", str(CART)])
    assert done.exit_code == 0
    assert "person_walking.voltage" in done.stdout.splitlines()


def test_a_wrong_name_is_refused_with_a_near_one_and_all_there_are():
    with pytest.raises(InvalidValue, match="did you mean 'person_walking.voltage'") as error:
        explain(BARE, "person_walking.volts")
    assert all(name in str(error.value) for name in names(BARE))


@pytest.mark.parametrize(("name", "reason"), [
    ("induction.voltage", "no model"), ("isolated_first_fault.current", "not isolated"),
])  # fmt: skip
def test_a_cause_without_an_estimate_says_why(name, reason):
    found = case(supply={"kind": "earthed"})
    with pytest.raises(InvalidValue, match=reason):
        explain(found, name)


def test_a_void_ceiling_says_what_voids_it():
    found = case(supply={"kind": "isolated", "current_reading": "2 mA"})
    assert "ceiling" in names(found)
    assert any("binds nothing" in line for line in explain(found, "ceiling"))


@pytest.mark.parametrize(
    "name", ["", ".", "person_walking", "person_walking.", "\x1b[31m", "x" * 999]
)
def test_a_hostile_name_is_refused_and_never_crashes(name):
    with pytest.raises(InvalidValue):
        explain(BARE, name)

"""Where the electrical numbers of one report come from."""

from collections.abc import Iterator

from triage.assessment import Assessment
from triage.citation import Citation
from triage.documents.electrical import not_excluded
from triage.documents.held_fast import held_sources
from triage.electrical_contacts import ContactExposure, contact_exposures
from triage.electrical_tables import monitor_tables
from triage.physics.body_impedance import impedance_citation
from triage.physics.figures import cited, section
from triage.physics.touch_current import Mains
from triage.reading_guide import alarm_thresholds, isolated_tests, other_editions
from triage.tables import citation, table

_SOURCE_OF_CAUSE = {
    "insulation_fault": "insulation_fault", "moisture": "moisture_path",
    "earth_difference": "earth_difference",
}  # fmt: skip


def electrical_sources(a: Assessment) -> Iterator[tuple[str, Citation]]:
    """Every electrical number of the analysis with its citation; some stand more than once."""
    found = contact_exposures(a.incident, a.site, a.exposure.conditions, a.verdicts)
    yield from _of_the_body(found)
    yield from held_sources()
    wanted = {name for each in found for name in _assumed(each)}
    if not a.exposure.conditions.voltage_known:
        wanted |= {"nominal_voltage", "nominal_frequency"}
    if a.exposure.ceiling is not None:
        wanted |= {"monitor_tolerance"}
    given = table("touch_sources")
    for row in given["sources"]:
        if row["id"] in wanted:
            yield row["name"], citation(row, row["id"])
    for row in given["durations"]:
        yield f"duration of a contact that lasted {row['id'].replace('_', ' ')}", citation(row, "")
    yield from _of_the_supply(a, found)
    for source in not_excluded(a):
        yield f"other source: {source.id.replace('_', ' ')}", source.citation


def _of_the_body(found: tuple[ContactExposure, ...]) -> Iterator[tuple[str, Citation]]:
    for curve in ("touch", "sensitive", "grip"):
        yield f"perception of current: {curve}", cited("perception", curve)
    yield "hazard floor of the body", cited("body", "hazard_floor")
    yield "heart-current factors", Citation(**section("heart_factors")["citation"])
    for line in ("a", "b", "c1"):
        yield f"zone line {line}", cited("zone_lines", line)
    for each in found:
        moisture = each.story.moisture or "saltwater"
        name = f"impedance of the body, large contact, {moisture}"
        yield name, impedance_citation(each.story.voltage, contact="large", moisture=moisture)
        if each.story.area == "small":
            small = impedance_citation(each.story.voltage, contact="small", moisture="dry")
            yield "impedance of the body, small contact, dry", small


def _assumed(each: ContactExposure) -> Iterator[str]:
    """Ids of the assumed sources that the currents of one contact rest on."""
    story = each.story
    yield "filter_capacitance_medical" if story.medical else "filter_capacitance_other"
    yield from (_SOURCE_OF_CAUSE[c.exposure.cause] for c in each.causes
                if c.exposure.cause in _SOURCE_OF_CAUSE)  # fmt: skip
    if story.series is not None:
        yield "footwear_capacitance"
    yield "isolated_share"
    if story.insulation is not None:
        yield "system_capacitance"
    elif story.hazard_current is None:
        yield "hazard_current"


def _of_the_supply(
    a: Assessment, found: tuple[ContactExposure, ...]
) -> Iterator[tuple[str, Citation]]:
    tables = monitor_tables().citations
    if any(row.sight for each in found for row in each.causes):
        yield "what a line monitor sees", tables["sight"]
    if a.exposure.ceiling is not None:
        yield "when a monitor's ceiling is void", tables["void"]
    c = a.exposure.conditions
    if any(isolated_tests(a.verdicts, Mains(c.voltage, c.frequency))):
        yield "tests from an isolated outlet", tables["outlet_tests"]
        examples = table("touch_sources")["isolated_outlet_examples"]
        yield "example devices on an isolated outlet", citation(examples, "examples")
    for alarm in alarm_thresholds(a.incident, a.site):
        limit = alarm.limit
        yield f"alarm value {limit.text}, {limit.edition.text()}", limit.citation
    for verdict in a.verdicts:
        for judged in other_editions(verdict, a.incident):
            for each in judged.comparisons:
                name = f"{each.limit.quantity.replace('_', ' ')} {each.limit.text}"
                yield f"limit: {name}, {judged.edition.text()}", each.limit.citation

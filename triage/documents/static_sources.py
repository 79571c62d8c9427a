"""Where the static numbers of one assessment come from."""

from collections.abc import Iterator

from triage.assessment import Assessment
from triage.citation import Citation
from triage.conditions import care_area
from triage.materials import load
from triage.static_consequences import room_rules
from triage.static_limits import load as limits
from triage.static_readings import cited, name_of

_ALWAYS = ("sensation.", "humidity_response.", "walking.peak_factor", "walking.steps_per_second",
           "walking.corona_limit")  # fmt: skip
_MARKS = ("quiet_voltage", "hazard_energy", "hazard_charge", "words")


def static_sources(a: Assessment) -> Iterator[tuple[str, Citation]]:
    """What every static cause rests on, then what its discharge is held against."""
    for each in a.exposure.causes.values():
        if each.static is not None:
            for source, basis in (
                *each.static.felt.basis.items(),
                *each.static.voltage.basis.items(),
            ):
                if basis.citation is not None:
                    yield f"{source.replace('_', ' ')}, {basis.source}", basis.citation
    for path, found in load().citations().items():
        if path.startswith(_ALWAYS):
            yield path.replace(".", " ").replace("_", " "), found
    marks = (*_MARKS, *(["pause"] if a.exposure.conditions.pause is None else []))
    for mark in marks:
        yield name_of(mark), cited(mark)
    yield from _held_against(a)


def _held_against(a: Assessment) -> Iterator[tuple[str, Citation]]:
    """Rules for the air of such a room, and vapours within reach."""
    area = care_area(a.incident, a.site)
    for rule, _ in room_rules(a.exposure.conditions, area):
        yield f"air: {rule.text}", rule.citation
    if a.care.ignition:
        for word, fuel in limits().fuels.items():
            yield f"ignition energy of {word.replace('_', ' ')}", fuel.citation

"""Contact by contact: what each mains cause could drive through the person, and what would see it.

Everything here is for print; the ranking uses the ratio in exposure.py and never these numbers.
"""

from collections.abc import Iterator
from dataclasses import replace

from triage.bounds import Ceiling
from triage.conditions import Conditions
from triage.electrical_exposure import (
    ELECTRICAL_CAUSES,
    ElectricalExposure,
    ElectricalStory,
    ceiling,
    direct_ceiling,
)
from triage.electrical_story import (
    electrical_story,
    incident_items,
    lasted,
    path_through,
    void_reasons,
)
from triage.electrical_tables import Sight, monitor_tables
from triage.errors import InvalidValue
from triage.estimate import Estimate
from triage.frozen import frozen
from triage.incident import Contact, Incident
from triage.involvement import involved, speaks_about
from triage.physics.body_impedance import Spread, hazard_floor, severe_impedance
from triage.physics.zones import heart_factor, zone
from triage.site import Site
from triage.tables import table
from triage.validity import CheckVerdict

_BEHIND_THE_MONITOR = frozenset({"open_earth", "insulation_fault", "isolated_first_fault",
                                 "outlet_wiring", "live_cord", "moisture"})  # fmt: skip
"""Causes that on an isolated supply drive only what the system leaks."""


@frozen
class ContactCause:
    """One mains cause of one contact.

    Args:
        exposure: its current, chances and zone.
        most: current that it cannot exceed, with the reasons that void it.
        rests_on: supply, monitor, measured_current or measured_voltage: where the most comes from.
        monitor: the reading's ceiling, void or not, where one line is the source; None otherwise.
        sight: what a line monitor would see of it; empty on an earthed supply.
    """

    exposure: ElectricalExposure
    most: float
    rests_on: str
    monitor: Ceiling | None
    sight: tuple[Sight, ...]

    @property
    def worst(self) -> float:
        """Worst credible current: the 95 % point, or the most where that is less [A]."""
        return min(self.exposure.worst, self.most)

    @property
    def zone(self) -> str:
        """Zone of the worst credible current."""
        return zone(self.worst, self.exposure.duration, self.exposure.path)


@frozen
class ContactExposure:
    """One contact under every mains cause.

    Args:
        contact: of the record; None where none is on record.
        story: its circumstances. duration: [s], None if not known. path: None if not known.
        factor: heart-current factor of that path.
        body: impedance at the supply voltage, 5, 50 and 95 % of adults [ohm].
        causes: one row a cause that has an estimate.
        unknown: cause and reason, for those without.
    """

    contact: Contact | None
    story: ElectricalStory
    duration: float | None
    path: str | None
    factor: float
    body: Spread
    causes: tuple[ContactCause, ...]
    unknown: tuple[tuple[str, str], ...]


def contact_exposures(
    incident: Incident, site: Site, found: Conditions, verdicts: tuple[CheckVerdict, ...]
) -> tuple[ContactExposure, ...]:
    """Every contact of a record; one without a contact where none is on record.

    Args:
        incident: the record. site: gives the time zone.
        found: its circumstances in SI.
        verdicts: judged checks.
    """
    contacts: tuple[Contact | None, ...] = incident.contacts or (None,)
    return tuple(_contact(each, incident, site, found, verdicts) for each in contacts)


def _contact(
    contact: Contact | None, incident: Incident, site: Site, found: Conditions,
    verdicts: tuple[CheckVerdict, ...],
) -> ContactExposure:  # fmt: skip
    touched, _ = involved(incident)
    if contact is not None:
        named = incident_items(incident)
        touched = tuple(named[each] for each in contact.items if each in named)
    about = tuple(v for v in verdicts if speaks_about(v, touched, incident))
    mine = (contact,) if contact is not None else ()
    story = electrical_story(incident, found, touched, about, mine)
    void = tuple(void_reasons(incident, site, verdicts))
    duration, path = lasted(incident), _path(contact, incident)
    causes, unknown = [], []
    for name in ELECTRICAL_CAUSES:
        if name.startswith("isolated_") and found.isolated is False:
            unknown.append((name, "the supply is not isolated"))
            continue
        try:
            row = _cause(ElectricalExposure(name, story, duration, path), void)
        except InvalidValue as error:
            unknown.append((name, str(error)))
            continue
        causes.append(row)
    return ContactExposure(
        contact, story, duration, path, heart_factor(path),
        severe_impedance(story.voltage, contact=story.area, moisture=story.moisture),
        tuple(causes), tuple(unknown),
    )  # fmt: skip


def _path(contact: Contact | None, incident: Incident) -> str | None:
    """Path of one contact; not known where the same person had another one as well."""
    if contact is None or sum(c.person == contact.person for c in incident.contacts) > 1:
        return None
    return path_through((contact,))


def _cause(exposure: ElectricalExposure, void: tuple[str, ...]) -> ContactCause:
    told = exposure.told
    behind = (told.isolated and exposure.cause in _BEHIND_THE_MONITOR) or (
        exposure.cause == "isolated_first_fault"
    )
    read = ceiling(told, void) if behind else None
    most, rests_on = _most(exposure, read)
    assert exposure.current.median > 0  # computed here, so that its errors come out here
    return ContactCause(exposure, most, rests_on, read, tuple(_sight(exposure)))


def _most(exposure: ElectricalExposure, read: Ceiling | None) -> tuple[float, str]:
    """The current that cannot be exceeded, and where it comes from."""
    told, supply = exposure.told, direct_ceiling(exposure.told.voltage)
    if read is not None and read.holds and read.value is not None:
        return min(read.value, supply), "monitor" if read.value < supply else "supply"
    if exposure.cause == "earth_difference" and told.metal_voltage:
        return told.metal_voltage / hazard_floor(), "measured_voltage"
    return supply, "supply"


def _sight(exposure: ElectricalExposure) -> Iterator[Sight]:
    if not exposure.told.isolated:
        return
    rows = {each.id: each for each in monitor_tables().sight}
    for each in table("touch_sources")["monitor_sight"]:
        if each["cause"] == exposure.cause:
            yield from (rows[condition] for condition in each["conditions"])


def degraded_earth(told: ElectricalStory, resistance: float) -> Estimate:
    """Current through the person when the leakage drops along an earth of known resistance.

    Args:
        told: the circumstances; a touch current measured with the earth open is the leakage.
            Shoes, floor and a small contact are left out.
        resistance: of the earth, measured [ohm], above 0.

    Source:
        I = I_leak R / (R + Z); as if the earth had been like this at the event.
    """
    leak = ElectricalExposure("open_earth", replace(told, series=None, area=None)).current
    body = severe_impedance(told.voltage, moisture=told.moisture).median
    return leak.scaled(resistance / (resistance + body))

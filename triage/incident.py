"""The record of one incident: the one table of fields.

Every field may be left out or `unknown`; unknown is never absent and never normal.
"""

from triage import words as w
from triage.clock import Moment
from triage.fields import (
    NO_ADVERSE,
    YES_ADVERSE,
    Part,
    amount,
    count,
    ident,
    part,
    parts,
    record_part,
    reference,
    references,
    several,
    text,
    time,
    word,
    yes_no,
)
from triage.quantity import Quantity

SCHEMA = "1"
"""Version of the form of record, site file and assessment."""


@record_part
class CrossReference(Part):
    """A number under which somebody else keeps this incident."""

    kind: str | None = word("Whose number it is.", w.REFERENCE_KIND)
    number: str | None = text("The number as written.", 80)


@record_part
class Place(Part):
    """Where it happened."""

    room: str | None = ident("Room id of the site file; it survives renaming.")
    room_name: str | None = text("The room's name on that day.", 120)
    area: str | None = word("Kind of care area.", w.AREA)
    position: str | None = text("Where in the room, in words.", 200)
    department: str | None = text("Department of the event.", 120)


@record_part
class Person(Part):
    """One affected person: role only, never a name or a patient identifier."""

    id: str = ident("Short id, such as p1.", required=True)
    who: str | None = word("Staff, patient, visitor or contractor.", w.WHO)
    role: str | None = text("Role, not a name.", 80)
    signs: tuple[str, ...] = several("Signs seen or reported.", w.SIGNS)
    breach: str | None = yes_no("Skin or glove pierced, or body fluid contact?", YES_ADVERSE)
    review: str | None = word("State of the medical review.", w.REVIEW)
    review_at: Moment | None = time("When referred or seen.")
    review_by: str | None = text("By which role.", 80)


@record_part
class Statement(Part):
    """One witness's own words, and apart from them what somebody mapped them to."""

    id: str = ident("Short id, such as s1.", required=True)
    by: str | None = text("Role of the witness.", 80)
    person: str | None = reference("The affected person speaking, if it is one.", "persons")
    words: str | None = text("The words exactly as said, in their language.", 6000)
    language: str | None = text("Language tag, such as en or de.", 35)
    interpreter: str | None = yes_no("Was an interpreter used?")
    at: Moment | None = time("When the statement was taken.")
    talked: str | None = word("Before or after talking with others.", w.TALKED)
    mapped_by: str | None = text("Role that chose the words below.", 80)
    sensation: str | None = word("What it felt like.", w.SENSATION)
    duration: str | None = word("How long it lasted.", w.DURATION)
    timing: str | None = word("When it was felt.", w.TIMING)
    repeat_at_once: str | None = yes_no(
        "Again at a second touch, at once, without moving the feet or the object?", YES_ADVERSE
    )
    repeat_after_moving: str | None = yes_no("Again after walking or rolling on?")
    others_felt: str | None = yes_no("Did others feel the same at the same object?", YES_ADVERSE)
    crack_heard: str | None = yes_no("Was a crack heard?")
    spark_seen: str | None = yes_no("Was a spark seen?")


@record_part
class Photo(Part):
    """One photograph by its digest."""

    what: str | None = text("What it shows.", 200)
    sha256: str | None = text("SHA-256 of the file.", 64)
    at: Moment | None = time("When taken.")


@record_part
class HandOver(Part):
    """One step of custody of an item."""

    item: str | None = reference("Which item.", "items")
    from_role: str | None = text("Handed over by (role).", 80)
    to_role: str | None = text("Taken by (role).", 80)
    at: Moment | None = time("When.")
    where: str | None = text("Where it is kept, under what lock.", 200)
    contaminated: str | None = yes_no("Contaminated?")
    contained: str | None = text("How contained, such as a breathable bag.", 200)


@record_part
class Scene(Part):
    """What the scene was like, what was changed in it, and who depends on it."""

    live_contact: str | None = yes_no("Is somebody still in contact with it?", YES_ADVERSE)
    dependence: str | None = word("Does anybody depend on it now?", w.DEPENDENCE)
    replacement: str | None = yes_no("Is a replacement at hand?")
    patient_connected: str | None = yes_no("Was a patient connected to it?", YES_ADVERSE)
    heart_conductor: str | None = yes_no(
        "Has a patient there a conductor to the heart (pacing wire, filled line)?", YES_ADVERSE
    )
    changes: tuple[str, ...] = several("What was changed before you arrived.", w.CHANGES)
    changed_by: str | None = text("By which role.", 80)
    changed_at: Moment | None = time("When.")
    flammable: tuple[str, ...] = several("Within reach of the spark.", w.FLAMMABLE)
    logs_saved: str | None = yes_no("Were the devices' logs saved before power-off?")
    log_clock_error: str | None = text("Clock error of each log against wall time.", 400)
    photos: tuple[Photo, ...] = parts("Photographs.", Photo)
    custody: tuple[HandOver, ...] = parts("Custody.", HandOver)


@record_part
class Item(Part):
    """One thing involved: device, cord, outlet, circuit, furniture, instrument."""

    id: str = ident("Short id, such as pump or outlet3.", required=True)
    kind: str | None = word("What it is.", w.ITEM_KIND)
    name: str | None = text("What people call it.", 120)
    asset: str | None = text("Asset tag.", 60)
    owner: str | None = word("Whose it is.", w.OWNER)
    home: str | None = text("Home department.", 120)
    power: str | None = word("How it was powered at the event.", w.POWER)
    supply: str | None = word("The supply it was on.", w.SUPPLY)
    outlet: str | None = reference("The outlet it was on.", "items")
    cord: str | None = reference("Its cord, if that is an item of its own.", "items")
    circuit: str | None = reference("Its circuit, if that is an item of its own.", "items")
    outlet_group: str | None = text("Outlet group or panel and circuit number.", 80)
    equipment_class: str | None = word("Protection class.", w.EQUIPMENT_CLASS)
    applied_part: str | None = word("Type of applied part.", w.APPLIED_PART)
    casters: str | None = word("Its wheels.", w.CASTERS)
    condition: tuple[str, ...] = several("State after the event.", w.CONDITION)
    recent_change: str | None = yes_no("New, repaired, dropped, spilled on or moved lately?")
    length: Quantity | None = amount("Length.", "length", possible=(0.01, 10))
    width: Quantity | None = amount("Width.", "length", possible=(0.01, 10))
    clearance: Quantity | None = amount("Height of its metal over the floor.", "length",
                                        possible=(0.001, 5))  # fmt: skip
    capacitance: Quantity | None = amount("Capacitance to earth, measured.", "capacitance",
                                          possible=(1e-12, 1e-6),
                                          plausible=(5e-12, 5e-9))  # fmt: skip
    immunity: Quantity | None = amount("Declared discharge immunity.", "voltage",
                                       possible=(100, 60e3), plausible=(1e3, 30e3))  # fmt: skip
    last_good: Moment | None = time("Last test passed before the event.")
    last_good_value: str | None = text("Its values, as written.", 200)


@record_part
class Contact(Part):
    """One person touching one or two items."""

    id: str = ident("Short id, such as c1.", required=True)
    person: str | None = reference("Who.", "persons")
    items: tuple[str, ...] = references("The item or the two items touched.", "items")
    body_part: str | None = word("With what.", w.BODY_PART)
    touch: str | None = word("How.", w.TOUCH)
    covering: str | None = word("Through what.", w.COVERING)
    moisture: str | None = word("Dry or wet.", w.MOISTURE)
    also_touching: str | None = word("What else was touched at that moment.", w.ALSO_TOUCHING)


@record_part
class Event(Part):
    """What happened in the seconds before."""

    at: Moment | None = time("When.")
    summary: str | None = text("What happened, in a sentence, by the recorder.", 1000)
    activity: str | None = word("What the person was doing.", w.ACTIVITY)
    steps: int | None = count("Steps walked before the touch.", 0, 5000)
    pause: Quantity | None = amount("Time between that act and the touch.", "duration",
                                    possible=(0, 86400), plausible=(0, 600))  # fmt: skip
    electrosurgery_active: str | None = yes_no("Was electrosurgery active at that second?",
                                               YES_ADVERSE)  # fmt: skip
    electrosurgery_source: str | None = word("How that is known.", w.SOURCE)
    pulse_delivered: str | None = yes_no("Was a pulse delivered (defibrillator, stimulator)?",
                                         YES_ADVERSE)  # fmt: skip
    pulse_source: str | None = word("How that is known.", w.SOURCE)
    line_event: str | None = yes_no("Lightning, supply switching or line work at that minute?",
                                    YES_ADVERSE)  # fmt: skip
    line_event_source: str | None = word("How that is known.", w.SOURCE)
    pins_touched: str | None = yes_no("Were plug pins or battery contacts touched?", YES_ADVERSE)
    device_upset: str | None = yes_no("Did a device reset or misbehave at that moment?")


@record_part
class Surroundings(Part):
    """Air, floor and clothing at the place and time."""

    humidity: Quantity | None = amount("Relative humidity.", "relative_humidity",
                                       possible=(0, 100), plausible=(5, 90))  # fmt: skip
    humidity_where: str | None = word("Where it was read.", w.WHERE_MEASURED)
    humidity_at: Moment | None = time("When it was read.")
    sensor: str | None = text("Which sensor or instrument.", 80)
    temperature_at_sensor: Quantity | None = amount("Temperature at that sensor.", "temperature",
                                                    possible=(-30, 60),
                                                    plausible=(10, 35))  # fmt: skip
    temperature_at_place: Quantity | None = amount("Temperature at the place.", "temperature",
                                                   possible=(-30, 60),
                                                   plausible=(10, 35))  # fmt: skip
    log_excerpt: str | None = text("The lines of the log that were used.", 6000)
    floor: str | None = word("Floor.", w.FLOOR)
    floor_finish_changed: str | None = yes_no("New wax or finish in the last weeks?")
    last_cleaned: Moment | None = time("Last cleaning of floor or wheels.")
    cleaning_product: str | None = text("With what.", 120)
    footwear: str | None = word("Footwear.", w.FOOTWEAR)
    garment: str | None = word("What was taken off, if anything was.", w.GARMENT)
    seat: str | None = word("What was risen from, if anybody rose.", w.SEAT)
    garments: str | None = text("Garments, in words.", 200)
    furniture: str | None = text("Chairs, sheets and films involved.", 200)
    air_handling: str | None = word("Air handling at that time.", w.AIR_HANDLING)


@record_part
class Supply(Part):
    """The supply of the place and its monitor."""

    kind: str | None = word("Earthed or isolated.", w.SUPPLY)
    voltage: Quantity | None = amount("Nominal voltage.", "voltage",
                                      possible=(1, 1000), plausible=(90, 440))  # fmt: skip
    frequency: Quantity | None = amount("Frequency.", "frequency",
                                        possible=(1, 1000), plausible=(49, 61))  # fmt: skip
    monitor: str | None = word("Kind of monitor.", w.MONITOR)
    current_reading: Quantity | None = amount("Total hazard current shown.", "current",
                                              possible=(0, 1),
                                              plausible=(0.00001, 0.05))  # fmt: skip
    resistance_reading: Quantity | None = amount("Insulation resistance shown.", "resistance",
                                                 possible=(0, 1e9),
                                                 plausible=(1e3, 2e7))  # fmt: skip
    read_at: Moment | None = time("When it was read.")
    changed_since: str | None = yes_no("Was anything plugged or unplugged before the reading?",
                                       YES_ADVERSE)  # fmt: skip
    alarm: str | None = yes_no("Was the monitor in alarm at the event?", YES_ADVERSE)
    alarm_source: str | None = word("How that is known.", w.SOURCE)
    trip: str | None = yes_no("Did a breaker or residual-current device trip?", YES_ADVERSE)
    trip_source: str | None = word("How that is known.", w.SOURCE)
    monitor_tested: Moment | None = time("Last test of the monitor.")


@record_part
class Check(Part):
    """One check of one item."""

    id: str = ident("Short id, such as k1.", required=True)
    kind: str | None = ident("Which check, by its id in the table of checks.")
    of: str | None = reference("The item checked.", "items")
    second: str | None = reference("The other item, for a check between two.", "items")
    cord: str | None = reference("The cord used.", "items")
    outlet: str | None = reference("The outlet used.", "items")
    same_cord: str | None = yes_no("Cord and outlet of the event?", NO_ADVERSE)
    method: str | None = ident("Method, by its name in the table of checks.")
    supply: str | None = word("Supply used for the check.", w.SUPPLY)
    stage: str | None = word("As found, after disturbance, as left.", w.STAGE)
    disturbed: tuple[str, ...] = several("What was changed before it.", w.DISTURBED)
    state: tuple[str, ...] = several("State of the item during the check.", w.TEST_STATE)
    result: str | None = word("Result.", w.RESULT)
    value: str | None = text("Value with unit.", 60)
    unit_disputed: str | None = yes_no("Is the unit in doubt?", YES_ADVERSE)
    limit: str | None = ident("Limit applied, by its id in the table of limits.")
    instrument: str | None = text("Instrument id.", 80)
    calibration_due: Moment | None = time("Calibration due.")
    by: str | None = text("By which role.", 80)
    at: Moment | None = time("When.")
    reason: str | None = text("Why not practicable, or what was seen.", 500)


@record_part
class Action(Part):
    """One action with an owner."""

    what: str | None = text("What is to be done.", 300)
    item: str | None = reference("On which item.", "items")
    owner: str | None = text("By which role.", 80)
    due: Moment | None = time("Until when.")
    done: Moment | None = time("Done when.")
    verified: str | None = text("By what measurement it was verified.", 300)


@record_part
class Notification(Part):
    """Somebody told."""

    to: str | None = text("Who was told (role or authority).", 120)
    at: Moment | None = time("When.")
    number: str | None = text("Under what number.", 80)


@record_part
class LookBack(Part):
    """An answer to a look-back question after a confirmed defect."""

    question: str | None = ident("Which question.")
    answer: str | None = text("Answer, or why it cannot be answered.", 500)
    by: str | None = text("By which role.", 80)
    at: Moment | None = time("When.")


@record_part
class Outcome(Part):
    """How the case ended."""

    confirmed_cause: str | None = ident("Cause, by its id in the table of causes.")
    how_confirmed: str | None = word("How confirmed.", w.HOW_CONFIRMED)
    confirmed_by: str | None = text("By which role.", 80)
    confirmed_at: Moment | None = time("When.")
    reportable: str | None = word("Reportable to an authority?", w.REPORTABLE)
    reportable_by: str | None = text("Decided by which role.", 80)
    reportable_reason: str | None = text("Why.", 500)
    risk_accepted_by: str | None = text("Residual risk accepted by which role.", 80)
    risk_accepted_until: Moment | None = time("Until when.")
    watch_plan: str | None = text("Watch plan.", 500)
    actions: tuple[Action, ...] = parts("Actions.", Action)
    notifications: tuple[Notification, ...] = parts("Notifications.", Notification)
    look_back: tuple[LookBack, ...] = parts("Look-back answers.", LookBack)


@record_part
class Entry(Part):
    """Who added what to the record, and when."""

    at: Moment | None = time("When.")
    by: str | None = text("By which role.", 80)
    what: str | None = text("What was added or changed.", 300)


@record_part
class Incident(Part):
    """One complaint with its circumstances, as recorded."""

    schema: str = ident("Version of this form of record; always 1.", required=True)
    id: str = ident("Random id of the record, 32 hexadecimal digits, written once.", required=True)
    case: str | None = ident("The short case number; it follows from the id.")
    recorded_by: str | None = text("Role of the recorder.", 80)
    recorded_at: Moment | None = time("When recording began.")
    aware_at: Moment | None = time("When the facility became aware.")
    cross_references: tuple[CrossReference, ...] = parts("Numbers elsewhere.", CrossReference)
    place: Place = part("Where.", Place)
    persons: tuple[Person, ...] = parts("Affected persons.", Person, 50)
    statements: tuple[Statement, ...] = parts("Statements, one a witness.", Statement, 50)
    scene: Scene = part("The scene.", Scene)
    items: tuple[Item, ...] = parts("Things involved.", Item)
    contacts: tuple[Contact, ...] = parts("Who touched what.", Contact, 50)
    event: Event = part("What happened.", Event)
    surroundings: Surroundings = part("Air, floor, footwear.", Surroundings)
    supply: Supply = part("Supply and monitor.", Supply)
    checks: tuple[Check, ...] = parts("Checks.", Check, 300)
    outcome: Outcome = part("How it ended.", Outcome)
    entries: tuple[Entry, ...] = parts("Who added what, when.", Entry, 1000)

"""The closed word lists of the record, each word with its place in the safety order.

Order: -1 reassuring, 0 as good as unknown, 1 and up adverse, None neutral. The fail-safe rules are
stated on it: a more adverse answer never gives a milder disposition.
"""

from triage.fields import WordList

AREA: WordList = {
    "operating_room": (None, "operating room, delivery or catheter laboratory"),
    "icu": (None, "intensive care, recovery"),
    "nicu": (None, "neonatal care"),
    "ward": (None, "bed ward"),
    "clinic": (None, "clinic, treatment or examination room"),
    "corridor": (None, "corridor, stairs, lift, store"),
    "other": (None, "another place"),
}
WHO: WordList = {
    "staff": (None, "staff"),
    "patient": (None, "patient"),
    "visitor": (None, "visitor"),
    "contractor": (None, "contractor"),
}
SIGNS: WordList = {
    "none": (-1, "none seen or reported"),
    "pinpoint_mark": (1, "a tiny white, red or charred spot on the skin"),
    "burn": (2, "a burn"),
    "could_not_let_go": (2, "could not let go"),
    "lost_consciousness": (2, "lost consciousness"),
    "chest_symptoms": (2, "chest pain or breathlessness"),
    "palpitations": (2, "palpitations"),
    "weakness": (2, "numbness or weakness that stayed"),
    "thrown": (1, "was thrown back"),
    "fall": (1, "fell or hit something"),
}
REVIEW: WordList = {
    "not_yet": (None, "not yet referred"),
    "referred": (None, "referred"),
    "seen": (None, "seen"),
    "declined": (None, "declined"),
}
TALKED: WordList = {
    "before": (None, "before talking with others"),
    "after": (None, "after talking with others"),
}
SENSATION: WordList = {
    "snap": (-1, "one short snap, zap or crack"),
    "sting": (-1, "a single prick or sting"),
    "tingle": (1, "tingling"),
    "buzz": (1, "buzzing or vibration"),
    "sustained_pain": (2, "pain that went on"),
    "grip": (2, "muscles held on, could not let go"),
    "thrown": (1, "a jolt that threw the arm or body back"),
    "heat": (2, "heat or a burn"),
    "unclear": (0, "cannot be described"),
}
DURATION: WordList = {
    "instant": (-1, "over at once"),
    "about_a_second": (1, "about a second"),
    "longer": (1, "longer, or for as long as it was held"),
}
TIMING: WordList = {
    "in_gap": (-1, "just before touching"),
    "first_touch": (-1, "at the moment of touching"),
    "while_holding": (1, "while holding or leaning on it"),
    "on_release": (0, "on letting go"),
    "unsure": (0, "not sure"),
}
ITEM_KIND: WordList = {
    "device_mains": (None, "device with a mains cord, or built in and fed from the mains"),
    "device_battery": (None, "device with its own battery and no charger connected"),
    "cord": (None, "mains cord or plug"),
    "adapter_strip": (None, "adapter, charger, extension lead, socket strip"),
    "outlet": (None, "socket-outlet, floor box, pendant outlet"),
    "circuit": (None, "a whole circuit or panel"),
    "cart": (None, "cart, trolley"),
    "stool": (None, "stool or chair"),
    "bed": (None, "bed, stretcher, incubator trolley"),
    "table": (None, "operating or examination table"),
    "pole": (None, "infusion pole"),
    "stand": (None, "instrument stand"),
    "furniture_fixed": (None, "cupboard, rail, door handle, push plate"),
    "building_metal": (None, "pipe, frame, sink, radiator, lift button"),
    "instrument": (None, "hand instrument, retractor, lead"),
    "electrosurgical_unit": (None, "electrosurgical generator or its accessory"),
    "stimulator_defibrillator": (None, "defibrillator, pacer, stimulator"),
    "data_or_phone_line": (None, "data, telephone, nurse-call or aerial line"),
    "plastic_item": (None, "plastic sheet, film, drape, screen"),
    "person": (None, "another person or the patient"),
    "other": (None, "something else"),
}
OWNER: WordList = {
    "own": (None, "our own"),
    "loan": (None, "on loan"),
    "hire": (None, "on hire"),
    "trial": (None, "on trial or demonstration"),
    "patient": (None, "the patient's"),
    "staff": (None, "a staff member's"),
    "contractor": (None, "a contractor's"),
    "built_in": (None, "built in"),
}
POWER: WordList = {
    "mains_on": (None, "plugged in and on"),
    "mains_standby": (None, "plugged in, standby"),
    "mains_off": (None, "plugged in, switched off"),
    "battery": (None, "running on its battery"),
    "unplugged": (None, "not plugged in"),
    "none": (None, "has no supply of its own"),
}
SUPPLY: WordList = {
    "earthed": (None, "ordinary earthed supply"),
    "isolated": (None, "isolated supply with a monitor"),
}
EQUIPMENT_CLASS: WordList = {
    "I": (None, "protective earth"),
    "II": (None, "double insulated"),
    "internal": (None, "battery only"),
}
APPLIED_PART: WordList = {
    "B": (None, "type B"), "BF": (None, "type BF"), "CF": (None, "type CF"),
    "none": (None, "no applied part"),
}  # fmt: skip
CASTERS: WordList = {
    "conductive": (None, "conductive, measured"),
    "antistatic": (None, "antistatic, measured"),
    "conductive_dirty": (None, "sold as conductive, dirty or not measured"),
    "rubber": (None, "plain rubber or polyurethane"),
    "nylon": (None, "nylon or hard plastic"),
    "none": (None, "no wheels"),
}
CONDITION: WordList = {
    "intact": (-1, "looked at: cord, plug and case whole and dry"),
    "damaged": (1, "damaged cord, plug or case"),
    "live_part": (1, "a bare live part within reach of a finger"),
    "wet": (1, "wet, or liquid got in"),
    "hot": (2, "hot, smoking or smelling burnt"),
    "altered": (1, "changed since the event: cord swapped, cleaned, repaired, opened"),
    "missing": (1, "cannot be found"),
}
BODY_PART: WordList = {
    "fingertip": (None, "fingertip"), "hand": (None, "hand"), "both_hands": (None, "both hands"),
    "forearm": (None, "forearm or elbow"), "leg": (None, "leg, knee or foot"),
    "trunk": (None, "chest, back or seat"), "head": (None, "head or face"),
}  # fmt: skip
TOUCH: WordList = {
    "point": (None, "light touch of a fingertip"),
    "palm": (None, "flat of the hand"),
    "grip": (None, "firm grip"),
    "large": (None, "large area, leaning"),
}
MOISTURE: WordList = {
    "dry": (-1, "dry"),
    "damp": (1, "damp or sweaty"),
    "wet": (1, "wet"),
}
COVERING: WordList = {
    "bare": (None, "bare skin"),
    "glove": (None, "glove"),
    "clothing": (None, "through clothing"),
    "held_metal": (None, "through a metal object in the hand"),
}
ALSO_TOUCHING: WordList = {
    "nothing": (-1, "nothing else conducting"),
    "earthed_metal": (1, "earthed metal, such as a rail or a sink"),
    "another_device": (1, "another device or cart"),
    "patient": (1, "the patient"),
    "wet_floor": (1, "a wet floor"),
    "unsure": (0, "not sure"),
}
ACTIVITY: WordList = {
    "walking": (None, "walking up to it"),
    "rising_undressing": (None, "getting up, taking off a gown or coat"),
    "pushing_cart": (None, "pushing or pulling a cart, bed or stool"),
    "handling_plastic": (None, "peeling film or drape, sliding a patient, wiping plastic"),
    "plugging": (None, "plugging in or out, working a switch"),
    "touching_device": (None, "using or touching a device"),
    "two_objects": (None, "touching two objects at once"),
    "electrosurgery": (None, "assisting electrosurgery"),
    "resuscitation_stimulation": (None, "resuscitation, pacing, stimulation"),
    "wet_cleaning": (None, "cleaning with liquid, spill"),
    "still": (None, "standing or sitting still, or something else"),
}
GARMENT: WordList = {
    "synthetic": (None, "polyester or other synthetic"),
    "cotton": (None, "cotton or linen"),
    "antistatic": (None, "antistatic workwear"),
}
SEAT: WordList = {
    "foam": (None, "padded or vinyl-leather seat"),
    "plastic": (None, "hard plastic seat"),
    "antistatic": (None, "antistatic or conductive seat cover"),
}
SOURCE: WordList = {
    "said": (None, "somebody said so"),
    "seen": (None, "seen by the recorder"),
    "log": (None, "read from a log"),
    "instrument": (None, "read from an instrument"),
}
DEPENDENCE: WordList = {
    "none": (-1, "nobody depends on it"),
    "procedure": (1, "a procedure is under way"),
    "life_support": (1, "somebody's life depends on it"),
}
CHANGES: WordList = {
    "none": (-1, "nothing was changed"),
    "moved": (1, "moved"),
    "unplugged": (1, "unplugged"),
    "powered_down": (1, "powered down"),
    "cleaned": (1, "cleaned or dried"),
    "cord_swapped": (1, "cord or outlet changed"),
    "repaired": (1, "repaired, tightened or opened"),
}
DISTURBED: WordList = {
    **{word: (-1, CHANGES[word][1]) for word in ("moved", "unplugged", "powered_down")},
    **{word: CHANGES[word] for word in ("none", "cleaned", "cord_swapped", "repaired")},
}
"""Changes before one check: a mild one that is named is better than not knowing."""
FLAMMABLE: WordList = {
    "none": (-1, "neither within reach"),
    "wet_alcohol": (1, "wet alcohol on skin, hands or drapes"),
    "oxygen": (1, "oxygen source or enriched air"),
    "other_vapour": (1, "another flammable vapour"),
}
WHERE_MEASURED: WordList = {
    "at_place": (None, "at the spot"),
    "same_room": (None, "elsewhere in the room"),
    "same_air": (None, "another room on the same air handler, or its duct"),
    "elsewhere": (None, "another part of the building"),
}
FLOOR: WordList = {
    "conductive": (None, "conductive, measured"),
    "dissipative": (None, "dissipative, measured"),
    "antistatic": (None, "sold as antistatic"),
    "vinyl": (None, "vinyl, waxed or not"),
    "resin": (None, "epoxy or polyurethane resin"),
    "rubber": (None, "rubber"),
    "linoleum": (None, "linoleum"),
    "carpet": (None, "synthetic carpet"),
    "carpet_antistatic": (None, "antistatic carpet"),
    "mineral": (None, "tile, stone, concrete, wood"),
}
FOOTWEAR: WordList = {
    "esd": (None, "electrostatic-control shoes, measured"),
    "antistatic": (None, "antistatic work shoes"),
    "leather": (None, "leather soles"),
    "ordinary": (None, "ordinary rubber or plastic soles"),
    "foam_clog": (None, "foam clogs"),
    "overshoe": (None, "disposable overshoes"),
    "barefoot": (None, "barefoot"),
    "socks": (None, "socks"),
}
MONITOR: WordList = {
    "total_hazard_current": (None, "line isolation monitor, milliamperes"),
    "insulation_resistance": (None, "insulation monitor, ohms"),
    "none": (None, "no monitor"),
}
STAGE: WordList = {
    "as_found": (None, "as found: same cord and outlet, nothing changed"),
    "after_disturbance": (None, "after something was changed; say what"),
    "as_left": (None, "as left, after repair"),
}
RESULT: WordList = {
    "pass": (-1, "passed"),
    "fail": (1, "failed"),
    "not_practicable": (0, "could not be done; say why"),
}
TEST_STATE: WordList = {
    "on": (None, "switched on"), "standby": (None, "standby"), "off": (None, "off, plugged in"),
    "unplugged": (None, "unplugged"), "wet": (None, "wet as at the event"),
    "warm": (None, "warmed up"), "flexed": (None, "cord flexed and pulled"),
    "moved": (None, "moved or rolled as at the event"),
    "accessories": (None, "with its accessories fitted"),
    "earth_open": (None, "protective earth opened for the test"),
    "neutral_open": (None, "neutral opened for the test"),
}  # fmt: skip
HOW_CONFIRMED: WordList = {
    "reproduced": (None, "reproduced"),
    "defect_consistent": (None, "defect found that fits"),
    "static_measured": (None, "static re-enacted by measurement"),
    "log_match": (None, "a log matches"),
    "tests_complete_nothing_found": (None, "all tests complete, nothing found"),
    "by_exclusion": (None, "by exclusion"),
    "never_established": (None, "never established"),
}
REPORTABLE: WordList = {
    "yes": (None, "reportable"), "no": (None, "not reportable"), "undecided": (None, "undecided"),
}  # fmt: skip
AIR_HANDLING: WordList = {
    "occupied": (None, "occupied setting"), "setback": (None, "night or weekend setback"),
    "off": (None, "off"),
}  # fmt: skip
REFERENCE_KIND: WordList = {
    "hospital_incident": (None, "hospital incident number"),
    "work_order": (None, "work order"),
    "occupational_health": (None, "occupational-health number"),
    "authority": (None, "authority report number"),
    "other": (None, "another number"),
}

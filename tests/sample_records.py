"""One small valid record as a tree and as text, for tests that spoil it."""

import copy
from typing import Any

import yaml


class _Plain(yaml.SafeDumper):
    """Writes a shared part out each time, since records know no aliases."""

    def ignore_aliases(self, data: Any) -> bool:
        return True


RECORD_ID = "0123456789abcdef" * 2


def tree() -> dict[str, Any]:
    """A record with one pump on an earthed outlet; every scalar is text, as it is read."""
    return copy.deepcopy(_TREE)


def text(record: Any) -> str:
    """The YAML text of a tree of text, quoted so that no reader can take it for anything else."""
    return yaml.dump(record, Dumper=_Plain, default_style='"', allow_unicode=True, sort_keys=False)


def spoiled(changes: dict[str, Any], base: dict[str, Any] | None = None) -> dict[str, Any]:
    """A copy with values at paths such as "checks.0.value" replaced; None takes the field out."""
    record = copy.deepcopy(base) if base is not None else tree()
    for path, value in changes.items():
        *above, last = path.split(".")
        part: Any = record
        for step in above:
            part = part[int(step)] if isinstance(part, list) else part[step]
        if value is None:
            part.pop(last, None)
        else:
            part[int(last) if isinstance(part, list) else last] = value
    return record


_TREE: dict[str, Any] = {
    "schema": "1",
    "id": RECORD_ID,
    "place": {"area": "ward", "room": "w3"},
    "persons": [{"id": "p1", "who": "staff", "signs": ["none"]}],
    "statements": [{"id": "s1", "person": "p1", "words": "it snapped", "sensation": "snap"}],
    "scene": {"changes": ["none"], "dependence": "none"},
    "items": [
        {
            "id": "pump", "kind": "device_mains", "power": "mains_on", "supply": "earthed",
            "outlet": "w3-1", "equipment_class": "I", "applied_part": "BF",
            "condition": ["intact"],
        },
        {"id": "w3-1", "kind": "outlet", "condition": ["intact"]},
        {"id": "cord-1", "kind": "cord"},
        {"id": "cord-2", "kind": "cord"},
    ],
    "contacts": [{"id": "c1", "person": "p1", "items": ["pump"], "moisture": "dry",
                  "also_touching": "nothing"}],
    "event": {"at": "2026-01-14 07:20", "activity": "walking"},
    "surroundings": {"humidity": "24 %", "floor": "vinyl", "footwear": "ordinary"},
    "supply": {"kind": "earthed", "voltage": "230 V", "frequency": "50 Hz"},
    "checks": [
        {
            "id": "k1", "kind": "touch_current", "of": "pump", "method": "direct_earthed",
            "supply": "earthed", "stage": "as_found", "same_cord": "yes", "state": ["on"],
            "value": "40 uA", "result": "pass", "instrument": "tester 4",
            "calibration_due": "2026-09-01", "by": "technician", "at": "2026-01-14 09:00",
        },
    ],
}  # fmt: skip

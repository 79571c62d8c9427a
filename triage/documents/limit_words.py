"""The limits in force for one kind of check, in the few words that a line of a paper holds."""

from triage.check_table import CheckKind
from triage.documents.wording import NBSP, spoken
from triage.in_force import OWN, limits_of_kind
from triage.limits import ANY, Limit
from triage.site import Site

_SIGN = {("max", False): "≤", ("max", True): "<", ("min", False): "≥", ("min", True): ">"}
_NOT_READ = "*"
_UNIT = (("Mohm", "MΩ"), ("Gohm", "GΩ"), ("kohm", "kΩ"), ("ohm", "Ω"), ("uA", "µA"), (" ", NBSP))
_PROPERTIES = ("conditions", "classes", "parts", "methods")


def limit_text(kind: CheckKind, site: Site) -> str:
    """Every limit of a kind of check at a site; empty where it has none.

    Args:
        kind: its row in the table of checks.
        site: may choose an edition and make limits stricter.

    Returns:
        Sign, value, and what tells it from the others; "*" where it was not read in a standard.
    """
    rows = limits_of_kind(kind, site)
    telling = [p for p in _PROPERTIES if len({getattr(row, p) for row in rows}) > 1]
    if not telling and len(rows) > 1:
        telling = ["quantity"]
    return "; ".join(dict.fromkeys(_one(row, telling) for row in rows))


def _one(row: Limit, telling: list[str]) -> str:
    value = row.text
    for typed, printed in _UNIT:
        value = value.replace(typed, printed)
    words = [each for p in telling if (each := _property(row, p))]
    own = row.citation.source.startswith(OWN)
    star = _NOT_READ if row.warning and not own else ""
    words += ["set by the site"] if own else []
    return " ".join([f"{_SIGN[row.sense, row.strict]}{NBSP}{value}{star}", *words])


def _property(row: Limit, name: str) -> str:
    value = getattr(row, name)
    if isinstance(value, str):
        return spoken(value)
    if value == (ANY,):
        return ""
    before = {"classes": "class ", "parts": "type "}.get(name, "")
    return before + "/".join(spoken(each) for each in value)

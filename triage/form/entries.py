"""Who added what and when: the record's own list of entries, written as the form goes."""

from triage.clock import Moment
from triage.form.state import State

_MOST = 300
"""Longest text of one entry, as the table of fields has it."""


def add(state: State, what: str, by: str | None, present: Moment) -> State:
    """A state with one more entry; notes of one role in one minute share an entry.

    Args:
        what: what was added or changed. by: role, None if not said. present: when.
    """
    found = state.copy()
    kept = found.tree.setdefault("entries", [])
    entry = {"at": present.text} | ({"by": by} if by else {})
    last = kept[-1] if kept else {}
    joined = f"{last.get('what', '')}; {what}"
    if {k: v for k, v in last.items() if k != "what"} == entry and len(joined) <= _MOST:
        last["what"] = joined
    else:
        kept.append(entry | {"what": what[:_MOST]})
    return found

"""Short answers of the first minute: what each sets, and what happens when they disagree."""

import re

from triage.form.answers import pick, pick_several, says_unknown
from triage.form.state import State, get, put
from triage.questions import Option, Question, field_at

Value = str | tuple[str, ...]


def choose(state: State, question: Question, typed: str) -> tuple[str, tuple[str, ...]]:
    """Set the fields of the options chosen; what an earlier choice had set is taken back first.

    Args:
        state: changed in place.
        typed: numbers or words; "u" chooses none.

    Returns:
        The choice in words, and what was set aside because a more adverse answer stands beside it.

    Raises:
        InvalidValue: none of the options.
    """
    among = [(each.word, each.says) for each in question.options]
    if says_unknown(typed):
        picked = []
    else:
        picked = pick_several(typed, among) if question.many else [pick(typed, among)]
    _take_back(state, question)
    chosen = [each for each in question.options if (each.word, each.says) in picked]
    set_aside = []
    for path, values in _gathered(chosen).items():
        value, lost = _most_adverse(path, values)
        put(state.tree, _first(path), list(value) if isinstance(value, tuple) else value)
        set_aside += [f"{each}: a more adverse answer stands beside it" for each in lost]
    state.marks[question.id] = " ".join(each.word for each in chosen) or "unknown"
    return "; ".join(each.says for each in chosen) or "not known", tuple(set_aside)


def _first(path: str) -> str:
    return path.replace("[]", "[0]")


def _take_back(state: State, question: Question) -> None:
    """Take out what the earlier choice set, unless it was answered anew since."""
    words = state.marks.get(question.id, "").split()
    earlier = [each for each in question.options if each.word in words]
    for path, values in _gathered(earlier).items():
        value, _ = _most_adverse(path, values)
        now = get(state.tree, _first(path))
        if now == (list(value) if isinstance(value, tuple) else value):
            put(state.tree, _first(path), None)


def _gathered(chosen: list[Option]) -> dict[str, list[Value]]:
    found: dict[str, list[Value]] = {}
    for option in chosen:
        for path, value in option.sets:
            found.setdefault(path, []).append(value)
    return found


def _most_adverse(path: str, values: list[Value]) -> tuple[Value, list[str]]:
    """One value out of several: lists together, of single answers the most adverse."""
    row = field_at(re.sub(r"\[\d+\]", "[]", path))
    flat = [w for v in values for w in (v if isinstance(v, tuple) else (v,))]
    worst = max(row.order(each) or 0 for each in flat)
    if not isinstance(values[0], tuple):
        kept = next(each for each in flat if (row.order(each) or 0) == worst)
        return kept, [each for each in flat if each != kept and (row.order(each) or 0) < worst]
    calm = [each for each in flat if worst > 0 and (row.order(each) or 0) < 0]
    return tuple(each for each in flat if each not in calm), calm

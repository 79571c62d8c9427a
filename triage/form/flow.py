"""What is asked next: the steps that apply to a record so far, in the order of the scene.

Nothing is remembered but the record and the marks, so a form goes on anywhere after any stop.
"""

from collections.abc import Iterator

from triage.form.state import State, get, is_adverse, put, words_at
from triage.frozen import frozen
from triage.questions import FIRST_MINUTE, Condition, Question, Section, room_defaults, sections
from triage.site import Room, Site


@frozen
class Step:
    """One thing that is asked.

    Args:
        key: path of the field with its numbers, or the name of the mark that holds the answer.
        kind: field, options, another, defaults.
        section: where it stands. number: which part of a list, from 0; -1 outside of lists.
        question: its question, None for another and defaults.
    """

    key: str
    kind: str
    section: Section
    number: int = -1
    question: Question | None = None


def steps(state: State, site: Site) -> Iterator[Step]:
    """Every step that applies, answered ones too, in order."""
    only, later = state.marks.get("only", ""), "later" in state.marks
    for section in sections():
        for step in _of_section(section, state, site):
            if step.key.startswith(only) and (step.kind == "field" or not later):
                yield step


def _of_section(section: Section, state: State, site: Site) -> Iterator[Step]:
    if not section.part:
        for question in section.questions:
            yield from _of_question(section, question, -1, state, site)
        return
    count = len(state.tree.get(section.part) or [])
    for number in range(count):
        if number or not section.expected:
            yield Step(f"another:{section.part}:{number}", "another", section, number)
        for question in section.questions:
            yield from _of_question(section, question, number, state, site)
    if section.part != "contacts" or _could_be_more(state):
        yield Step(f"another:{section.part}:{count}", "another", section, count)


def _could_be_more(state: State) -> bool:
    """Whether there may be more contacts: with one person and one thing there is one."""
    return max(len(state.tree.get(each) or []) for each in ("persons", "items")) > 1


def _of_question(
    section: Section, question: Question, number: int, state: State, site: Site
) -> Iterator[Step]:
    if question.room and not site.file.rooms:
        return
    if question.options:
        if all(_holds(each, number, section.part, state) for each in question.when):
            yield Step(question.id, "options", section, number, question)
        return
    key = question.path.replace("[]", f"[{number}]")
    if applies(question, key, number, section.part, state):
        yield Step(key, "field", section, number, question)
    if question.room and defaults_of(state, site):
        room = get(state.tree, key)
        yield Step(f"defaults:{room}", "defaults", section, number)


def applies(question: Question, key: str, number: int, part: str, state: State) -> bool:
    """Whether a question applies; one that was answered adversely always does.

    An adverse answer never vanishes because of a branch: it can only be taken back itself.
    """
    if all(_holds(each, number, part, state) for each in question.when):
        return True
    return is_adverse(key, words_at(state.tree, key))


def _holds(condition: Condition, number: int, part: str, state: State) -> bool:
    found = _looked_at(condition.path, number, part, state)
    known = [each for answers in found for each in answers]
    if condition.known is not None:
        return bool(known) == condition.known
    if condition.among is not None:
        return bool(condition.among & set(known))
    ruled_out = [bool(a) and set(a) <= condition.not_among for a in found]
    return not (ruled_out and all(ruled_out))


def _looked_at(path: str, number: int, part: str, state: State) -> list[tuple[str, ...]]:
    """Known answers of the part itself, or of every part of another list."""
    if "[]" not in path:
        return [words_at(state.tree, path)]
    theirs = path.partition("[]")[0]
    if theirs == part:
        return [words_at(state.tree, path.replace("[]", f"[{number}]"))]
    count = len(state.tree.get(theirs) or [])
    return [words_at(state.tree, path.replace("[]", f"[{n}]")) for n in range(count)]


def defaults_of(state: State, site: Site) -> dict[str, str]:
    """Path to answer of everything that the room brings; empty without a known room.

    A list takes the answer at every part that it applies to.
    """
    named = words_at(state.tree, "place.room")
    room = site.room(named[0]) if named else None
    if room is None:
        return {}
    return dict(_brought(room, state))


def _brought(room: Room, state: State) -> Iterator[tuple[str, str]]:
    """Each held against those before it: no monitor where the supply is earthed."""
    after = state.copy()
    for name, path in room_defaults().items():
        value = getattr(room, name)
        if value is None:
            continue
        section, question = _question_of(path)
        count = len(after.tree.get(section.part) or []) if section.part else 1
        for number in range(count):
            if all(_holds(each, number, section.part, after) for each in question.when):
                key = path.replace("[]", f"[{number}]")
                put(after.tree, key, getattr(value, "text", value))
                yield key, getattr(value, "text", value)


def _question_of(path: str) -> tuple[Section, Question]:
    return next((s, q) for s in sections() for q in s.questions if q.path == path)


def is_answered(step: Step, state: State) -> bool:
    """Whether a step was answered, with "not known" too."""
    if step.kind == "field":
        later = state.marks.get("later")
        if later is None:
            return get(state.tree, step.key) is not None
        return step.key in later.split() or bool(words_at(state.tree, step.key))
    if step.kind == "another":
        held = len(state.tree.get(step.section.part) or [])
        return step.number < held or f"another:{step.section.part}" in state.marks
    return step.key in state.marks


def next_step(state: State, site: Site) -> Step | None:
    """The first step that was not answered; None at the end."""
    return next((each for each in steps(state, site) if not is_answered(each, state)), None)


def before(step: Step, state: State, site: Site) -> Step | None:
    """The step before one; None at the beginning."""
    earlier = None
    for each in steps(state, site):
        if each.key == step.key:
            return earlier
        earlier = each
    return earlier


def progress(state: State, site: Site) -> tuple[int, int]:
    """Steps answered, and steps in all as far as can be seen."""
    found = [is_answered(each, state) for each in steps(state, site)]
    return sum(found), len(found)


def first_minute_is_over(state: State, site: Site) -> bool:
    """Whether the first eight questions, as far as they apply, were answered."""
    found = (each for each in steps(state, site) if each.section.id == FIRST_MINUTE)
    return all(is_answered(each, state) for each in found)

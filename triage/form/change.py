"""One answer put into the state: what it sets, what no longer applies and is dropped, in words."""

from triage.clock import Moment
from triage.errors import BadRecord, InvalidValue
from triage.form.answers import (
    NOT_KNOWN,
    Reading,
    pick,
    read,
    read_value,
    says_unknown,
)
from triage.form.choices import YES_NO, asked, choices
from triage.form.flow import Step, defaults_of, steps
from triage.form.options import choose
from triage.form.state import PREFIX, State, drop_part, get, in_order, new_id, put, references_to
from triage.frozen import frozen
from triage.questions import Question
from triage.record import from_plain
from triage.site import Site
from triage.strict_yaml import Plain


@frozen
class Change:
    """What one answer did.

    Args:
        state: the state after it.
        echo: the answer in full.
        doubt: a question about it; the answer counts only when it is given again.
        dropped: what no longer applies and was taken out, in words.
    """

    state: State
    echo: str
    doubt: str = ""
    dropped: tuple[str, ...] = ()


def answer(state: State, step: Step, *, typed: str, site: Site, present: Moment) -> Change:
    """Answer one step.

    Args:
        state: stays as it is; the change holds a new one.
        typed: as typed.
        present: the present, for "now".

    Raises:
        InvalidValue: it cannot be the answer; the text says what would do.
    """
    before = {each.key: each for each in steps(state, site)}
    found = _put(state.copy(), step, typed=typed, site=site, present=present)
    said = _prune(before, state, after=found.state, site=site)
    tree = in_order(found.state.tree)
    try:
        from_plain(Plain("form", tree))
    except BadRecord as error:
        raise InvalidValue(error.faults[0].partition(" ")[2]) from None
    after = State(tree, found.state.marks)
    return Change(after, found.echo, found.doubt, (*found.dropped, *said))


def _put(state: State, step: Step, *, typed: str, site: Site, present: Moment) -> Change:
    if step.kind == "another":
        return _another(state, step, typed=typed)
    if step.kind == "defaults":
        return _defaults(state, step, typed=typed, site=site)
    if step.kind == "options" and step.question:
        echo, said = choose(state, step.question, typed)
        return Change(state, echo, dropped=said)
    return _field(state, step, typed=typed, site=site, present=present)


def _field(state: State, step: Step, *, typed: str, site: Site, present: Moment) -> Change:
    question = step.question
    assert question is not None, "a field is asked for by a question"
    among = choices(step, state, site)
    dropped: tuple[str, ...] = ()
    if question.makes and not says_unknown(typed):
        found, dropped = _made(state, step, question=question, typed=typed)
    elif question.path == "checks[].value":
        found = read_value(typed, get(state.tree, f"checks[{step.number}].kind"))
    else:
        found = read(step.key, typed, among=among, present=present, zone=site.zone)
    put(state.tree, step.key, found.value)
    later = state.marks.get("later")
    if later is not None:
        state.marks["later"] = f"{later} {step.key}".strip()
    return Change(state, found.echo, found.doubt, dropped)


def _made(
    state: State, step: Step, *, question: Question, typed: str
) -> tuple[Reading, tuple[str, ...]]:
    """An outlet or cord by its id, or a new item with the words typed as its name."""
    known = {each["id"] for each in state.tree["items"] if each.get("kind") == question.makes}
    name, earlier = typed.strip(), get(state.tree, step.key)
    if name in known:
        return Reading(name, name), ()
    dropped = _drop_made(state, earlier) if earlier else ()
    made = {"id": new_id(state.tree, "items", question.makes), "kind": question.makes}
    supply = get(state.tree, f"items[{step.number}].supply")
    if supply and question.makes == "outlet":
        made["supply"] = supply
    state.tree["items"].append(made | {"name": name})
    return Reading(made["id"], f"{made['id']} added: {name}"), dropped


def _drop_made(state: State, name: str) -> tuple[str, ...]:
    """Take out an item that only this answer had brought in."""
    items = state.tree["items"]
    number = next((n for n, each in enumerate(items) if each["id"] == name), None)
    made = name.startswith(("outlet", "cord"))
    if number is None or not made or len(list(references_to(state.tree, "items", name))) > 1:
        return ()
    drop_part(state.tree, "items", number)
    return (f"{name}, which nothing else names",)


def _another(state: State, step: Step, *, typed: str) -> Change:
    part = step.section.part
    if says_unknown(typed):
        typed = "no"
    word, _ = pick(typed, YES_NO)
    held = state.tree.setdefault(part, [])
    if word == "yes":
        state.marks.pop(f"another:{part}", None)
        if step.number < len(held):
            return Change(state, "yes, as before")
        fresh = {"id": new_id(state.tree, part, PREFIX[part])} if part in PREFIX else {}
        held.append(fresh)
        return Change(state, f"yes: {fresh.get('id', 'one more')}")
    dropped = []
    while len(held) > step.number:
        dropped.append(f"{part} {held[-1].get('id', len(held))}")
        drop_part(state.tree, part, len(held) - 1)
    state.marks[f"another:{part}"] = "no"
    return Change(state, "no", dropped=tuple(dropped))


def _defaults(state: State, step: Step, *, typed: str, site: Site) -> Change:
    """Values of the room, confirmed as a whole; otherwise each is asked for."""
    word = NOT_KNOWN if says_unknown(typed) else pick(typed, YES_NO)[0]
    if state.marks.get(step.key) == "yes":
        for path in confirmed(state, site):
            put(state.tree, path, None)
    state.marks[step.key] = word
    if word != "yes":
        return Change(state, "each is asked for")
    for path, text in defaults_of(state, site).items():
        put(state.tree, path, text)
    return Change(state, "confirmed")


def confirmed(state: State, site: Site) -> list[str]:
    """Paths whose answer is what the room brings, confirmed as a whole."""
    room = get(state.tree, "place.room")
    if state.marks.get(f"defaults:{room}") != "yes":
        return []
    brought = defaults_of(state, site)
    return [path for path, text in brought.items() if get(state.tree, path) == text]


def _prune(before: dict[str, Step], earlier: State, *, after: State, site: Site) -> list[str]:
    """Drop the answers to questions that this answer put out of reach, and say so."""
    dropped = []
    state, still = after, {each.key for each in steps(after, site)}
    for key, step in before.items():
        if key in still:
            continue
        if step.kind == "field" and (found := get(state.tree, key)) is not None:
            put(state.tree, key, None)
            if found != NOT_KNOWN and get(earlier.tree, key) is not None:
                dropped.append(f"{asked(step, state, site)} ({_worded(found)})")
            if step.question and step.question.makes and isinstance(found, str):
                dropped += _drop_made(state, found)
        elif step.kind == "options" and step.question and key in state.marks:
            choose(state, step.question, "u")
            del state.marks[key]
    return dropped


def _worded(found: object) -> str:
    return ", ".join(found) if isinstance(found, list) else str(found)

"""A form from opening to leaving: new, gone on with, taken over, or a finished record added to."""

from collections.abc import Callable
from pathlib import Path

from triage import clock
from triage.canonical import case_number, new_record_id
from triage.clock import Moment
from triage.errors import CannotWrite
from triage.form import additions, draft
from triage.form.answers import read
from triage.form.change import confirmed
from triage.form.entries import add
from triage.form.lines import Lines, say
from triage.form.state import PREFIX, State, begin
from triage.form.terminal import CONTROLS, Form, Session
from triage.frozen import frozen
from triage.questions import sections
from triage.site import Site


@frozen
class Opening:
    """What a form is opened with.

    Args:
        site: the site file. lines: where answers come from.
        by: role of whoever fills it in, None if not said.
        clock: reads the clock. record_id: makes the id of a new record.
    """

    site: Site
    lines: Lines
    by: str | None = None
    clock: Callable[[], Moment] = clock.now
    record_id: Callable[[], str] = new_record_id


def open_form(path: Path | None, opening: Opening) -> bool:
    """Fill in a new record, go on with a draft, or add to a finished record.

    Args:
        path: the file; None for a new one, named after its case number, in the present folder.

    Returns:
        Whether a disposition so far is one of the two most severe.

    Raises:
        BadRecord: the file is there and is not a valid record.
        CannotWrite: another form has it open, or the folder does not allow it.
        InvalidValue: an answer out of a pipe or a file cannot be taken; those before it are kept.
    """
    fresh = opening.record_id()
    target = path or Path(f"{case_number(fresh)}.yaml")
    if target.is_dir() or (path is None and target.exists()):
        raise CannotWrite(f"{target}: is there already; name a file")
    if opening.by:
        read("recorded_by", opening.by, among=(), present=opening.clock(), zone="UTC")
    with draft.only_writer(target, opening.by or "role not said"):
        return _fill(target, fresh, opening)


def _fill(path: Path, fresh: str, opening: Opening) -> bool:
    head, complete = "", False
    if path.exists():
        state, complete, head = draft.load(path)
        complete = complete and any(state.tree.get(each) for each in PREFIX)
        state = state if complete else _gone_on_with(state, opening)
    else:
        state = begin(fresh, opening.clock().text, opening.by)
        state = add(state, "record begun with the form", opening.by, opening.clock())
    if opening.by and not complete:
        state.marks["by"] = opening.by
    session = Session(path, head, opening.site, opening.clock, opening.by)
    say(f"Case {case_number(state.tree['id'])}, kept in {path}")
    say(CONTROLS)
    if complete:
        state = _add_to(session, opening.lines, state)
    else:
        draft.save(path, state, complete=False, head=head)
        state = _through(session, opening.lines, state)
    return _severe(state, opening.site)


def _severe(state: State, site: Site) -> bool:
    # Imported here: the first question must not wait for the assessment.
    from triage.documents.summary import severe
    from triage.form.first_minute import assess_state

    return severe(assess_state(state, site))


def _gone_on_with(state: State, opening: Opening) -> State:
    """A draft as it was left, or a record without any person, thing or words yet."""
    found = state.copy()
    for section in sections():
        if section.expected and not found.tree.get(section.part) and not found.marks:
            found.tree[section.part] = [{"id": f"{PREFIX[section.part]}1"}]
            if section.part == "contacts":
                found.tree["contacts"][0] |= {"person": "p1", "items": ["item1"]}
    if "recorded_at" not in found.tree:
        by = {"recorded_by": opening.by} if opening.by else {}
        found.tree.update(by | {"recorded_at": opening.clock().text})
        return add(found, "record begun with the form", opening.by, opening.clock())
    earlier = found.marks.get("by")
    if opening.by and earlier and opening.by != earlier:
        say(f"Taken over from: {earlier}.")
        return add(found, f"taken over from {earlier}", opening.by, opening.clock())
    return found


def _through(session: Session, lines: Lines, state: State) -> State:
    """Ask to the end; complete or left, the file is whole."""
    form = Form(session, lines, state)
    if not form.run():
        say()
        say(f"Left; nothing is lost. Go on with: triage record {session.path}")
        return form.state
    done = _completed(form.state, session)
    draft.save(session.path, done, complete=True, head=session.head)
    say()
    say("COMPLETE")
    form.say_what_to_do()
    form.say_flags()
    say()
    say(f"All of it: triage assess {session.path}")
    return done


def _completed(state: State, session: Session) -> State:
    """The record without marks, with the values that the site file brought among its entries."""
    brought = ", ".join(confirmed(state, session.site))
    found = State(state.tree, {})
    if "only" in state.marks or "later" in state.marks:
        return found
    if brought:
        room = state.tree["place"]["room"]
        note = f"values of room {room} in the site file, confirmed: {brought}"
        found = add(found, note, session.by, session.clock())
    return found


def _add_to(session: Session, lines: Lines, state: State) -> State:
    """Add to a finished record until nothing more is added."""
    while (addition := additions.choose(state, lines)) is not None:
        begun = add(addition.state, addition.note, session.by, session.clock())
        draft.save(session.path, begun, complete=False, head=session.head)
        state = _through(session, lines, begun)
        if state.marks:
            return state
    return state

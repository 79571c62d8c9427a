"""A finished record opened again: what is added to it, and by whom."""

from triage.form.answers import pick
from triage.form.lines import Lines, say
from triage.form.state import PREFIX, State, new_id
from triage.frozen import frozen

MENU = (
    ("check", "a check"),
    ("statement", "a statement of a witness"),
    ("item", "a thing involved"),
    ("contact", "who touched what"),
    ("person", "a person affected"),
    ("later", "facts that were not known so far"),
    ("nothing", "nothing more"),
)
"""What can be added to a finished record."""


@frozen
class Addition:
    """What is added: the state to go on with, and what goes into the entries."""

    state: State
    note: str


def choose(state: State, lines: Lines) -> Addition | None:
    """Ask what is added; None for nothing more.

    Raises:
        InvalidValue: an answer out of a pipe or a file that is not in the menu.
    """
    say()
    say("This record is complete. What is added?")
    for number, (word, meaning) in enumerate(MENU, 1):
        print(f"{number:4} {word}: {meaning}")
    typed = lines.next()
    while typed == "":
        typed = lines.next()
    if typed in (None, "q"):
        return None
    word, _ = pick(str(typed), MENU)
    return None if word == "nothing" else begun(state, word)


def begun(state: State, word: str) -> Addition:
    """The state with a fresh part, or set to ask for what was not known.

    Args:
        state: of a complete record. word: a word of the menu but "nothing".
    """
    found = state.copy()
    if word == "later":
        found.marks["later"] = ""
        return Addition(found, "facts added that were not known before")
    part = f"{word}s"
    held = found.tree.setdefault(part, [])
    fresh = {"id": new_id(found.tree, part, PREFIX[part])}
    held.append(fresh)
    found.marks["only"] = f"{part}[{len(held) - 1}]."
    return Addition(found, f"added {fresh['id']}")

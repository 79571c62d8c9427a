"""The answers that may be chosen at a step: word and meaning, in order."""

import re
from collections.abc import Iterator

from triage.check_table import check_kinds
from triage.form.flow import Step, defaults_of
from triage.form.state import State, Tree, get
from triage.questions import room_defaults
from triage.site import Site
from triage.words import ITEM_KIND

YES_NO = (("yes", "yes"), ("no", "no"))


def choices(step: Step, state: State, site: Site) -> tuple[tuple[str, str], ...]:
    """Word and meaning of every answer that may be chosen; empty where the answer is free."""
    return tuple(_choices(step, state, site))


def _choices(step: Step, state: State, site: Site) -> Iterator[tuple[str, str]]:
    question = step.question
    if question is None:
        yield from YES_NO
    elif question.options:
        yield from ((each.word, each.says) for each in question.options)
    elif question.field.words:
        yield from ((word, meaning) for word, (_, meaning) in question.field.words.items())
    elif question.room:
        yield from ((room.id, room.name or room.id) for room in site.file.rooms)
    elif question.path == "checks[].kind":
        yield from ((kind.id, kind.name) for kind in check_kinds().values())
    elif question.path == "checks[].method":
        yield from _methods(step, state)
    elif question.field.to:
        yield from _ids(question.field.to, question.makes, step, state.tree)


def _methods(step: Step, state: State) -> Iterator[tuple[str, str]]:
    kind = check_kinds().get(str(get(state.tree, f"checks[{step.number}].kind")))
    seen: dict[str, str] = {}
    for each in kind.accepts if kind else ():
        supplies = " or ".join(sorted(each.supplies))
        seen.setdefault(each.method, each.note or f"supply: {supplies}")
    yield from seen.items()


def _ids(part: str, makes: str, step: Step, tree: Tree) -> Iterator[tuple[str, str]]:
    """Ids of a list with their names; for a cord or an outlet only those of that kind."""
    for number, each in enumerate(tree.get(part) or []):
        own = part == step.section.part and number == step.number
        if not own and (not makes or each.get("kind") == makes):
            yield each["id"], called(each)


def called(part: Tree) -> str:
    """What a person, item or statement is called, as far as it is known."""
    kind = ITEM_KIND.get(part.get("kind", ""))
    found = part.get("name") or part.get("role") or part.get("by") or (kind[1] if kind else None)
    return str(found or part.get("who") or part["id"])


def asked(step: Step, state: State, site: Site) -> str:
    """The question of a step in words."""
    if step.question is not None:
        return step.question.ask
    if step.kind == "another":
        return step.section.another
    names = {path: name for name, path in room_defaults().items()}
    found = {re.sub(r"\d+", "", path): text for path, text in defaults_of(state, site).items()}
    brought = ", ".join(f"{names[path]} {text}" for path, text in found.items()).replace("_", " ")
    return f"The site file says of {step.key.partition(':')[2]}: {brought}. Is all of it so today?"

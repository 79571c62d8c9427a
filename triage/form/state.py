"""The state of a form: the record so far, and what was answered that no field of it holds."""

import copy
import re
from collections.abc import Iterator
from functools import lru_cache
from typing import Any

from triage.fields import Field, is_unknown, table
from triage.frozen import frozen
from triage.incident import SCHEMA, Incident
from triage.questions import field_at, sections

Tree = dict[str, Any]
PREFIX = {"persons": "p", "statements": "s", "items": "item", "contacts": "c", "checks": "k"}
"""How the ids of the parts that the form makes begin."""
_STEP = re.compile(r"([a-z_0-9]+)(?:\[(\d+)\])?")


@frozen
class State:
    """A form part way through.

    Args:
        tree: the record so far, a valid record at every moment.
        marks: answers that are not fields: question id or "another:items" to what was typed.
    """

    tree: Tree
    marks: dict[str, str]

    def copy(self) -> "State":
        """The same state, free to be changed."""
        return State(copy.deepcopy(self.tree), dict(self.marks))


def begin(record_id: str, at: str, by: str | None) -> State:
    """A new record: one person, one statement, one item, one contact, nothing known about them.

    Args:
        record_id: 32 hexadecimal digits.
        at: when recording began, as text.
        by: role of the recorder, None if not said.
    """
    tree: Tree = {"schema": SCHEMA, "id": record_id}
    if by:
        tree["recorded_by"] = by
    tree["recorded_at"] = at
    for section in sections():
        if section.expected:
            tree[section.part] = [{"id": f"{PREFIX[section.part]}1"}]
    tree["contacts"][0] |= {"person": "p1", "items": ["item1"]}
    return State(in_order(tree), {})


def get(tree: Tree, path: str) -> Any:
    """What stands at a path such as "items[0].kind"; None where nothing stands."""
    found: Any = tree
    for name, number in _steps(path):
        found = found.get(name) if isinstance(found, dict) else None
        if number is not None:
            held = isinstance(found, list) and number < len(found)
            found = found[number] if held else None
    return found


@lru_cache(4096)
def _steps(path: str) -> tuple[tuple[str, int | None], ...]:
    """Names of a path, each with its number in a list or None."""
    found = (_STEP.fullmatch(each) for each in path.split("."))
    return tuple((m[1], int(m[2]) if m[2] else None) for m in found if m)


def put(tree: Tree, path: str, value: Any) -> None:
    """Put a value at a path, or take it away with None; the parts on the way must exist."""
    *above, (last, _) = _steps(path)
    for name, number in above:
        tree = tree.setdefault(name, {}) if number is None else tree[name][number]
    if value is None:
        tree.pop(last, None)
    else:
        tree[last] = value


def chosen_by(state: State, key: str, by: str | None) -> State:
    """The state with the role that chose the words for a statement, where nobody is named yet.

    Args:
        key: path just answered. by: role of whoever fills the form in, None if not said.
    """
    found = re.fullmatch(r"(statements\[\d+\])\.(\w+)", key)
    if not found or not by or not field_at(f"statements[].{found[2]}").words:
        return state
    path = f"{found[1]}.mapped_by"
    if get(state.tree, path) is not None:
        return state
    mapped = state.copy()
    put(mapped.tree, path, by)
    return State(in_order(mapped.tree), mapped.marks)


def words_at(tree: Tree, path: str) -> tuple[str, ...]:
    """The known answers at a path: several for a list, none where it is unknown or left out."""
    found = get(tree, path)
    if found is None:
        return ()
    answers = found if isinstance(found, list) else [found]
    return tuple(a for a in answers if isinstance(a, str) and not is_unknown(a))


def is_adverse(path: str, found: tuple[str, ...]) -> bool:
    """Whether any of the answers at a path is an adverse one."""
    row = field_at(re.sub(r"\[\d+\]", "[]", path)) if found else None
    return row is not None and any(
        (row.order(each) or 0) > 0 for each in found if each in row.words
    )


def new_id(tree: Tree, part: str, prefix: str) -> str:
    """The first free id of a list."""
    taken = {each.get("id") for each in tree.get(part) or []}
    return next(name for n in range(1, 10_000) if (name := f"{prefix}{n}") not in taken)


def in_order(tree: Tree) -> Tree:
    """A tree with its fields in the order of the table, empty groups and lists left out."""
    found: Tree = _ordered(Incident, tree)
    return found


def _ordered(record_class: type, tree: Tree) -> Tree:
    found = {}
    for name, row in table(record_class):
        value = _ordered_value(row, tree.get(name))
        if value is not None:
            found[name] = value
    return found


def _ordered_value(row: Field, value: Any) -> Any:
    if row.of is None:
        return value
    if not isinstance(value, dict | list):
        return None  # a group left empty in a record written by hand
    if isinstance(value, dict):
        return _ordered(row.of, value) or None
    return [_ordered(row.of, each) for each in value] or None


def references_to(tree: Tree, part: str, name: str) -> Iterator[tuple[Tree, str]]:
    """Every field that names one part of a list: its holder and the field's name."""
    yield from _references(Incident, tree, part, name)


def _references(record_class: type, tree: Tree, part: str, name: str) -> Iterator[tuple[Tree, str]]:
    for key, row in table(record_class):
        value = tree.get(key)
        if row.to == part and (value == name or (isinstance(value, list) and name in value)):
            yield tree, key
        elif row.of is not None and isinstance(value, dict):
            yield from _references(row.of, value, part, name)
        elif row.of is not None and isinstance(value, list):
            for each in value:
                yield from _references(row.of, each, part, name)


def drop_part(tree: Tree, part: str, number: int) -> None:
    """Take one part out of a list, and its id out of every field that names it."""
    name = tree[part].pop(number).get("id")
    for holder, key in list(references_to(tree, part, name)):
        kept = [each for each in holder[key] if each != name] if holder[key] != name else []
        if kept:
            holder[key] = kept
        else:
            del holder[key]

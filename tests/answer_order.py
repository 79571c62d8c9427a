"""The safety order of answers, walked over plain record trees."""

import copy
import random
from collections.abc import Iterator
from typing import Any

from random_records import Tree, answer_places

from triage.fields import Field

Step = tuple[int, Any]
"""Number of the place in `answer_places`, and the more adverse answer to put there."""


def more_adverse(tree: Tree) -> list[Step]:
    """Every single change of one answer to a more adverse one; unknown lies in between."""
    found = []
    for number, (holder, name, row) in enumerate(answer_places(tree)):
        found += [(number, value) for value in _worse(row, holder.get(name))]
    return found


def _worse(row: Field, now: Any) -> Iterator[Any]:
    if row.kind == "words":
        yield from _worse_lists(row, list(now) if isinstance(now, list) else [])
        return
    known = isinstance(now, str) and now in row.words
    here = row.order(now) if known else 0
    if here is None or all(order is None for order, _ in row.words.values()):
        return
    if here < 0:
        yield "unknown"
    yield from (word for word, (order, _) in row.words.items() if (order or 0) > here)


def _worse_lists(row: Field, now: list[str]) -> Iterator[list[str]]:
    """One adverse word more, beside or instead of the reassuring one; or nothing known."""
    calm = [each for each in now if (row.words[each][0] or 0) < 0]
    rest = [each for each in now if each not in calm]
    if calm:
        yield rest
    for word, (order, _) in row.words.items():
        if (order or 0) > 0 and word not in now:
            yield [*rest, word]


def apply(tree: Tree, steps: list[Step]) -> Tree:
    """A copy of a tree with the changes made."""
    found = copy.deepcopy(tree)
    places = list(answer_places(found))
    for number, value in steps:
        holder, name, _ = places[number]
        holder[name] = value
    return found


def pick(rng: random.Random, tree: Tree, count: int) -> list[Step]:
    """Some changes at different places, chosen at random."""
    options = more_adverse(tree)
    rng.shuffle(options)
    found: dict[int, Any] = {}
    for number, value in options:
        found.setdefault(number, value)
        if len(found) == count:
            break
    return list(found.items())


def named(tree: Tree, steps: list[Step]) -> str:
    """Changes in words, for the message of a failing test."""
    places = list(answer_places(tree))
    return "; ".join(
        f"{places[n][0].get('id', '')} {places[n][1]}: {places[n][0].get(places[n][1])} -> {value}"
        for n, value in steps
    )

"""Which cautions belong to an outcome, and the words that no text of ours may use."""

import re
from functools import cache

from triage.citation import Citation
from triage.frozen import frozen
from triage.tables import citation, table


@frozen
class Caution:
    """One caution."""

    id: str
    when: str
    text: str
    citation: Citation | None


@cache
def cautions() -> tuple[Caution, ...]:
    """Every caution, in the order of the table."""
    return tuple(
        Caution(r["id"], r["when"], " ".join(r["text"].split()),
                citation(r, r["id"]) if "citation" in r else None)
        for r in table("cautions")["cautions"]
    )  # fmt: skip


def cautions_for(words: frozenset[str]) -> tuple[Caution, ...]:
    """The cautions of an outcome, the general ones first.

    Args:
        words: conditions that hold; "always" is added.
    """
    return tuple(each for each in cautions() if each.when in words | {"always"})


@cache
def never_say() -> tuple[re.Pattern[str], ...]:
    """Patterns, on lower-case text, that no text of this program may match."""
    return tuple(re.compile(each) for each in table("cautions")["never_say"])

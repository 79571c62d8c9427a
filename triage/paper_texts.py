"""The fixed sentences of the papers: one catalogue, which a site extends with its language."""

from collections.abc import Iterator, Mapping
from functools import cache
from typing import Any

from triage.check_table import check_kinds
from triage.errors import BadTable
from triage.questions import every_question, room_defaults
from triage.site import Site
from triage.tables import table


class PaperTexts:
    """The sentences for one site; those its language lacks are printed in English and marked.

    Args:
        site: its language, and the sentences it brings.
    """

    def __init__(self, site: Site):
        """Keep the language and the sentences of a site."""
        self.language = site.file.language or "en"
        self._own = {each.id: each.text for each in site.file.papers if each.text}
        self._foreign = not is_english(self.language)
        self.missing: dict[str, None] = {}  # ids printed in English, in the order of printing

    def __call__(self, name: str, english: str | None = None) -> str:
        """The sentence of an id.

        Args:
            name: its id.
            english: the sentence itself where another table holds it, such as a question.

        Raises:
            BadTable: no such sentence.
        """
        text = catalogue().get(name) if english is None else english
        if text is None:
            raise BadTable(f"data/papers.yaml: no sentence '{name}'")
        if not self._foreign:
            return text
        if name in self._own:
            return str(self._own[name])
        self.missing[name] = None
        return f"[en] {text}"

    def several(self, name: str) -> list[str]:
        """The sentences name.1, name.2 and on, in order."""
        count = 1
        found = []
        while f"{name}.{count}" in catalogue():
            found.append(self(f"{name}.{count}"))
            count += 1
        return found


def is_english(language: str) -> bool:
    """Whether a language tag says English; those sentences are shipped and cannot be reworded."""
    return language.lower().split("-")[0] == "en"


@cache
def sentence_ids() -> frozenset[str]:
    """Every id that a site can bring a sentence for: the catalogue and what other tables hold."""
    asked = [question for _, question in every_question()]
    found = {f"ask.{q.id}" for q in asked}
    found |= {f"option.{q.id}.{o.word}" for q in asked for o in q.options}
    found |= {f"check.{each}" for each in check_kinds()}
    found |= {f"caution.{row['id']}" for row in table("cautions")["cautions"]}
    found |= {f"watch.{n}" for n, _ in enumerate(table("care")["watch_for"], 1)}
    found |= {f"default.{name}" for name in room_defaults()}
    return frozenset(found | set(catalogue()))


@cache
def catalogue() -> Mapping[str, str]:
    """The shipped sentences by id.

    Raises:
        BadTable: a sentence that is no text.
    """
    return dict(_flat(table("papers")["texts"], ""))


def _flat(rows: Any, name: str) -> Iterator[tuple[str, str]]:
    """A tree of sentences as dotted ids; a list counts from 1."""
    if isinstance(rows, list):
        rows = {str(number): each for number, each in enumerate(rows, 1)}
    if isinstance(rows, dict):
        for key, each in rows.items():
            yield from _flat(each, f"{name}.{key}" if name else key)
    elif isinstance(rows, str) and rows:
        yield name, rows
    else:
        raise BadTable(f"data/papers.yaml: '{name}' is no text")

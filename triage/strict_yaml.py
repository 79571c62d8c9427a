"""YAML read strictly: every scalar stays text, and every value keeps its place in the file.

Closed on purpose: the silent readings of `no`, `12:30` and `010`, duplicate keys, anchors,
aliases, tags, keys that are not text, nesting and size without bound, control characters.
"""

import re
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from triage.errors import BadRecord, CannotRead

MOST_BYTES = 1_000_000
MOST_DEPTH = 20
BAD_CHARACTERS = re.compile(
    "[\x00-\x08\x0b\x0c\x0e-\x1f\x7f-\x84\x86-\x9f\ud800-\udfff\ufffe\uffff]"
)
"""Control characters and half characters: no text of a record holds one."""


@dataclass(slots=True)
class Plain:
    """A file as dicts, lists and text, with the place of every value.

    Args:
        name: file name for messages.
        tree: the content.
        places: path such as "checks[1].value" to (line, column), from 1.
    """

    name: str
    tree: Any
    places: dict[str, tuple[int, int]] = field(default_factory=dict)

    def at(self, path: str) -> str:
        """'file:line:column' of a path, or of the nearest part above it."""
        while path and path not in self.places:
            path = path[: max(path.rfind("."), path.rfind("["), 0)]
        line, column = self.places.get(path, (1, 1))
        return f"{self.name}:{line}:{column}"


def read(path: Path) -> Plain:
    """Read a YAML file strictly.

    Raises:
        CannotRead: no such file, a folder, no permission.
        BadRecord: not strict YAML.
    """
    try:
        with path.open("rb") as file:
            data = file.read(MOST_BYTES + 1)
    except OSError as error:
        reason = error.strerror or "cannot be opened"
        raise CannotRead(f"{path}: {reason}; give the path of a YAML file") from None
    if len(data) > MOST_BYTES:
        raise BadRecord([_too_large(str(path))])
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise BadRecord(
            [f"{path}: byte {error.start} is not UTF-8; save the file as UTF-8"]
        ) from None
    return parse(text, str(path))


def _too_large(name: str) -> str:
    return f"{name}: larger than {MOST_BYTES // 1_000_000} MB, so it is not a record"


def parse(text: str, name: str) -> Plain:
    """Parse strict YAML text.

    Raises:
        BadRecord: with the line and column of what was refused.
    """
    import yaml

    if len(text) > MOST_BYTES:
        raise BadRecord([_too_large(name)])
    text = text.removeprefix("\ufeff")
    bad = BAD_CHARACTERS.search(text)
    if bad:
        line = text.count("\n", 0, bad.start()) + 1
        raise BadRecord([f"{name}:{line}: control character U+{ord(bad[0]):04X} is not allowed"])
    loader = getattr(yaml, "CBaseLoader", yaml.BaseLoader)
    try:
        return _Builder(name, yaml.parse(text, Loader=loader)).build()
    except yaml.MarkedYAMLError as error:
        mark = error.problem_mark or error.context_mark
        place = f"{name}:{mark.line + 1}:{mark.column + 1}" if mark else name
        raise BadRecord(
            [f"{place}: not readable as YAML: {error.problem or error.context}"]
        ) from None
    except yaml.YAMLError as error:
        raise BadRecord([f"{name}: not readable as YAML: {str(error).splitlines()[0]}"]) from None


class _Builder:
    """Builds the plain tree from parser events, so that nothing is resolved or expanded."""

    def __init__(self, name: str, events: Any):
        self.plain = Plain(name, {})
        self.events = events

    def build(self) -> Plain:
        import yaml

        documents = 0
        for event in self.events:
            if isinstance(event, yaml.DocumentStartEvent):
                documents += 1
                if documents > 1:
                    self._refuse(event, "a second document; one file holds one record")
                self.plain.tree = self._value(next(self.events), "", 1)
        return self.plain

    def _refuse(self, event: Any, what: str) -> None:
        mark = event.start_mark
        raise BadRecord([f"{self.plain.name}:{mark.line + 1}:{mark.column + 1}: {what}"])

    def _check(self, event: Any, depth: int) -> None:
        if type(event).__name__ == "AliasEvent":
            self._refuse(event, f"alias '*{event.anchor}'; write the value out")
        if event.anchor:
            self._refuse(event, f"anchor '&{event.anchor}'; write the value out")
        if event.tag and event.tag != "!":
            self._refuse(event, f"tag '{event.tag}'; plain values only")
        # An escape such as "\0" in double quotes is a character only after parsing.
        bad = BAD_CHARACTERS.search(getattr(event, "value", ""))
        if bad:
            self._refuse(event, f"control character U+{ord(bad[0]):04X} is not allowed")
        if depth > MOST_DEPTH:
            self._refuse(event, f"nested more than {MOST_DEPTH} deep")

    def _value(self, event: Any, path: str, depth: int) -> Any:
        self._check(event, depth)
        self.plain.places[path] = (event.start_mark.line + 1, event.start_mark.column + 1)
        kind = type(event).__name__
        if kind == "ScalarEvent":
            return event.value
        if kind == "SequenceStartEvent":
            return self._list(path, depth)
        return self._mapping(path, depth)

    def _list(self, path: str, depth: int) -> list[Any]:
        found: list[Any] = []
        while type(event := next(self.events)).__name__ != "SequenceEndEvent":
            found.append(self._value(event, f"{path}[{len(found)}]", depth + 1))
        return found

    def _mapping(self, path: str, depth: int) -> dict[str, Any]:
        found: dict[str, Any] = {}
        while type(event := next(self.events)).__name__ != "MappingEndEvent":
            self._check(event, depth)
            if type(event).__name__ != "ScalarEvent":
                self._refuse(event, "a key that is not text")
            key = event.value
            if key in found:
                self._refuse(event, f"key '{key}' appears twice")
            below = f"{path}.{key}" if path else key
            found[key] = self._value(next(self.events), below, depth + 1)
        return found

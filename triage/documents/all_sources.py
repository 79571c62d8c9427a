"""Every number that the program can print, by table, with its value, its citation, how known."""

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from importlib.resources import files
from typing import Any

from triage.citation import KNOWN, Citation
from triage.errors import BadTable, InvalidValue
from triage.tables import table

GROUPS = {
    "materials": "Static: materials, acts, bodies, thresholds",
    "static_limits": "Static: ignition, immunity, room humidity, words",
    "static_readings": "Static: readings, sizes, marks",
    "body": "Electrical: the body, perception, zones",
    "touch_sources": "Electrical: assumed sources",
    "monitors": "Electrical: line monitors",
    "other_sources": "Other energised sources",
    "limits": "Limits that readings are held against",
    "checks": "Checks",
    "causes": "Causes: priors, reference conditions, physics bounds",
    "findings": "Findings: likelihoods",
    "red_flags": "Red flags",
    "care": "Care of the person",
    "cautions": "Cautions",
    "duties": "Duties",
    "look_back": "Look-back after a defect",
}
"""Tables in the order they are printed, and what each holds; any other follows by its name."""
_SAID = ("text", "name", "action", "what", "rule", "condition", "test", "meaning", "output")
_ASIDE = frozenset({"citation", "source", "place", "known", "note", "cite", "id", "why", "how",
                    "citations", "year", "warning", "example", "examples"})  # fmt: skip
_NUMBER = re.compile(r"[<>≤≥]?\s*[-+−]?[0-9]")


@dataclass(frozen=True, slots=True)
class Row:
    """One row of a table as printed.

    Args:
        group: table. name: path in it. value: numbers with their keys, or what the row says.
        citation: where it comes from.
    """

    group: str
    name: str
    value: str
    citation: Citation

    def text(self) -> str:
        """One line for print."""
        return f"{self.name}: {self.value}. {self.citation.text()}"


def rows(known: str | None = None) -> Iterator[Row]:
    """Every number of every table.

    Args:
        known: only those known in this way; None for all.

    Raises:
        InvalidValue: no such way.
    """
    if known is not None and known not in KNOWN:
        raise InvalidValue(f"'{known}' does not say how a number is known; use {', '.join(KNOWN)}")
    for group in _groups():
        for row in _of(group):
            if known in (None, row.citation.known):
                yield row


def as_lines(known: str | None = None) -> Iterator[str]:
    """Every number under the title of its table."""
    found: dict[str, list[Row]] = {}
    for row in rows(known):
        found.setdefault(row.group, []).append(row)
    for group, those in found.items():
        yield f"{GROUPS.get(group, group)} (data/{group}.yaml, {len(those)})"
        yield from (f"  {row.text()}" for row in those)
    counted = {each: sum(r.citation.known == each for r in rows(known)) for each in KNOWN}
    yield "; ".join(f"{how} {count}" for how, count in counted.items())


def _groups() -> list[str]:
    """Every table there is."""
    data = files("triage") / "data"
    there = {each.name[:-5] for each in data.iterdir() if each.name.endswith(".yaml")}
    return [*(name for name in GROUPS if name in there), *sorted(there - set(GROUPS))]


def _of(group: str) -> Iterator[Row]:
    tree = table(group)
    keyed = {key: _citation(each) for key, each in tree.get("citations", {}).items()}
    for name, value, found in _walk(tree, (), None, keyed):
        if found is None:
            raise BadTable(f"data/{group}.yaml {name}: needs a citation")
        yield Row(group, name, value, found)


def _walk(
    node: Any, path: tuple[str, ...], above: Citation | None, keyed: Mapping[str, Citation]
) -> Iterator[tuple[str, str, Citation | None]]:
    """Name, value and citation of every mapping that holds numbers or cites."""
    if isinstance(node, list):
        for place, each in enumerate(node, 1):
            if isinstance(each, dict | list):
                label = each.get("id", str(place)) if isinstance(each, dict) else str(place)
                yield from _walk(each, (*path, str(label)), above, keyed)
        return
    if not isinstance(node, dict):
        return
    own = _own(node, keyed)
    here = own or above
    if node.get("memory") is True and here is not None:
        here = replace(here, known="memory")
    if numbers := _numbers(node):
        yield _name(path, node), numbers, here
    elif own is not None and (said := _said(node)):
        yield _name(path, node), said, own
    for key, value in node.items():
        if key not in _ASIDE and not key.endswith("_citation") and isinstance(value, dict | list):
            beside = _beside(node, key)
            if beside is not None or (not path and own is not None):
                yield f"{key}, all {len(value)}", "where no other source is named", beside or own
            yield from _walk(value, (*path, key), beside or here, keyed)


def _numbers(node: Mapping[str, Any]) -> str:
    """The numbers that stand in a mapping itself, with their keys and their unit."""
    found = [f"{key.replace('_', ' ')} {_shown(value)}" for key, value in node.items()
             if key not in _ASIDE | {"unit", "sources"} and _is_number(value)]  # fmt: skip
    return ", ".join(found) + (f" ({node['unit']})" if found and node.get("unit") else "")


def _own(node: Mapping[str, Any], keyed: Mapping[str, Citation]) -> Citation | None:
    if isinstance(node.get("citation"), dict):
        return _citation(node["citation"])
    if node.get("cite") in keyed:
        return keyed[node["cite"]]
    return _citation(node) if "source" in node and "known" in node else None


def _beside(node: Mapping[str, Any], key: str) -> Citation | None:
    """One citation may speak for a neighbouring part: sight_citation for sight."""
    for name in (f"{key}_citation", f"{key.removesuffix('s')}_citation",
                 f"{key.rsplit('_', 1)[0]}_citation"):  # fmt: skip
        if name in node:
            return _citation(node[name])
    return None


def _citation(row: Mapping[str, Any]) -> Citation:
    return Citation(str(row["source"]), str(row.get("place") or ""), str(row["known"]))


def _is_number(value: Any) -> bool:
    """A number, a text that starts with one, or a list of such."""
    if isinstance(value, list):
        return bool(value) and all(_is_number(each) for each in value)
    if isinstance(value, bool):
        return False
    return isinstance(value, int | float) or (
        isinstance(value, str) and _NUMBER.match(value) is not None
    )


def _shown(value: Any) -> str:
    if isinstance(value, list):
        return " ".join(_shown(each) for each in value)
    return f"{value:g}" if isinstance(value, float) else str(value)


def _listed(value: Any) -> list[Any]:
    return value if isinstance(value, list) else [value]


def _said(node: Mapping[str, Any]) -> str:
    """What a row says: its main text, or else its first one."""
    texts = [node[key] for key in _SAID if node.get(key)]
    for key, value in node.items():
        if key not in _ASIDE:
            texts += [each for each in _listed(value) if isinstance(each, str)]
    return " ".join(str(texts[0]).split()).rstrip(".") if texts else ""


def _name(path: tuple[str, ...], node: Mapping[str, Any]) -> str:
    """The path in words, with the row's own name where it has one."""
    words = " / ".join(path) or "all"
    named = node.get("text") or node.get("name") or node.get("quantity")
    return f"{words} ({named.replace('_', ' ')})" if isinstance(named, str) else words

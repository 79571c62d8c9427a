"""The figures of data/body.yaml, read once: sections, rows by id, and their citations."""

from functools import cache
from typing import Any

from triage.citation import Citation
from triage.errors import BadTable
from triage.tables import table


@cache
def section(name: str) -> Any:
    """One top section of data/body.yaml as plain lists and mappings.

    Raises:
        BadTable: the file has no such section.
    """
    sections = _sections()
    if name not in sections:
        raise BadTable(f"body.yaml has no section '{name}'; it has {', '.join(sections)}")
    return sections[name]


@cache
def row(name: str, identifier: str) -> dict[str, Any]:
    """The row of a section whose `id` is given.

    Raises:
        BadTable: no row, or more than one row, has that id.
    """
    found = [each for each in section(name) if each["id"] == identifier]
    if len(found) != 1:
        known = ", ".join(str(each["id"]) for each in section(name))
        raise BadTable(f"body.yaml {name}: '{identifier}' must name one row; known: {known}")
    return dict(found[0])


def value(name: str, identifier: str) -> float:
    """The number of a single-value row, in the SI unit the row names.

    >>> value("body", "hazard_floor")
    500.0
    """
    return float(row(name, identifier)["value"])


def cited(name: str, identifier: str) -> Citation:
    """Where the figures of one row come from."""
    return Citation(**row(name, identifier)["citation"])


@cache
def citations() -> tuple[tuple[str, Citation], ...]:
    """Every citation of the file with the name of what it stands for, in file order."""
    return tuple((name, Citation(**found)) for name, found in _cited(_sections(), "body"))


def _cited(node: Any, name: str) -> list[tuple[str, dict[str, str]]]:
    if isinstance(node, list):
        return [pair for each in node for pair in _cited(each, name)]
    if not isinstance(node, dict):
        return []
    label = f"{name}: {node['id']}" if "id" in node else name
    if "contact" in node:
        label = f"{name}: {node['contact']}, {node['moisture']}"
    own = [(label, node["citation"])] if "citation" in node else []
    rest = [(key, each) for key, each in node.items() if key != "citation"]
    return own + [
        pair
        for key, each in rest
        for pair in _cited(each, str(key) if name == "body" and label == name else label)
    ]


@cache
def _sections() -> dict[str, Any]:
    found: dict[str, Any] = table("body")
    return found

"""The shipped tables: read once, and their common digest."""

from collections.abc import Mapping
from functools import cache
from importlib.resources import files
from typing import Any

from triage.canonical import digest
from triage.citation import Citation
from triage.errors import BadTable


@cache
def table(name: str) -> Any:
    """The content of one shipped table, such as "causes".

    Raises:
        BadTable: the file is not readable as YAML.
    """
    import yaml

    loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
    text = (files("triage") / "data" / f"{name}.yaml").read_text("utf-8")
    try:
        return yaml.load(text, Loader=loader)
    except yaml.YAMLError as error:
        raise BadTable(f"data/{name}.yaml: {error}") from None


def citation(row: Mapping[str, Any], where: str) -> Citation:
    """The citation of a row.

    Raises:
        BadTable: the row has none.
    """
    try:
        found = row["citation"]
        return Citation(str(found["source"]), str(found.get("place") or ""), str(found["known"]))
    except (KeyError, TypeError):
        raise BadTable(f"{where}: needs a citation with source, place and known") from None


@cache
def knowledge_digest() -> str:
    """SHA-256 over every shipped table, by name; a changed comment counts as a change too."""
    folder = files("triage") / "data"
    parts = []
    for name in sorted(each.name for each in folder.iterdir() if each.name.endswith(".yaml")):
        content = (folder / name).read_bytes().replace(b"\r\n", b"\n")
        parts.append(f"{name} {digest(content)}\n")
    return digest("".join(parts).encode())

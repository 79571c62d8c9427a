"""The shipped tables: read once, and their common digest.

Experts edit YAML; reading it is slow, so each table is kept beside the compiled Python as JSON,
named after the digest of the YAML it came from. A stale or damaged copy can therefore never speak.
"""

import json
import os
from collections.abc import Mapping
from functools import cache
from pathlib import Path
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
    source = _folder() / f"{name}.yaml"
    data = source.read_bytes()
    copy = _folder() / "__pycache__" / f"{name}.{digest(data)}.json"
    kept = _kept(copy)
    if kept is not None:
        return kept
    found = _parsed(data.decode(), source.name)
    _keep(copy, found)
    return found


def _folder() -> Path:
    return Path(__file__).resolve().parent / "data"


def _parsed(text: str, name: str) -> Any:
    import yaml

    loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
    try:
        found = yaml.load(text, Loader=loader)
    except yaml.YAMLError as error:
        raise BadTable(f"data/{name}: {error}") from None
    # The kept copy must say the same as the YAML: no keys that JSON would turn into text.
    if json.loads(json.dumps(found)) != found:
        raise BadTable(f"data/{name}: keys must be text, and values text, numbers, yes or no")
    return found


def _kept(copy: Path) -> Any:
    """The kept copy, or None where there is none or its own digest does not fit."""
    try:
        seal, _, body = copy.read_text("utf-8").partition("\n")
    except (OSError, UnicodeDecodeError):
        return None
    return json.loads(body) if seal == digest(body.encode()) else None


def _keep(copy: Path, found: Any) -> None:
    """Keep a copy where the place allows it; another process may be doing the same."""
    body = json.dumps(found, ensure_ascii=False)
    part = copy.with_suffix(f".{os.getpid()}.part")
    try:
        copy.parent.mkdir(exist_ok=True)
        for old in copy.parent.glob(f"{copy.name.split('.')[0]}.*.json"):
            old.unlink()
        part.write_text(f"{digest(body.encode())}\n{body}", "utf-8")
        part.replace(copy)
    except OSError:
        return  # a read-only installation reads the YAML every time


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
    parts = []
    for path in sorted(_folder().glob("*.yaml")):
        content = path.read_bytes().replace(b"\r\n", b"\n")
        parts.append(f"{path.name} {digest(content)}\n")
    return digest("".join(parts).encode())

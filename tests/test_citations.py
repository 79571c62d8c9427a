"""Every number that can reach a report says where it comes from and how well that is known."""

from collections.abc import Iterator
from typing import Any

import pytest
from test_tables import NAMES

from triage.citation import KNOWN, Citation
from triage.limits import load_limits
from triage.tables import table

Path = tuple[str, ...]
ORDERING = {"order", "minutes", "perishable", "years", "amount"}
"""Numbers of a row that place it in a list or belong to the row's own cited rule."""
TUNING = {
    "findings": {"tempering", "cap_odds", "wrong_story", "likelihood_noise", "prior_noise"},
    "causes": {"priors", "physics_factor", "static_plausible_above", "residual_at_most"},
}
"""Parts covered by the citation at the head of their file."""


def citations(tree: Any, above: Path = ()) -> Iterator[tuple[Path, dict[str, Any]]]:
    """Every mapping that cites: its own `citation`, one named ..._citation, or source and known."""
    if isinstance(tree, dict):
        if "source" in tree and "known" in tree:
            yield above, tree
        for key, value in tree.items():
            yield from citations(value, (*above, str(key)))
    elif isinstance(tree, list):
        for number, value in enumerate(tree):
            name = value.get("id", number) if isinstance(value, dict) else number
            yield from citations(value, (*above, str(name)))


def numbers(tree: Any, above: Path = ()) -> Iterator[Path]:
    """Every number, and every text that starts with one and a unit, by its path."""
    if isinstance(tree, dict):
        for key, value in tree.items():
            if key not in ("citation", "source", "place", "known", "note") and not key.endswith(
                "_citation"
            ):
                yield from numbers(value, (*above, str(key)))
    elif isinstance(tree, list):
        for number, value in enumerate(tree):
            name = value.get("id", number) if isinstance(value, dict) else number
            yield from numbers(value, (*above, str(name)))
    elif isinstance(tree, int | float) and not isinstance(tree, bool):
        yield above


CITED = [(name, path, row) for name in NAMES for path, row in citations(table(name))]


@pytest.mark.parametrize(
    ("name", "path", "row"), CITED, ids=lambda x: ".".join(x) if isinstance(x, tuple) else ""
)
def test_every_citation_has_a_source_and_says_how_it_is_known(
    name: str, path: Path, row: dict[str, Any]
) -> None:
    found = Citation(str(row["source"]), str(row.get("place") or ""), str(row["known"]))
    assert found.known in KNOWN and found.source


@pytest.mark.parametrize(("name", "path", "row"), [each for each in CITED if each[2]["known"] == "published"],
                         ids=lambda x: ".".join(x) if isinstance(x, tuple) else "")  # fmt: skip
def test_a_published_number_can_be_looked_up_by_its_reader(
    name: str, path: Path, row: dict[str, Any]
) -> None:
    assert len(str(row["source"]).strip()) >= 5
    assert str(row.get("place") or "").strip(), f"data/{name}.yaml {'.'.join(path)}: no place"


@pytest.mark.parametrize("name", NAMES)
def test_every_number_stands_below_a_citation(name: str) -> None:
    tree = table(name)
    cited = {
        path[:-1] if path and path[-1].endswith("citation") else path for path, _ in citations(tree)
    }
    # One citation may speak for a neighbouring part: sight_citation for sight.
    cited |= {
        (*path[:-1], path[-1].removesuffix("_citation")) for path, _ in citations(tree) if path
    }
    cited |= {
        (*path[:-2], path[-1].removesuffix("_citation") + "s")
        for path, _ in citations(tree)
        if len(path) > 1
    }
    bare = [
        path for path in numbers(tree) if not _covered(path, cited) and path[-1] not in ORDERING
    ]
    assert [each for each in bare if not _keyed(tree, each)] == []


def _covered(path: Path, cited: set[Path]) -> bool:
    return any(path[:length] in cited for length in range(len(path) + 1))


def _keyed(tree: Any, path: Path) -> bool:
    """Whether the number's own mapping names a citation of the file's list by `cite`."""
    for length in range(len(path) - 1, 0, -1):
        part = tree
        for step in path[:length]:
            part = part.get(step) if isinstance(part, dict) else None
        if isinstance(part, dict) and part.get("cite") in tree.get("citations", {}):
            return True
    return False


def test_every_key_of_a_citation_is_on_the_list_and_used() -> None:
    tree = table("materials")
    used = set(_keys(tree))
    assert used == set(tree["citations"])


def _keys(tree: Any) -> Iterator[str]:
    if isinstance(tree, dict):
        if "cite" in tree:
            yield tree["cite"]
        for value in tree.values():
            yield from _keys(value)
    elif isinstance(tree, list):
        for value in tree:
            yield from _keys(value)


@pytest.mark.parametrize("limit", load_limits().rows, ids=lambda each: each.id)
def test_a_limit_that_was_not_read_in_print_is_never_shown_without_its_warning(limit) -> None:
    assert bool(limit.warning) == (limit.citation.known != "published" or limit.disputed)
    if limit.warning:
        assert "verify against the edition in force" in limit.warning

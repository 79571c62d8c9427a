"""Imports point one way: a room uses only rooms of earlier rows, in deferred imports too."""

import ast
from collections.abc import Iterator
from pathlib import Path

import pytest

import triage

PACKAGE = Path(triage.__file__).parent
ROWS = [
    {"errors", "frozen", "paths", "visible"},
    {"citation"},
    {"canonical", "clock", "quadrature", "quantity", "strict_yaml"},
    {"bounds", "grid"},
    {"estimate", "fields"},
    {"words"},
    {"incident"},
    {"record", "site"},
    {"tables"},
    {"physics"},
    {"electrical_tables", "knowledge", "limits", "material_rows", "questions", "static_limits"},
    {"materials", "static_readings", "verdict", "walking_file"},
    {"check_table"},
    {"in_force", "paper_texts"},
    {"validity"},
    {"site_check", "involvement", "logs"},
    {"told"},
    {"evidence"},
    {"conditions", "look_back"},
    {"electrical_exposure", "static_exposure"},
    {"electrical_story", "static_consequences"},
    {"electrical_contacts", "reading_guide"},
    {"exposure"},
    {"red_flags", "diagnosis"},
    {"sensitivity", "testimony"},
    {"release_gate"},
    {"disposition"},
    {"care", "cautions", "next_checks"},
    {"assessment"},
    {"controls", "history", "register", "patterns"},
    {"typeset"},
    {"render"},
    {"documents"},
    {"command_input"},
    {"form", "log_command", "paper_commands", "sheet", "verify"},
    {"cli"},
    {"__main__"},
]
RANK = {name: rank for rank, names in enumerate(ROWS) for name in names}
MODULES = [path for path in sorted(PACKAGE.rglob("*.py")) if path != PACKAGE / "__init__.py"]
LIGHT = {"numpy": {"release_gate", "patterns"}, "scipy": {"patterns"}}


def room(parts: tuple[str, ...]) -> str:
    """The room of a module: its file or folder right below the package."""
    return parts[0].removesuffix(".py")


def imported(tree: ast.AST) -> Iterator[tuple[str, ...]]:
    """Dotted parts of everything imported anywhere in a module."""
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            yield from (tuple(each.name.split(".")) for each in node.names)
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, "imports are absolute"
            module = tuple((node.module or "").split("."))
            yield from ((*module, each.name) for each in node.names)


def uses(path: Path) -> Iterator[str]:
    """Rooms of this program that a module imports; of the root only its version is allowed."""
    for parts in imported(ast.parse(path.read_text("utf-8"))):
        if parts[0] == "triage" and parts != ("triage", "__version__"):
            assert len(parts) > 1, "import from the module that defines the name"
            yield room(parts[1:])


def wrong_way(mine: str, theirs: str) -> bool:
    return theirs != mine and not RANK[theirs] < RANK[mine]


def test_no_room_stands_in_two_rows() -> None:
    assert sum(map(len, ROWS)) == len(RANK)


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_imports_point_one_way(path: Path) -> None:
    mine = room(path.relative_to(PACKAGE).parts)
    assert mine in RANK, f"{mine} stands in no row: say where it belongs"
    assert [theirs for theirs in uses(path) if wrong_way(mine, theirs)] == []


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_a_room_that_is_a_folder_holds_no_knot(path: Path) -> None:
    """Inside one folder, too, no two modules need each other."""
    seen: set[Path] = set()
    below = list(_siblings(path))
    while below:
        each = below.pop()
        assert each != path, f"{path.name} needs itself"
        if each not in seen:
            seen.add(each)
            below += _siblings(each)


def _siblings(path: Path) -> Iterator[Path]:
    for parts in imported(ast.parse(path.read_text("utf-8"))):
        if parts[0] == "triage" and len(parts) > 2 and parts[1] == path.parent.name:
            other = path.parent / f"{parts[2]}.py"
            if other.exists():
                yield other


def reached(start: str) -> set[str]:
    """Every room that a room uses, directly or through others."""
    found: set[str] = set()
    below = [start]
    while below:
        mine = below.pop()
        files = [p for p in MODULES if room(p.relative_to(PACKAGE).parts) == mine]
        new = {theirs for path in files for theirs in uses(path)} - found
        found |= new
        below += new
    return found


@pytest.mark.parametrize(("one", "other"), [("red_flags", "diagnosis"), ("diagnosis", "red_flags")])
def test_red_flags_and_scores_never_hear_of_each_other(one: str, other: str) -> None:
    assert other not in reached(one)
    assert {one, other} <= reached("assessment")


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
@pytest.mark.parametrize("library", LIGHT)
def test_heavy_libraries_stay_where_they_pay(path: Path, library: str) -> None:
    parts = {each[0] for each in imported(ast.parse(path.read_text("utf-8")))}
    assert library not in parts or room(path.relative_to(PACKAGE).parts) in LIGHT[library]


@pytest.mark.parametrize(("mine", "theirs"), [("quantity", "estimate"), ("red_flags", "diagnosis"),
                                              ("errors", "citation"), ("physics", "exposure")])  # fmt: skip
def test_an_import_that_points_up_would_be_found(mine: str, theirs: str) -> None:
    assert wrong_way(mine, theirs)


def test_a_deferred_import_and_a_bare_import_of_the_root_would_be_found(tmp_path: Path) -> None:
    module = tmp_path / "errors.py"
    module.write_text("def f():\n    from triage.cli import app\n    import triage.diagnosis\n")
    assert set(uses(module)) == {"cli", "diagnosis"}
    module.write_text("import triage\n")
    with pytest.raises(AssertionError, match="defines the name"):
        list(uses(module))
    module.write_text("from triage import words, __version__\n")
    assert list(uses(module)) == ["words"]

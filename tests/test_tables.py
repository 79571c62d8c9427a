import json
import re
from importlib.resources import files

import pytest
import yaml

from triage.errors import BadTable
from triage.tables import citation, knowledge_digest, table

NAMES = sorted(
    each.name[:-5] for each in (files("triage") / "data").iterdir() if each.name.endswith(".yaml")
)


def text(name: str) -> str:
    return (files("triage") / "data" / f"{name}.yaml").read_text("utf-8")


def mappings(node: yaml.Node):
    if isinstance(node, yaml.MappingNode):
        yield node
    for child in node.value if isinstance(node, yaml.CollectionNode) else ():
        for each in child if isinstance(child, tuple) else (child,):
            yield from mappings(each)


@pytest.mark.parametrize("name", NAMES)
def test_no_row_of_a_table_says_one_thing_twice(name: str) -> None:
    # The safe loader keeps the last of two equal keys without a word.
    for mapping in mappings(yaml.compose(text(name), yaml.CBaseLoader)):
        keys = [key.value for key, _ in mapping.value]
        assert len(keys) == len(set(keys)), f"line {mapping.start_mark.line + 1}"


@pytest.mark.parametrize("name", NAMES)
def test_a_table_has_no_tags(name: str) -> None:
    tags = [
        event.tag
        for event in yaml.parse(text(name), yaml.CBaseLoader)
        if getattr(event, "tag", None)
    ]
    assert set(tags) <= {"!"}


def scalars(tree: object):
    if isinstance(tree, dict):
        for key, value in tree.items():
            yield key
            yield from scalars(value)
    elif isinstance(tree, list):
        for value in tree:
            yield from scalars(value)
    else:
        yield tree


@pytest.mark.parametrize("name", NAMES)
def test_no_cell_of_a_table_was_silently_read_as_something_else(name: str) -> None:
    # YAML 1.1 reads 12:30 as 750, 2026-11-30 as a date, 010 as 8, and no as a truth value.
    read = list(scalars(table(name)))
    assert {type(each) for each in read} <= {str, int, float, bool, type(None)}
    typed = list(scalars(yaml.load(text(name), yaml.CBaseLoader)))
    truths = sum(isinstance(each, bool) for each in read)
    assert truths == sum(each in ("true", "false") for each in typed)
    numbers = [each for each in read if isinstance(each, int) and not isinstance(each, bool)]
    assert len(numbers) <= sum(each.lstrip("-").isdigit() for each in typed)
    assert not [each for each in typed if each.isdigit() and each.startswith("0") and each != "0"]
    # 1e3 without point and sign stays text in YAML 1.1.
    assert not [
        each
        for each in read
        if isinstance(each, str) and re.fullmatch(r"[-+]?[\d.]+[eE][-+]?\d+", each)
    ]


@pytest.mark.parametrize("name", NAMES)
def test_a_kept_copy_as_json_would_be_the_same_table(name: str) -> None:
    assert json.loads(json.dumps(table(name))) == table(name)


def test_a_table_is_read_once() -> None:
    assert table("causes") is table("causes")


def test_a_table_that_does_not_exist_is_an_error() -> None:
    with pytest.raises((BadTable, OSError)):
        table("nowhere")


def test_the_knowledge_digest_is_fixed_while_no_table_changes() -> None:
    assert knowledge_digest() == knowledge_digest()
    assert len(knowledge_digest()) == 64


@pytest.mark.parametrize(
    "row", [{}, {"citation": None}, {"citation": "x"}, {"citation": {"source": "x"}}, {"citation": {"known": "memory"}},
            {"citation": {"source": "", "place": "", "known": "memory"}},
            {"citation": {"source": "x", "place": "", "known": "seen"}}],
)  # fmt: skip
def test_a_row_without_a_whole_citation_is_refused(row: dict) -> None:
    with pytest.raises(BadTable):
        citation(row, "row")


def test_a_citation_is_read_from_its_row() -> None:
    found = citation({"citation": {"source": "x", "place": None, "known": "memory"}}, "row")
    assert (found.source, found.place, found.known) == ("x", "", "memory")

import os
from pathlib import Path

import pytest
import yaml
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import BadRecord, CannotRead, TriageError
from triage.strict_yaml import MOST_BYTES, MOST_DEPTH, parse, read

# Scalars that YAML 1.1 readers turn into something else (PyYAML 6, safe loader: False, True, 750,
# 45045, 8, a date, None, 1000.0, 1000 ...). YAML 1.1, https://yaml.org/type/.
TRAPS = ["no", "No", "off", "yes", "on", "y", "12:30", "12:30:45", "10:5", "010", "08", "0o10", "0x1F",
         "1e3", "1.0e+3", "1_000", "2026-11-30", "2026-11-30 10:12", "~", "null", "5%", "=", "<<", ".inf",
         ".nan", "true", "1.10", "+1", "0b11"]  # fmt: skip


def refusal(text: str) -> str:
    with pytest.raises(BadRecord) as caught:
        parse(text, "f.yaml")
    return str(caught.value)


@pytest.mark.parametrize("typed", TRAPS)
def test_every_scalar_stays_the_text_as_typed(typed: str) -> None:
    assert parse(f"a: {typed}\n", "f").tree == {"a": typed}
    assert parse(f"- {typed}\n", "f").tree == [typed]


@pytest.mark.parametrize("typed", ["no", "12:30", "010", "1", "~", "2026-11-30", "="])
def test_a_key_stays_the_text_as_typed(typed: str) -> None:
    assert parse(f"{typed}: x\n", "f").tree == {typed: "x"}


def test_an_empty_value_is_an_empty_text() -> None:
    assert parse("a:\nb: ''\n", "f").tree == {"a": "", "b": ""}


def test_a_file_without_content_holds_nothing() -> None:
    for text in ("", "\n\n", "# only a remark\n"):
        assert parse(text, "f").tree == {}


def test_a_key_twice_is_refused_with_its_place() -> None:
    assert refusal("a: 1\nb: 2\na: 3\n") == "f.yaml:3:1: key 'a' appears twice"
    assert "appears twice" in refusal("x:\n- {a: 1, 'a': 2}\n")


@pytest.mark.parametrize(
    ("text", "what"),
    [
        ("a: &x 1\n", "anchor '&x'"),
        ("a: &x [1]\n", "anchor '&x'"),
        ("&x a: 1\n", "anchor '&x'"),
        ("a: &x 1\nb: *x\n", "anchor '&x'"),
        ("a: *x\n", "alias '*x'"),
        ("*x : 1\n", "alias '*x'"),
        ("a: !!int 5\n", "tag"),
        ("a: !!python/object/apply:os.system ['true']\n", "tag"),
        ("a: !own 5\n", "tag"),
        ("!!map {a: 1}\n", "tag"),
        ("a: !!binary aGk=\n", "tag"),
        ("[a]: 1\n", "a key that is not text"),
        ("? {a: 1}\n: 2\n", "a key that is not text"),
        ("a: 1\n---\nb: 2\n", "a second document"),
    ],
)
def test_what_plain_text_does_not_need_is_refused(text: str, what: str) -> None:
    assert what in refusal(text)


def test_a_bomb_of_aliases_is_refused_before_it_grows() -> None:
    lines = ["a0: &a0 [x, x, x, x, x, x, x, x, x]"]
    lines += [f"a{n}: &a{n} [{', '.join([f'*a{n - 1}'] * 9)}]" for n in range(1, 9)]
    assert "anchor" in refusal("\n".join(lines))


def test_merge_keys_merge_nothing() -> None:
    assert parse("<<: {a: 1}\nb: 2\n", "f").tree == {"<<": {"a": "1"}, "b": "2"}


@pytest.mark.parametrize("opened", ["[", "{a: ", "- "])
def test_nesting_has_a_bound(opened: str) -> None:
    closed = {"[": "]", "{a: ": "}", "- ": ""}[opened]
    deepest = opened * (MOST_DEPTH - 1) + "x" + closed * (MOST_DEPTH - 1)
    assert parse(deepest, "f").tree
    assert f"nested more than {MOST_DEPTH} deep" in refusal(
        opened * MOST_DEPTH + "x" + closed * MOST_DEPTH
    )
    assert "nest" in refusal(opened * 30_000)


def test_size_has_a_bound_from_file_and_from_text(tmp_path: Path) -> None:
    large = tmp_path / "large.yaml"
    large.write_bytes(b"a: " + b"x" * MOST_BYTES)
    with pytest.raises(BadRecord, match="larger than 1 MB"):
        read(large)
    assert "larger than 1 MB" in refusal("a: " + "x" * MOST_BYTES)
    largest = "a: " + "x" * (MOST_BYTES - 3)
    large.write_text(largest)
    assert read(large).tree == parse(largest, "f").tree


CONTROLS = [chr(n) for n in (*range(0x00, 0x09), 0x0B, 0x0C, *range(0x0E, 0x20), 0x7F, 0x80, 0x9F)]


@pytest.mark.parametrize(
    "bad", [*CONTROLS, "\ufffe", "\uffff", "\ud800", "\udfff"], ids=lambda c: f"U+{ord(c):04X}"
)
def test_control_characters_and_half_characters_are_refused_with_their_line(bad: str) -> None:
    assert (
        refusal(f"a: 1\nb: x{bad}y\n")
        == f"f.yaml:2: control character U+{ord(bad):04X} is not allowed"
    )


@pytest.mark.parametrize(
    "escape",
    ["\\0", "\\x00", "\\a", "\\b", "\\e", "\\x1b", "\\u0007", "\\x7f", "\\ufffe", "\\ud800"],
)
def test_an_escape_cannot_smuggle_a_control_character_in(escape: str) -> None:
    assert "f.yaml:" in refusal(f'a: "x{escape}y"\n')
    assert "f.yaml:" in refusal(f'"x{escape}y": a\n')


def test_harmless_escapes_and_line_breaks_stay() -> None:
    assert parse('a: "x\\ty\\n\\u00b5 \\U0001F600"\n', "f").tree == {"a": "x\ty\n\u00b5 \U0001f600"}
    assert parse("a: |\n  one\n  two\n", "f").tree == {"a": "one\ntwo\n"}
    assert parse("a: 1\r\nb: 2\r\n", "f").tree == {"a": "1", "b": "2"}


def test_a_byte_order_mark_at_the_start_is_no_part_of_the_text(tmp_path: Path) -> None:
    marked = tmp_path / "bom.yaml"
    marked.write_bytes(b"\xef\xbb\xbfa: 1\n")
    assert read(marked).tree == parse("\ufeffa: 1\n", "f").tree == {"a": "1"}


@pytest.mark.parametrize(
    "data", [b"a: \xff\n", "a: 1\n".encode("utf-16"), b"a: \xed\xa0\x80\n", b"a: \xc0\x80\n"]
)
def test_bytes_that_are_not_utf_8_are_refused(data: bytes, tmp_path: Path) -> None:
    other = tmp_path / "other.yaml"
    other.write_bytes(data)
    with pytest.raises(BadRecord):
        read(other)


def test_a_file_that_cannot_be_opened_is_one_clear_error(tmp_path: Path) -> None:
    for path in (tmp_path / "none.yaml", tmp_path):
        with pytest.raises(CannotRead, match="give the path of a YAML file"):
            read(path)


@pytest.mark.skipif(os.geteuid() == 0, reason="root may read everything")
def test_a_file_without_permission_is_one_clear_error(tmp_path: Path) -> None:
    locked = tmp_path / "locked.yaml"
    locked.write_text("a: 1\n")
    locked.chmod(0)
    with pytest.raises(CannotRead, match="Permission denied"):
        read(locked)


def test_every_value_knows_its_line_and_column() -> None:
    plain = parse("schema: 1\nreadings:\n- value: 5\n- at: x\n  value: 6 mA\n", "f.yaml")
    assert plain.at("readings[1].value") == "f.yaml:5:10"
    assert plain.at("readings[1].missing") == "f.yaml:4:3"
    assert plain.at("elsewhere") == "f.yaml:1:1"


@pytest.mark.parametrize(
    "text", ["a: [1\n", "a: b: c\n", "a: 'x\n", "\ta: 1\n", "a: 1\n b: 2\n", "%YAML 9\n", "a: @x\n"]
)
def test_what_is_not_yaml_is_refused_with_its_place(text: str) -> None:
    assert refusal(text).startswith("f.yaml:") and "not readable as YAML" in refusal(text)


@pytest.mark.parametrize("loader", [yaml.BaseLoader, yaml.CBaseLoader])
def test_both_parsers_of_the_library_give_the_same_tree(loader, monkeypatch) -> None:
    monkeypatch.setattr(yaml, "CBaseLoader", loader)
    assert parse("a: no\nb: [010, {c: 12:30}]\n", "f").tree == {
        "a": "no",
        "b": ["010", {"c": "12:30"}],
    }


PIECES = st.sampled_from(
    ["a", ": ", "\n", "- ", "[", "]", "{", "}", "'", '"', "\\", "&x", "*x", "!t", "|", ">", "#", "%",
     "@", "`", "? ", "\t", "  ", "---", "...", ",", "\x85", "\u2028", "\ufeff", "\\x00", "1", "~"],
)  # fmt: skip


@given(st.one_of(st.text(max_size=80), st.lists(PIECES, max_size=40).map("".join)))
def test_any_text_gives_a_tree_of_text_or_a_deliberate_error(text: str) -> None:
    try:
        tree = parse(text, "f").tree
    except TriageError:
        return
    assert _only_text(tree)


@given(st.binary(max_size=60))
def test_any_bytes_give_a_tree_or_a_deliberate_error(tmp_path_factory, data: bytes) -> None:
    path = tmp_path_factory.getbasetemp() / "any.yaml"
    path.write_bytes(data)
    try:
        assert _only_text(read(path).tree)
    except TriageError as error:
        assert "any.yaml" in str(error)


def _only_text(tree: object) -> bool:
    if isinstance(tree, dict):
        return all(isinstance(key, str) and _only_text(value) for key, value in tree.items())
    return all(map(_only_text, tree)) if isinstance(tree, list) else isinstance(tree, str)

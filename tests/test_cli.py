"""The command line: exit statuses, one message for bad input and never a traceback, whole files."""

import io
import json
import os
import random
import re
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest
from printed_texts import EXAMPLES, RAW, SITE
from pypdf import PdfReader
from sample_records import text, tree

from triage import cli

ROOT = EXAMPLES.parent
HELD = str(EXAMPLES / "incidents" / "clinic-sparse-report.yaml")
SEVERE = str(EXAMPLES / "incidents" / "ward5-static-story-failed-earth.yaml")
BOMB = "a: &a [x, x]\nb: &b [*a, *a]\nc: [*b, *b, *b]\n"


def run(*words: str, cwd: Path = ROOT, **env: str) -> subprocess.CompletedProcess[str]:
    """The program in a process of its own."""
    return subprocess.run(
        [sys.executable, "-m", "triage", *words], cwd=cwd, capture_output=True, text=True,
        env=os.environ | {"PYTHONPATH": str(ROOT)} | env, timeout=120,
    )  # fmt: skip


@pytest.fixture
def call(monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]):
    """The program in this process: words to (status, output, messages)."""

    def called(*words: str) -> tuple[int, str, str]:
        monkeypatch.setattr(sys, "argv", ["triage", *words])
        try:
            cli.main()
            status = 0
        except SystemExit as ended:
            status = int(ended.code or 0)
        out, err = capsys.readouterr()
        return status, out, err

    return called


@pytest.fixture
def good(tmp_path: Path) -> str:
    """A record without any severe disposition."""
    path = tmp_path / "good.yaml"
    path.write_text(text(tree()), "utf-8")
    return str(path)


# --- one process of its own for each way out ------------------------------------------------------


@pytest.mark.parametrize(
    ("words", "status"),
    [
        (("--version",), 0),
        (("--help",), 0),
        (("fields",), 0),
        (("assess", HELD), 0),
        (("assess", SEVERE, "--why"), 3),
        (("check", SEVERE), 0),
        (("assess", "no-such-file.yaml"), 1),
        (("assess",), 2),
        (("report", HELD), 2),
        (("assess", HELD, "--loud"), 2),
        (("dance",), 2),
    ],
    ids=lambda each: " ".join(Path(w).stem for w in each) if isinstance(each, tuple) else "",
)
def test_each_way_out_has_its_exit_status(words: tuple[str, ...], status: int) -> None:
    done = run(*words)

    assert done.returncode == status
    assert "Traceback" not in done.stderr
    assert done.stdout or done.stderr


def test_a_terminal_that_knows_no_greek_still_gets_every_line() -> None:
    done = run("assess", "--why", SEVERE, PYTHONIOENCODING="ascii")
    data = run("assess", "--json", SEVERE, PYTHONIOENCODING="ascii")

    assert (done.returncode, data.returncode) == (3, 3)
    assert "CAUTIONS" in done.stdout and done.stderr == ""
    assert json.loads(data.stdout)


# --- status of several files ----------------------------------------------------------------------


@pytest.mark.parametrize(
    ("names", "status"),
    [
        (("held",), 0),
        (("severe",), 3),
        (("held", "severe"), 3),
        (("severe", "missing"), 1),
        (("missing", "held"), 1),
        (("missing", "severe", "held"), 1),
    ],
)
def test_bad_input_wins_over_a_severe_disposition_and_that_over_done(
    call, names: tuple[str, ...], status: int
) -> None:
    files = {"held": HELD, "severe": SEVERE, "missing": "no-such-file.yaml"}

    found, out, err = call("assess", *(files[name] for name in names))

    assert found == status
    assert out.count("RANKED CAUSES") == len([n for n in names if n != "missing"])
    assert ("no-such-file.yaml" in err) == ("missing" in names)


def test_several_records_are_one_list_of_data_in_the_order_given(call) -> None:
    status, out, _ = call("assess", "--json", SEVERE, HELD)

    found = json.loads(out)
    assert status == 3
    assert len(found) == 2 and found[0]["headline"] in ("withdraw", "isolate")
    assert found[1]["headline"] == "hold"


# --- bad input ------------------------------------------------------------------------------------


def _bad(folder: Path, name: str) -> Path:
    """A file that is no record, by name."""
    path = folder / f"{name}.yaml"
    contents = {
        "empty": b"", "binary": bytes(range(256)) * 8, "zeros": b"\0" * 100,
        "two megabytes": b"a: x\n" * 400_000, "bomb": BOMB.encode(),
        "deep": b"[" * 5000, "list": b"- a\n- b\n", "scalar": b"hello\n", "tag": b"!!python/name:os\n",
        "utf-16": "schema: 1".encode("utf-16"), "surrogate": b"schema: '\xed\xa0\x80'\n",
        "duplicate": b"schema: 1\nschema: 1\n", "no id": b"schema: 1\n", "open quote": b'a: "x\n',
        "other schema": b"schema: 99\nid: 0123456789abcdef0123456789abcdef\n",
    }  # fmt: skip
    if name == "folder":
        path.mkdir()
    elif name == "dangling link":
        path.symlink_to(folder / "nowhere")
    elif name != "missing":
        path.write_bytes(contents[name])
    return path


BAD = ["missing", "folder", "dangling link", "empty", "binary", "zeros", "two megabytes", "bomb",
       "deep", "list", "scalar", "tag", "utf-16", "surrogate", "duplicate", "no id", "open quote",
       "other schema"]  # fmt: skip


@pytest.mark.parametrize("command", ["assess", "check"])
@pytest.mark.parametrize("name", BAD)
def test_a_file_that_is_no_record_is_a_message_with_place_and_status_one(
    call, tmp_path: Path, name: str, command: str
) -> None:
    path = _bad(tmp_path, name)

    status, out, err = call(command, str(path))

    lines = err.splitlines()
    assert status == 1 and out.strip() == ""
    assert lines and all(line.startswith(f"triage: {path}") for line in lines)
    assert all(len(line) > len(f"triage: {path}: ") + 10 for line in lines)
    assert "Traceback" not in err and RAW.findall(err) == []


@pytest.mark.parametrize("name", [name for name in BAD if name != "no id"])
def test_a_site_file_that_is_none_stops_before_any_record(call, tmp_path: Path, name: str) -> None:
    path = _bad(tmp_path, name)

    status, out, err = call("assess", HELD, "--site", str(path))

    assert status == 1 and out == ""
    assert err.startswith(f"triage: {path}") and "Traceback" not in err


@pytest.mark.parametrize(
    ("line", "named"),
    [("zone: Mars/Phobos", "Mars/Phobos"), ("policy: {miss_ratio: 2}", "miss_ratio"),
     ("editions: [{check: touch_current, edition: never-printed}]", "never-printed")],
)  # fmt: skip
def test_a_faulty_site_file_is_told_with_what_is_wrong(call, tmp_path, line, named) -> None:
    path = tmp_path / "site.yaml"
    path.write_text(f"schema: 1\n{line}\n", "utf-8")

    status, out, err = call("assess", HELD, "--site", str(path))

    assert (status, out) == (1, "")
    assert named in err and err.startswith(f"triage: {path}")


def test_every_fault_of_a_record_is_told_at_once_with_line_and_column(call, tmp_path) -> None:
    path = tmp_path / "bad.yaml"
    path.write_text(
        "schema: 1\nid: nonsense\nevent: {at: yesterday}\nitems: [{id: a, kind: spoon}]\n"
    )

    status, _, err = call("check", str(path))

    assert status == 1
    assert len(err.splitlines()) >= 2
    assert all(
        re.match(rf"triage: {re.escape(str(path))}:\d+:\d+ \S+: ", x) for x in err.splitlines()
    )


def test_a_name_that_could_act_on_the_terminal_is_shown_as_its_code(call, tmp_path: Path) -> None:
    path = tmp_path / "a\u202eb\x1b[31m.yaml"
    path.write_text(text(tree()), "utf-8")

    _, out, err = call("check", str(path), str(tmp_path / "no\x07\u2066.yaml"))

    assert "[U+202E]" in out and "[U+001B]" in out and "[U+2066]" in err
    assert RAW.findall(out + err) == []


# --- the same in words and as data ----------------------------------------------------------------


@pytest.mark.parametrize("file", [HELD, SEVERE], ids=["held", "severe"])
def test_the_data_hold_what_the_text_says(call, file: str) -> None:
    _, words, _ = call("assess", file, "--site", str(SITE))
    _, out, _ = call("assess", "--json", file, "--site", str(SITE))

    (found,) = json.loads(out)
    flat = " ".join(words.split())
    said = [*found["person"]["actions"], *found["person"]["reviews"], *found["unknown"],
            *found["questions"], *found["cautions"], *(d["text"] for d in found["defects"])]  # fmt: skip
    assert [each for each in said if " ".join(each.split()) not in flat] == []
    assert found["case"] in flat and found["condition"] in flat
    places = [flat.find(f"({item['item']}): ") for item in found["items"]]
    assert -1 not in places


def test_a_character_that_could_act_stays_in_the_data_but_only_as_an_escape(call, tmp_path) -> None:
    record = tree()
    record["persons"][0]["role"] = "nurse \u202e\u200b end"
    path = tmp_path / "x.yaml"
    path.write_text(text(record), "utf-8")

    _, out, _ = call("assess", "--json", str(path))

    assert RAW.findall(out) == []
    assert json.loads(out)[0]["person"]["reviews"] == ["Nurse \u202e\u200b end: not known."]


def test_the_reasons_are_printed_only_when_asked_for(call) -> None:
    _, plain, _ = call("assess", SEVERE)
    _, why, _ = call("assess", SEVERE, "--why")

    assert why.startswith(plain.rstrip("\n"))
    assert "NUMBERS AND THEIR SOURCES" in why and "NUMBERS AND THEIR SOURCES" not in plain


# --- writing a report -----------------------------------------------------------------------------


@pytest.fixture(scope="module")
def report_bytes(tmp_path_factory: pytest.TempPathFactory) -> bytes:
    """One page-one report, written by a process of its own."""
    target = tmp_path_factory.mktemp("made") / "r.pdf"
    assert run("report", SEVERE, "-o", str(target), "--page-one").returncode == 3
    return target.read_bytes()


def test_a_report_is_written_and_named_and_the_same_bytes_twice(
    call, tmp_path: Path, report_bytes: bytes
) -> None:
    target = tmp_path / "deep" / "folder" / "r.pdf"

    status, out, err = call("report", SEVERE, "-o", str(target), "--page-one")

    assert (status, out.strip(), err) == (3, str(target), "")
    assert target.read_bytes() == report_bytes
    assert [each.name for each in target.parent.iterdir()] == ["r.pdf"]


def test_a_report_replaces_an_earlier_file_whole(call, tmp_path: Path, report_bytes: bytes) -> None:
    target = tmp_path / "r.pdf"
    target.write_bytes(b"x" * 3_000_000)

    call("report", SEVERE, "-o", str(target), "--page-one")

    assert target.read_bytes() == report_bytes


def test_several_reports_go_to_a_folder_by_the_names_of_their_records(call, tmp_path) -> None:
    out_folder = tmp_path / "out"

    status, out, err = call(
        "report", HELD, SEVERE, "missing.yaml", "-o", str(out_folder), "--page-one"
    )

    assert status == 1 and "missing.yaml" in err
    assert {each.name for each in out_folder.iterdir()} == {
        "clinic-sparse-report.pdf", "ward5-static-story-failed-earth.pdf"
    }  # fmt: skip
    assert len(out.splitlines()) == 2


def test_one_file_for_two_records_is_wrong_use(call, tmp_path: Path) -> None:
    status, _, err = call("report", HELD, SEVERE, "-o", str(tmp_path / "x.pdf"))

    assert status == 2 and "folder" in err
    assert list(tmp_path.iterdir()) == []


def test_two_records_of_one_name_never_write_over_each_other(call, tmp_path: Path) -> None:
    for name in ("a", "b"):
        (tmp_path / name).mkdir()
        (tmp_path / name / "x.yaml").write_text(text(tree()), "utf-8")

    status, _, err = call("report", str(tmp_path / "a" / "x.yaml"), str(tmp_path / "b" / "x.yaml"),
                          "-o", str(tmp_path / "out"))  # fmt: skip

    assert status == 2 and "same file name" in err
    assert not (tmp_path / "out").exists()


@pytest.mark.parametrize("place", ["below a file", "a folder", "no device"])
def test_a_place_that_cannot_be_written_is_one_message_and_nothing_left(
    call, tmp_path: Path, place: str
) -> None:
    (tmp_path / "file").write_text("kept")
    (tmp_path / "folder.pdf").mkdir()
    target = {"below a file": tmp_path / "file" / "x.pdf", "a folder": tmp_path / "folder.pdf",
              "no device": Path("/proc/none/x.pdf")}[place]  # fmt: skip

    status, out, err = call("report", HELD, "-o", str(target), "--page-one")

    assert (status, out) == (1, "")
    assert err.startswith(f"triage: {target}: ") and err.strip().endswith(
        "name another place with -o"
    )
    assert {each.name for each in tmp_path.iterdir()} == {"file", "folder.pdf"}
    assert (tmp_path / "file").read_text() == "kept"


def test_a_report_of_bad_input_writes_nothing(call, tmp_path: Path) -> None:
    status, _, _ = call("report", "missing.yaml", "-o", str(tmp_path / "x.pdf"))

    assert status == 1 and list(tmp_path.iterdir()) == []


def test_a_file_withheld_from_others_by_the_user_is_withheld(call, tmp_path: Path) -> None:
    before = os.umask(0o077)
    try:
        call("report", HELD, "-o", str(tmp_path / "x.pdf"), "--page-one")
    finally:
        os.umask(before)

    assert (tmp_path / "x.pdf").stat().st_mode & 0o777 == 0o600


def test_a_report_that_is_killed_leaves_the_earlier_file_or_a_whole_one(
    tmp_path: Path, report_bytes: bytes
) -> None:
    target, rng, ends = tmp_path / "r.pdf", random.Random(7), set()
    began = time.monotonic()
    run("report", SEVERE, "-o", str(target), "--page-one")
    whole = time.monotonic() - began
    words = [sys.executable, "-m", "triage", "report", SEVERE, "-o", str(target), "--page-one"]
    for _ in range(20):
        target.write_bytes(b"earlier")
        started = subprocess.Popen(words, cwd=ROOT, stdout=subprocess.DEVNULL,
                                   stderr=subprocess.DEVNULL)  # fmt: skip
        try:
            started.wait(timeout=rng.uniform(0.3, 1.1) * whole)
        except subprocess.TimeoutExpired:
            started.send_signal(signal.SIGKILL)
            started.wait()
        found = target.read_bytes()
        ends.add(found == report_bytes)
        assert found in (b"earlier", report_bytes)

    assert False in ends
    assert all(each.name.startswith(".") for each in tmp_path.iterdir() if each != target)


def test_two_reports_to_one_file_at_once_leave_a_whole_one(tmp_path: Path) -> None:
    target = tmp_path / "r.pdf"
    words = [sys.executable, "-m", "triage", "report", "-o", str(target), "--page-one"]
    for _ in range(3):
        both = [subprocess.Popen([*words, file], cwd=ROOT, stdout=subprocess.DEVNULL)
                for file in (HELD, SEVERE)]  # fmt: skip
        assert [each.wait(timeout=60) for each in both] == [0, 3]
        text_layer = PdfReader(io.BytesIO(target.read_bytes())).pages[0].extract_text()
        assert "Cautions" in text_layer

    assert [each.name for each in tmp_path.iterdir()] == ["r.pdf"]


# --- a blank record -------------------------------------------------------------------------------


def test_a_blank_record_is_readable_held_and_reported_with_every_section(call, tmp_path) -> None:
    path, target = tmp_path / "new.yaml", tmp_path / "new.pdf"

    assert call("blank", str(path))[0] == 0
    assert call("check", str(path))[:2] == (0, f"{path}: readable, case {_case(path)}\n")
    status, out, err = call("assess", str(path), "--why")
    assert (status, err) == (0, "")
    for head in ("PERSON", "DISPOSITION", "DEFECTS FOUND", "RANKED CAUSES OF THE SENSATION",
                 "ESTIMATES", "NOT KNOWN", "NEXT CHECKS", "CAUTIONS", "WEIGHTS", "RED FLAGS",
                 "NUMBERS AND THEIR SOURCES"):  # fmt: skip
        assert f"\n{head}" in out
    assert "Hold: the room." in out
    assert json.loads(call("assess", str(path), "--json")[1])[0]["room"]["disposition"] == "hold"
    assert call("report", str(path), "-o", str(target))[0] == 0
    pages = [page.extract_text() for page in PdfReader(target).pages]
    assert "Hold: the room." in pages[0] and "Signatures" in "\n".join(pages)


def _case(path: Path) -> str:
    found = re.search(r"^case: (\S+)$", path.read_text("utf-8"), re.MULTILINE)
    assert found
    return found[1]


def test_a_blank_record_never_overwrites(call, tmp_path: Path) -> None:
    path = tmp_path / "new.yaml"
    path.write_text("mine")

    status, out, err = call("blank", str(path))

    assert (status, out) == (1, "") and "new file" in err and path.read_text() == "mine"


@pytest.mark.parametrize("place", ["no/such/folder/new.yaml", "."])
def test_a_blank_record_to_an_impossible_place_is_a_message(call, tmp_path, place: str) -> None:
    status, _, err = call("blank", str(tmp_path / place))

    assert status == 1 and err.startswith("triage: ") and "Traceback" not in err


def test_two_blank_records_have_ids_of_their_own(call, tmp_path: Path) -> None:
    call("blank", str(tmp_path / "a.yaml"))
    call("blank", str(tmp_path / "b.yaml"))

    assert _case(tmp_path / "a.yaml") != _case(tmp_path / "b.yaml")

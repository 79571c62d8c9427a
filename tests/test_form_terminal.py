"""The form as it is used: a terminal of 80 columns, a pipe, a file; killed, handed over, gone on with."""

import fcntl
import os
import pty
import re
import select
import signal
import struct
import subprocess
import sys
import termios
import time
from pathlib import Path

import pytest
from form_answers import MAINS, STATIC
from form_walk import NOW, fresh, walked
from wording_rules import power_off_imperatives

from triage.errors import CannotWrite, InvalidValue
from triage.form import draft
from triage.form.lines import Lines
from triage.form.open_form import Opening, open_form
from triage.record import load
from triage.site import load as load_site
from triage.site import no_site

SITE = Path(__file__).parent.parent / "examples" / "site.yaml"
BY = "clinical engineer"
DISPOSITION = "WHAT TO DO NOW"


def command(path: Path, *more: str) -> list[str]:
    return [sys.executable, "-m", "triage", "record", str(path), "--by", BY, *more]


def begun(path: Path) -> Path:
    """A draft with a fixed id, so that two forms can be compared byte for byte."""
    draft.save(path, fresh(), complete=False)
    return path


class Screen:
    """A pseudo-terminal of 80 columns and 24 rows with a program in it."""

    def __init__(self, argv: list[str]):
        self.pid, self.fd = pty.fork()
        if self.pid == 0:
            os.environ["TERM"] = "dumb"
            os.execv(argv[0], argv)
        fcntl.ioctl(self.fd, termios.TIOCSWINSZ, struct.pack("HHHH", 24, 80, 0, 0))
        self.seen = ""

    def until(self, text: str, timeout: float = 60) -> str:
        """Everything printed since the last call, up to a text or the end."""
        start, end = len(self.seen), time.monotonic() + timeout
        while text not in self.seen[start:] and time.monotonic() < end:
            if select.select([self.fd], [], [], 0.1)[0]:
                try:
                    new = os.read(self.fd, 65536)
                except OSError:
                    break
                if not new:
                    break
                self.seen += new.decode().replace("\r\n", "\n")
        return self.seen[start:]

    def type(self, line: str) -> None:
        os.write(self.fd, line.encode() + b"\n")

    def end(self) -> int:
        self.until("\0")
        os.close(self.fd)
        return os.waitstatus_to_exitcode(os.waitpid(self.pid, 0)[1])


@pytest.mark.parametrize("typed", [STATIC, MAINS], ids=["static", "isolated-alarm"])
def test_on_80_columns_what_to_do_stands_after_eight_answers_and_300_words(
    tmp_path: Path, monkeypatch, typed: list[str]
) -> None:
    monkeypatch.chdir(tmp_path)
    monkeypatch.setenv("PYTHONPATH", str(SITE.parent.parent))
    screen = Screen(command(Path("a.yaml")))
    answers = 0
    screen.until("> ")
    while DISPOSITION not in screen.seen:
        screen.type(typed[answers])
        answers += 1
        screen.until("> ")
    screen.type("q")
    assert screen.end() in (0, 3)
    read = screen.seen[: screen.seen.index("THE PERSON")]
    assert answers <= 8
    assert sum(any(map(str.isalpha, each)) for each in read.split()) <= 300
    assert max(len(line) for line in screen.seen.splitlines()) <= 80
    assert power_off_imperatives(read.partition(DISPOSITION)[2]) == []


def test_no_redraw_no_colour_and_no_cursor_movement_is_sent(tmp_path: Path) -> None:
    screen = Screen(command(tmp_path / "a.yaml"))
    for typed in [*STATIC[:9], "q"]:
        screen.until("> ")
        screen.type(typed)
    screen.end()
    assert not re.search(r"[\x1b\x08\r]", screen.seen)


def test_terminal_pipe_and_file_of_answers_give_the_same_bytes(tmp_path: Path) -> None:
    typed, piped, filed = (begun(tmp_path / f"{name}.yaml") for name in ("a", "b", "c"))
    screen = Screen(command(typed))
    for each in STATIC:
        screen.until("> ")
        screen.type(each)
    assert screen.end() == 0
    lines = tmp_path / "answers.txt"
    lines.write_text("\n".join(STATIC))
    subprocess.run(command(piped), input=lines.read_bytes(), check=True, capture_output=True)
    subprocess.run(command(filed, "--answers", str(lines)), check=True, capture_output=True)
    assert typed.read_bytes() == piped.read_bytes() == filed.read_bytes()
    assert typed.read_text() == draft.written(walked_by(STATIC))


def walked_by(typed: list[str]):
    """The tree after these answers, with the role that chose the words as the form notes it."""
    tree = walked(fresh(), typed, no_site()).tree
    tree["statements"][0]["mapped_by"] = BY
    return tree


def test_killed_after_every_single_answer_nothing_is_lost(tmp_path: Path) -> None:
    path = begun(tmp_path / "a.yaml")
    for number, typed in enumerate(STATIC[:-1], 1):
        child = subprocess.Popen(command(path), stdin=subprocess.PIPE, stdout=subprocess.PIPE)
        child.stdin.write(typed.encode() + b"\n")
        child.stdin.flush()
        seen = b""
        while b"\n  = " not in seen:
            new = os.read(child.stdout.fileno(), 65536)
            assert new, f"left at answer {number}: {seen.decode()}"
            seen += new
        child.send_signal(signal.SIGKILL)
        child.wait()
        child.stdin.close()
        child.stdout.close()
        state, complete, _ = draft.load(path)
        assert not complete
        if number % 10 == 0:
            assert (
                state.tree["persons"] == walked(fresh(), STATIC[:number], no_site()).tree["persons"]
            )
    subprocess.run(command(path), input=STATIC[-1].encode(), check=True, capture_output=True)
    assert path.read_text() == draft.written(walked_by(STATIC))


def filled(path: Path, typed: list[str], *, by: str | None = BY, site=None, talks=False) -> bool:
    lines = Lines(iter(typed), talks)
    return open_form(path, Opening(site or no_site(), lines, by, lambda: NOW, lambda: "0" * 32))


def test_a_red_flag_is_said_at_once_and_again_at_the_end(tmp_path: Path, capsys) -> None:
    filled(tmp_path / "a.yaml", MAINS, site=load_site(SITE))
    seen = capsys.readouterr().out
    flag = "Isolation monitor in alarm"
    assert seen.index(flag) < seen.index("What was changed since?")
    assert seen.rindex(flag) > seen.index("COMPLETE")


def test_the_record_says_which_values_the_site_file_brought(tmp_path: Path) -> None:
    filled(tmp_path / "a.yaml", MAINS, site=load_site(SITE))
    said = " ".join(each.what or "" for each in load(tmp_path / "a.yaml").incident.entries)
    assert "values of room or-6 in the site file, confirmed" in said
    assert "supply.voltage" in said and "surroundings.floor" in said
    assert "supply.current_reading" not in said


def test_a_colleague_takes_over_and_the_record_says_so(tmp_path: Path, capsys) -> None:
    filled(tmp_path / "a.yaml", STATIC[:20])
    filled(tmp_path / "a.yaml", STATIC[20:], by="night technician")
    assert "Taken over from: clinical engineer." in capsys.readouterr().out
    entries = load(tmp_path / "a.yaml").incident.entries
    assert [(each.by, each.what) for each in entries] == [
        (BY, "record begun with the form"),
        ("night technician", "taken over from clinical engineer"),
    ]


def test_the_same_person_going_on_leaves_no_trace(tmp_path: Path) -> None:
    filled(tmp_path / "a.yaml", STATIC[:20])
    filled(tmp_path / "a.yaml", STATIC[20:])
    filled(tmp_path / "b.yaml", STATIC)
    assert (tmp_path / "a.yaml").read_bytes() == (tmp_path / "b.yaml").read_bytes()


CHECK = ["check", "visual inspection", "item1", "full length look", "u", "yes", "as found",
         "unplugged", "pass", "clinical engineer", "now"]  # fmt: skip


def test_a_finished_record_takes_a_check_and_says_who_added_it(tmp_path: Path) -> None:
    path = tmp_path / "a.yaml"
    filled(path, STATIC)
    filled(path, [*CHECK, "nothing"], by="biomedical technician")
    incident = load(path).incident
    assert [each.kind for each in incident.checks] == ["visual_inspection"]
    assert (incident.entries[-1].by, incident.entries[-1].what) == (
        "biomedical technician", "added k1")  # fmt: skip
    assert not path.read_text().startswith("# form:")


def test_facts_found_later_are_asked_for_without_the_known_ones(tmp_path: Path, capsys) -> None:
    path = tmp_path / "a.yaml"
    short = ["u" if each == "24 %" else each for each in STATIC]
    short = [e for n, e in enumerate(short) if n not in (22, 23)]
    filled(path, [e for e in short if e != "occupied"])
    capsys.readouterr()
    filled(path, ["later", "31 %", "at place", "2026-01-14 11:00", "occupied"])
    assert "Who was affected?" not in capsys.readouterr().out
    assert load(path).incident.surroundings.humidity.value == 31


def test_comments_at_the_top_of_a_record_stay(tmp_path: Path) -> None:
    path = tmp_path / "a.yaml"
    filled(path, STATIC)
    path.write_text("# Kept with the ward file.\n" + path.read_text())
    filled(path, [*CHECK, "nothing"])
    assert path.read_text().startswith("# Kept with the ward file.\n")


def test_an_empty_record_of_the_program_is_filled_in(tmp_path: Path) -> None:
    from triage.documents.field_guide import blank_record

    path = tmp_path / "a.yaml"
    path.write_text(blank_record("1" * 32))
    filled(path, STATIC[:7])
    incident = load(path).incident
    assert incident.items[0].kind == "furniture_fixed"
    assert (incident.recorded_by, incident.recorded_at.text) == (BY, NOW.text)


def test_help_back_and_the_assessment_change_nothing(tmp_path: Path, capsys) -> None:
    plain, asking = tmp_path / "a.yaml", tmp_path / "b.yaml"
    filled(plain, STATIC)
    typed = [x for each in STATIC for x in ("?", "!", each)]
    filled(asking, [*typed[:90], "<", "!!", typed[89], *typed[90:]])
    assert plain.read_bytes() == asking.read_bytes()
    assert DISPOSITION in capsys.readouterr().out


def test_a_doubtful_value_counts_only_when_it_is_given_again(tmp_path: Path, capsys) -> None:
    upto = MAINS[: MAINS.index("1.4 mA")]
    site = load_site(SITE)
    filled(tmp_path / "a.yaml", [*upto, "0.12 A", "1.2 mA"], site=site)
    assert "was 120 µA meant?" in " ".join(capsys.readouterr().out.split())
    assert load(tmp_path / "a.yaml").incident.supply.current_reading.text == "1.2 mA"
    filled(tmp_path / "b.yaml", [*upto, "0.12 A", "0.12 A"], site=site)
    assert load(tmp_path / "b.yaml").incident.supply.current_reading.text == "0.12 A"


def test_a_wrong_answer_is_asked_again_at_a_terminal_and_stops_a_pipe(
    tmp_path: Path, capsys
) -> None:
    filled(tmp_path / "a.yaml", ["purple", "nobody"], talks=True)
    assert "'purple' is not one of them" in capsys.readouterr().out
    found = subprocess.run(
        command(tmp_path / "b.yaml"), input=b"nobody\npurple\n", capture_output=True
    )
    assert found.returncode == 1
    assert b"'purple'" in found.stderr
    assert load(tmp_path / "b.yaml").incident.persons[0].signs == ("none",)


def test_a_second_form_is_refused_politely_and_the_first_goes_on(tmp_path: Path) -> None:
    path = begun(tmp_path / "a.yaml")
    first = subprocess.Popen(command(path), stdin=subprocess.PIPE, stdout=subprocess.PIPE)
    os.read(first.stdout.fileno(), 10)
    second = subprocess.run(command(path), input=b"burn\n", capture_output=True)
    assert second.returncode == 1
    assert b"open in the form of another (clinical engineer)" in second.stderr
    first.communicate(b"nobody\n")
    assert load(path).incident.persons[0].signs == ("none",)
    assert sorted(each.name for each in tmp_path.iterdir()) == ["a.yaml"]


def test_a_severe_disposition_shows_in_the_exit_status(tmp_path: Path) -> None:
    found = subprocess.run(command(tmp_path / "a.yaml"), input=b"fainted\n", capture_output=True)
    assert found.returncode == 3


def test_without_a_file_a_new_one_is_named_after_the_case(tmp_path: Path) -> None:
    argv = [sys.executable, "-m", "triage", "record"]
    env = {**os.environ, "PYTHONPATH": str(SITE.parent.parent)}
    subprocess.run(argv, input=b"nobody\n", cwd=tmp_path, env=env, check=True, capture_output=True)
    (made,) = tmp_path.iterdir()
    assert made.stem == load(made).case


@pytest.mark.parametrize("name", [".", "folder", "missing/a.yaml"])
def test_a_place_that_cannot_hold_a_draft_is_refused_in_a_sentence(
    tmp_path: Path, monkeypatch, name: str
) -> None:
    (tmp_path / "folder").mkdir()
    monkeypatch.chdir(tmp_path)
    with pytest.raises(CannotWrite, match="name a file"):
        filled(Path(name), STATIC)


@pytest.mark.parametrize("by", ["x" * 81, "half \ud800", "bell\x07"])
def test_a_role_that_no_record_could_hold_is_refused_before_anything_is_written(
    tmp_path: Path, by: str
) -> None:
    with pytest.raises(InvalidValue):
        filled(tmp_path / "a.yaml", STATIC, by=by)
    assert list(tmp_path.iterdir()) == []


def test_bytes_that_are_no_text_stop_a_pipe_with_a_sentence(tmp_path: Path) -> None:
    found = subprocess.run(
        command(tmp_path / "a.yaml"), input=b"nobody\n\xff\n", capture_output=True
    )
    assert found.returncode == 1
    assert b"Traceback" not in found.stderr
    assert load(tmp_path / "a.yaml").incident.persons[0].signs == ("none",)

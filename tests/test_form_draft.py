"""The draft on disk: old or new, never a part; for one writer at a time; open to a group."""

import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest
from form_answers import STATIC
from form_walk import NOW, fresh, walked

from triage.errors import BadRecord, CannotWrite
from triage.form.draft import load, only_writer, save, written
from triage.form.lines import Lines
from triage.form.open_form import Opening, open_form
from triage.form.state import State
from triage.site import no_site

WRITER = """
import sys
from pathlib import Path
sys.path.insert(0, sys.argv[2])
from form_walk import fresh
from triage.form.draft import save
state = fresh()
print("ready", flush=True)
for number in range(100000):
    state.tree["place"] = {"position": (f"{number} " * 90)[:199]}
    save(Path(sys.argv[1]), state, complete=number % 2 == 0)
"""


@pytest.mark.parametrize("moment", range(6))
def test_killed_in_the_middle_of_writing_the_file_is_old_or_new(
    tmp_path: Path, moment: int
) -> None:
    path = tmp_path / "a.yaml"
    save(path, fresh(), complete=False)
    argv = [sys.executable, "-c", WRITER, str(path), str(Path(__file__).parent)]
    child = subprocess.Popen(argv, stdout=subprocess.PIPE)
    child.stdout.readline()
    time.sleep(0.013 * moment)
    child.send_signal(signal.SIGKILL)
    child.wait()
    child.stdout.close()
    state, _, _ = load(path)
    assert state.tree["id"] == "0" * 32


def test_a_full_disk_leaves_the_answers_saved_before(tmp_path: Path, monkeypatch) -> None:
    path = tmp_path / "a.yaml"
    save(path, fresh(), complete=False)
    before = path.read_bytes()

    def full(_: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(CannotWrite, match="No space left"):
        save(path, walked(fresh(), STATIC, no_site()), complete=True)
    assert path.read_bytes() == before
    assert [each.name for each in tmp_path.iterdir()] == ["a.yaml"]


def test_marks_come_back_and_a_complete_record_has_none(tmp_path: Path) -> None:
    path = tmp_path / "a.yaml"
    state = walked(fresh(), STATIC[:12], no_site())
    save(path, state, complete=False)
    assert load(path) == (state, False, "")
    save(path, state, complete=True)
    assert load(path) == (State(state.tree, {}), True, "")
    assert path.read_text() == written(state.tree)


@pytest.mark.parametrize("line", ["# form: {", "# form: []", '# form: {"a": 1}'])
def test_a_spoiled_mark_is_named_and_nothing_is_guessed(tmp_path: Path, line: str) -> None:
    path = tmp_path / "a.yaml"
    path.write_text(f"{line}\n{written(fresh().tree)}")
    with pytest.raises(BadRecord, match="the form's own line was changed"):
        load(path)


def test_a_draft_can_be_read_by_the_group_and_not_by_all(tmp_path: Path) -> None:
    path = tmp_path / "a.yaml"
    save(path, fresh(), complete=False)
    assert path.stat().st_mode & 0o777 == 0o660


def test_a_second_writer_is_refused_with_the_role_of_the_first(tmp_path: Path) -> None:
    path = tmp_path / "a.yaml"
    with only_writer(path, "ward technician"):
        with pytest.raises(CannotWrite, match="ward technician"), only_writer(path, "x"):
            pass
    with only_writer(path, "x"):
        assert path.with_name(".a.yaml.lock").exists()
    assert list(tmp_path.iterdir()) == []


def test_a_lock_left_by_a_killed_form_holds_nobody_up(tmp_path: Path) -> None:
    path = tmp_path / "a.yaml"
    path.with_name(".a.yaml.lock").write_text("somebody")
    with only_writer(path, "x"):
        assert path.with_name(".a.yaml.lock").read_text() == "x"


def as_user(uid: int, gid: int, path: Path, typed: list[str], by: str) -> int:
    """Fill in some answers as another user of the operating system; the exit status."""
    pid = os.fork()
    if pid == 0:
        status = 1
        try:
            os.setgroups([gid])
            os.setgid(uid)
            os.setuid(uid)
            os.umask(0o077)
            lines = Lines(iter(typed), talks=False)
            open_form(path, Opening(no_site(), lines, by, lambda: NOW, lambda: "0" * 32))
            status = 0
        finally:
            os._exit(status)
    return os.waitstatus_to_exitcode(os.waitpid(pid, 0)[1])


@pytest.mark.skipif(os.geteuid() != 0, reason="only root can act as two users")
def test_two_users_of_one_group_hand_a_draft_over(tmp_path_factory, capfd) -> None:
    import tempfile

    with tempfile.TemporaryDirectory() as above:
        os.chmod(above, 0o755)
        folder = Path(above) / "shared"
        folder.mkdir()
        os.chown(folder, 0, 30100)
        folder.chmod(0o2770)
        # Everything the form imports on its way is loaded here; the users may not see this checkout.
        open_form(folder / "x.yaml", Opening(no_site(), Lines(iter(STATIC), False)))
        path = folder / "a.yaml"
        assert as_user(30001, 30100, path, STATIC[:20], "day technician") == 0
        assert as_user(30002, 30100, path, STATIC[20:], "night technician") == 0
        state, complete, _ = load(path)
        assert complete
        assert state.tree["entries"][-1]["what"] == "taken over from day technician"

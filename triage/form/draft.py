"""The draft on disk: whole after every answer, one writer at a time, open to a group.

The file is a valid record at every moment. While the form is not complete its first line carries,
as a comment, the marks that no field holds; a record without that line is complete.
"""

import fcntl
import json
import os
import re
from collections.abc import Iterator
from contextlib import contextmanager, suppress
from pathlib import Path
from typing import Any

from triage.errors import BadRecord, CannotRead, CannotWrite
from triage.form.state import State, in_order
from triage.record import from_plain
from triage.strict_yaml import read

_MARK = "# form: "
_GROUP = 0o660
"""Readable and writable for the group, so that a colleague can take the draft over; not for all."""


def written(tree: Any) -> str:
    """The one way the form writes a record: fields in the order of the table, texts as typed.

    >>> print(written({"id": "0" * 32, "schema": "1"}), end="")
    schema: '1'
    id: '00000000000000000000000000000000'
    """
    import yaml

    dumper = getattr(yaml, "CSafeDumper", yaml.SafeDumper)
    return str(
        yaml.dump(
            _unshared(in_order(tree)), Dumper=dumper, sort_keys=False, allow_unicode=True, width=100
        )
    )


def _unshared(tree: Any) -> Any:
    """A tree without any part in two places: a record knows no aliases."""
    if isinstance(tree, dict):
        return {key: _unshared(value) for key, value in tree.items()}
    return [_unshared(each) for each in tree] if isinstance(tree, list) else tree


def save(path: Path, state: State, *, complete: bool, head: str = "") -> None:
    """Write the draft so that any stop leaves the old file or the new one, never a part.

    Args:
        head: comment lines that stood at the top and stay there.
        complete: leave the marks out.

    Raises:
        CannotWrite: the folder or the disk does not allow it.
    """
    mark = "" if complete else f"{_MARK}{json.dumps(state.marks, sort_keys=True)}\n"
    part = path.with_name(f".{path.name}.part")
    try:
        part.unlink(missing_ok=True)  # left by a form that was killed
        _write(part, (mark + head + written(state.tree)).encode())
        if path.exists():
            _same_owner(path, part)
        part.replace(path)
        _sync(path.parent)
    except OSError as error:
        with suppress(OSError):
            part.unlink(missing_ok=True)
        reason = error.strerror or "cannot be written"
        raise CannotWrite(f"{path}: {reason}; the last saved answers are kept") from None


def _write(part: Path, data: bytes) -> None:
    with part.open("wb") as file:
        os.fchmod(file.fileno(), _GROUP)
        file.write(data)
        file.flush()
        os.fsync(file.fileno())


def _same_owner(path: Path, part: Path) -> None:
    """Keep mode and group of the file that is replaced, as far as this user may."""
    old = path.stat()
    try:
        os.chown(part, -1, old.st_gid)
        part.chmod(old.st_mode & 0o777)
    except OSError:
        return  # the draft of another user: it stays readable for the group


def _sync(folder: Path) -> None:
    opened = os.open(folder, os.O_RDONLY | os.O_DIRECTORY)
    try:
        os.fsync(opened)
    finally:
        os.close(opened)


def load(path: Path) -> tuple[State, bool, str]:
    """A draft or a finished record.

    Returns:
        The state, whether it is complete, and the comment lines at its top.

    Raises:
        CannotRead: it cannot be opened.
        BadRecord: it is not a valid record; every fault with its place.
    """
    plain = read(path)
    from_plain(plain)
    try:
        lines = path.read_text("utf-8-sig").splitlines()
    except OSError as error:
        raise CannotRead(f"{path}: {error.strerror}") from None
    head = []
    for line in lines:
        if not re.match(r"#|\s*$", line):
            break
        head.append(line)
    marks = _marks(str(path), [each for each in head if each.startswith(_MARK)])
    kept = "".join(f"{each}\n" for each in head if not each.startswith(_MARK))
    return State(in_order(plain.tree), marks or {}), marks is None, kept


def _marks(name: str, found: list[str]) -> dict[str, str] | None:
    if not found:
        return None
    try:
        marks = json.loads(found[0][len(_MARK) :])
    except ValueError:
        marks = None
    sound = isinstance(marks, dict) and all(isinstance(v, str) for v in marks.values())
    if not sound:
        raise BadRecord([f"{name}:1:1 the form's own line was changed; take it out to go on"])
    return dict(marks)


@contextmanager
def only_writer(path: Path, who: str) -> Iterator[None]:
    """Hold a draft for one form; a second one is refused politely.

    Args:
        path: the draft. who: role to show to whoever comes second.

    Raises:
        CannotWrite: another form has it, or the folder does not allow a lock.
    """
    lock = path.with_name(f".{path.name}.lock")
    opened = _locked(lock, path)
    try:
        os.ftruncate(opened, 0)
        os.pwrite(opened, who.encode(), 0)
        yield
    finally:
        lock.unlink(missing_ok=True)
        os.close(opened)


def _locked(lock: Path, path: Path) -> int:
    while True:
        try:
            opened = os.open(lock, os.O_RDWR | os.O_CREAT, _GROUP)
        except OSError as error:
            raise CannotWrite(
                f"{path}: {error.strerror}; name a file in a folder of yours"
            ) from None
        try:
            fcntl.flock(opened, fcntl.LOCK_EX | fcntl.LOCK_NB)
            if _is_at(opened, lock):
                if os.fstat(opened).st_uid == os.geteuid():
                    os.fchmod(opened, _GROUP)
                return opened
            os.close(opened)  # the other form left between the two steps
        except BlockingIOError:
            who = os.pread(opened, 80, 0).decode("utf-8", "replace") or "a colleague"
            os.close(opened)
            raise CannotWrite(
                f"{path}: open in the form of another ({who}); that form is left with q, then go on"
            ) from None


def _is_at(opened: int, lock: Path) -> bool:
    """Whether an open file is still the one of that name."""
    try:
        return os.fstat(opened).st_ino == lock.stat().st_ino
    except FileNotFoundError:
        return False

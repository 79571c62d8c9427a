"""A document reaches its place whole or not at all."""

import os
import tempfile
from pathlib import Path

from triage.errors import CannotWrite


def write_whole(target: Path, content: bytes) -> None:
    """Write a file so that it is there whole or not at all.

    Args:
        target: the file; folders above it are made.
        content: its bytes.

    Raises:
        CannotWrite: the place cannot be written.
    """
    try:
        target.parent.mkdir(parents=True, exist_ok=True)
        handle, name = tempfile.mkstemp(dir=target.parent, prefix=".", suffix=".part")
        try:
            with os.fdopen(handle, "wb") as file:
                file.write(content)
                file.flush()
                os.fsync(file.fileno())
            os.chmod(name, 0o666 & ~_umask())
            os.replace(name, target)
        finally:
            Path(name).unlink(missing_ok=True)  # gone already where it took its place
    except OSError as error:
        reason = error.strerror or "cannot be written"
        raise CannotWrite(f"{target}: {reason}; name another place with -o") from None


def _umask() -> int:
    """What the user withholds from new files; it can only be read by setting it."""
    mask = os.umask(0o077)
    os.umask(mask)
    return mask

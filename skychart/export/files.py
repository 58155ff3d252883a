"""Single files: written whole or not at all, and read back from libraries that only write to a path."""

import os
import tempfile
from collections.abc import Callable
from contextlib import suppress
from pathlib import Path

from skychart.errors import OutputError


def check_writable(path: Path) -> None:
    """Raise OutputError unless a file may be written to `path`; ask before a long computation."""
    if path.is_dir():
        raise OutputError(f"cannot write {path}: a folder of that name is in the way")
    if not path.absolute().parent.is_dir():
        raise OutputError(f"cannot write {path}: there is no folder {path.absolute().parent}")
    if not os.access(path.absolute().parent, os.W_OK | os.X_OK):
        raise OutputError(f"cannot write {path}: no permission to write in {path.absolute().parent}")


def write_whole(path: Path, data: bytes) -> None:
    """Write `data` to `path`, in place of a file that stood there, in one step. Raises OutputError.

    Stopped half way, it leaves the former file as it was. A link stays one, and the file it names is replaced.
    """
    target = path.resolve()
    fresh = target.with_name(f".{target.name}.skychart-new")
    try:
        try:
            fresh.write_bytes(data)
            fresh.replace(target)
        finally:
            with suppress(OSError):
                fresh.unlink(missing_ok=True)
    except OSError as error:
        raise OutputError(f"cannot write {path}: {error.strerror or error}") from None


def bytes_written(write: Callable[[str], object], suffix: str) -> bytes:
    """What `write` puts into the file whose path it is given, for libraries that know no other way."""
    with tempfile.TemporaryDirectory(prefix="skychart-") as folder:
        path = Path(folder, f"file{suffix}")
        write(str(path))
        return path.read_bytes()

"""Put a finished site in place of the former one, whole or not at all.

Everything is written to a hidden folder beside the target first; then the two folders change places. However
a build ends (error, Ctrl-C, kill), the target is either the complete former site or the complete new one.

A marker file lists what was written. A folder without the marker, or one that holds anything the marker does
not list, is never replaced: it may be somebody's work.

Source for the exchange of two folders in one step: Linux manual page renameat2(2), flag RENAME_EXCHANGE.
"""

import os
import shutil
import sys
from collections.abc import Iterator, Mapping
from contextlib import contextmanager, suppress
from pathlib import Path, PurePosixPath

from skychart.errors import InputError, OutputError

MARKER = ".skychart-site"
_MARKER_TITLE = "Written by skychart, which replaces this folder as a whole. Its files:"
_LITTER = frozenset({".DS_Store", "Thumbs.db", "desktop.ini"})  # file managers leave these behind
_AT_FDCWD = -100
_RENAME_EXCHANGE = 2


def swap_in(files: Mapping[str, bytes], out: Path) -> None:
    """Make `out` a folder of exactly `files` and the marker, replacing the site that stood there.

    `files`: content by path relative to `out`, with forward slashes ("molecular/sun+02.html").
    Modes follow the user's umask. Two writers in one parent folder wait for each other.

    Raises OutputError, with the former site untouched, if `out` may not be replaced (see `check_replaceable`)
    or the file system refuses; InputError if a path would lie outside `out`.
    """
    _check_names(files)
    with _replaceable(out) as target:
        fresh = target.with_name(f".{target.name}.skychart-new")
        shutil.rmtree(fresh, ignore_errors=True)
        try:
            _write_all({**files, MARKER: _marker_text(files)}, fresh)
            _put_in_place(fresh, target)
        finally:
            shutil.rmtree(fresh, ignore_errors=True)


def check_replaceable(out: Path) -> None:
    """Raise OutputError unless a site may be written to `out`, links followed; ask before a long computation.

    Accepted: a name that is free in an existing, writable folder; an empty folder; a folder this module wrote
    and nobody added to.
    """
    with _replaceable(out):
        pass


@contextmanager
def _replaceable(out: Path) -> Iterator[Path]:
    """The folder that `out` means, found replaceable and kept from other writers for as long as the block runs.

    It is looked at under the lock: a marker read before another writer's exchange would not list what stands there
    after it.
    """
    try:
        target = out.resolve()
        if not target.parent.is_dir():
            raise OutputError(f"cannot write {out}: there is no folder {target.parent}")
        if not os.access(target.parent, os.W_OK | os.X_OK):
            raise OutputError(f"cannot write {out}: no permission to write in {target.parent}")
        with _only_writer(target.parent):
            if target.exists():
                _check_ours(target, out)
            yield target
    except (OSError, RuntimeError) as error:
        raise OutputError(f"cannot write {out}: {getattr(error, 'strerror', None) or error}") from error


def _check_ours(target: Path, out: Path) -> None:
    if not target.is_dir():
        raise OutputError(f"cannot write {out}: a file of that name is in the way")
    if target.is_mount():
        raise OutputError(f"cannot write {out}: a mount point cannot be replaced; choose a folder inside it")
    if not any(target.iterdir()):
        return
    listed = _listed_files(target / MARKER)
    if listed is None:
        raise OutputError(f"will not replace {out}: skychart did not make it; choose another folder")
    found = (path for path in target.rglob("*") if not _is_plain_folder(path))
    added = sorted({path.relative_to(target).as_posix() for path in found if path.name not in _LITTER} - listed)
    if added:
        names = added[0] if len(added) == 1 else f"{added[0]} and {len(added) - 1} more"
        raise OutputError(f"will not replace {out}: skychart did not write {names} in it; move it away first")


def _is_plain_folder(path: Path) -> bool:
    return path.is_dir() and not path.is_symlink()


def _listed_files(marker: Path) -> set[str] | None:
    try:
        lines = marker.read_text(encoding="utf-8").splitlines()
    except (FileNotFoundError, UnicodeDecodeError, IsADirectoryError):
        return None
    return {MARKER, *lines[1:]} if lines[:1] == [_MARKER_TITLE] else None


def _marker_text(files: Mapping[str, bytes]) -> bytes:
    return "".join(f"{line}\n" for line in (_MARKER_TITLE, *sorted(files))).encode("utf-8")


def _check_names(names: Mapping[str, bytes]) -> None:
    for name in names:
        path = PurePosixPath(name)
        inside = not path.is_absolute() and ".." not in path.parts and str(path) == name
        if not inside or name in (".", MARKER) or "\n" in name:
            raise InputError(f"file name is {name!r}, accepted is a plain relative path like 'molecular/sun+02.html'")


def _write_all(files: Mapping[str, bytes], folder: Path) -> None:
    folder.mkdir()
    for name in sorted(files):
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_bytes(files[name])


def _put_in_place(fresh: Path, target: Path) -> None:
    """Afterwards `target` is the new folder; `fresh` is the former one or is gone."""
    if not target.exists():
        fresh.rename(target)
    elif not _exchange(fresh, target):
        _exchange_by_three_renames(fresh, target)


def _exchange(first: Path, second: Path) -> bool:
    """Let two folders change names in one step; False where the system or the file system cannot."""
    if not sys.platform.startswith("linux"):
        return False
    import ctypes

    libc = ctypes.CDLL(None)
    if not hasattr(libc, "renameat2"):
        return False
    names = os.fsencode(first), os.fsencode(second)
    return libc.renameat2(_AT_FDCWD, names[0], _AT_FDCWD, names[1], _RENAME_EXCHANGE) == 0


def _exchange_by_three_renames(fresh: Path, target: Path) -> None:
    """As `_exchange`, for systems without it: a kill between the first two leaves the site as `former`."""
    former = target.with_name(f".{target.name}.skychart-former")
    shutil.rmtree(former, ignore_errors=True)
    try:
        target.rename(former)
        fresh.rename(target)
    except BaseException:
        if not target.exists():
            former.rename(target)
        raise
    former.rename(fresh)


@contextmanager
def _only_writer(folder: Path) -> Iterator[None]:
    """Hold an advisory lock on `folder`; the system frees it even if the process is killed."""
    try:
        import fcntl
    except ImportError:  # no such locks on this system: two builds at once are then the user's own affair
        yield
        return
    handle = os.open(folder, os.O_RDONLY)
    try:
        with suppress(OSError):  # some network file systems have none
            fcntl.flock(handle, fcntl.LOCK_EX)
        yield
    finally:
        os.close(handle)

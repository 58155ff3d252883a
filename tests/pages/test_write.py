"""The writer leaves the former site or the new one, never a mixture, and never somebody else's folder."""

import errno
import os
import signal
import stat
import subprocess
import sys
import textwrap
import threading
from collections.abc import Callable
from pathlib import Path

import pytest

from skychart.errors import InputError, OutputError
from skychart.pages import write
from skychart.pages.write import MARKER, check_replaceable, swap_in

FORMER = {"index.html": b"former", "molecular/sun+02.html": b"former sheet", "gone.txt": b"former only"}
NEW = {"index.html": b"new", "molecular/sun+02.html": b"new sheet", "static/skychart.css": b""}


def contents(folder: Path) -> dict[str, bytes]:
    """Every file under `folder` except the marker, by relative path."""
    files = [path for path in folder.rglob("*") if path.is_file() and path.name != MARKER]
    return {path.relative_to(folder).as_posix(): path.read_bytes() for path in files}


def names_in(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir())


@pytest.fixture
def site(tmp_path: Path) -> Path:
    """A former site, alone in its parent folder."""
    out = tmp_path / "site"
    swap_in(FORMER, out)
    return out


def test_a_first_site_holds_exactly_the_files_and_the_marker(tmp_path: Path) -> None:
    swap_in(NEW, tmp_path / "site")
    assert contents(tmp_path / "site") == NEW
    assert names_in(tmp_path) == ["site"]
    assert MARKER in names_in(tmp_path / "site")


def test_a_second_site_replaces_the_first_as_a_whole(site: Path) -> None:
    swap_in(NEW, site)
    assert contents(site) == NEW
    assert names_in(site.parent) == ["site"]


def test_two_writes_of_the_same_files_give_the_same_bytes(tmp_path: Path) -> None:
    swap_in(NEW, tmp_path / "one")
    swap_in(dict(reversed(NEW.items())), tmp_path / "two")
    assert (tmp_path / "one" / MARKER).read_bytes() == (tmp_path / "two" / MARKER).read_bytes()
    assert contents(tmp_path / "one") == contents(tmp_path / "two")


def test_an_empty_folder_is_filled(tmp_path: Path) -> None:
    (tmp_path / "site").mkdir()
    swap_in(NEW, tmp_path / "site")
    assert contents(tmp_path / "site") == NEW


def test_a_link_to_a_site_stays_a_link_and_its_target_is_replaced(site: Path) -> None:
    link = site.with_name("link")
    link.symlink_to(site, target_is_directory=True)
    swap_in(NEW, link)
    assert link.is_symlink()
    assert contents(site) == NEW


def test_modes_follow_the_umask(tmp_path: Path) -> None:
    former_umask = os.umask(0o027)
    try:
        swap_in(NEW, tmp_path / "site")
    finally:
        os.umask(former_umask)
    assert stat.S_IMODE((tmp_path / "site").stat().st_mode) == 0o750
    assert stat.S_IMODE((tmp_path / "site" / "molecular").stat().st_mode) == 0o750
    assert stat.S_IMODE((tmp_path / "site" / "index.html").stat().st_mode) == 0o640


def test_a_folder_of_somebody_else_is_refused_and_untouched(tmp_path: Path) -> None:
    foreign = tmp_path / "thesis"
    foreign.mkdir()
    (foreign / "chapter1.txt").write_text("years of work")
    with pytest.raises(OutputError, match=r"will not replace .*thesis: skychart did not make it"):
        swap_in(NEW, foreign)
    assert contents(foreign) == {"chapter1.txt": b"years of work"}
    assert names_in(tmp_path) == ["thesis"]


@pytest.mark.parametrize("marker", [b"", b"something else\n", b"\xff\xfe"])
def test_a_marker_that_skychart_did_not_write_does_not_open_the_door(tmp_path: Path, marker: bytes) -> None:
    folder = tmp_path / "site"
    folder.mkdir()
    (folder / MARKER).write_bytes(marker)
    with pytest.raises(OutputError, match="skychart did not make it"):
        swap_in(NEW, folder)


def test_a_site_that_the_user_added_to_is_refused_naming_the_file(site: Path) -> None:
    (site / "molecular" / "notes.txt").write_text("mine")
    (site / "zz.txt").write_text("mine too")
    with pytest.raises(OutputError, match=r"did not write molecular/notes\.txt and 1 more in it"):
        swap_in(NEW, site)
    assert (site / "index.html").read_bytes() == b"former"


def test_a_link_that_the_user_put_into_a_site_counts_as_added(site: Path, tmp_path: Path) -> None:
    (site / "more").symlink_to(tmp_path, target_is_directory=True)
    with pytest.raises(OutputError, match="did not write more in it"):
        check_replaceable(site)


def test_the_litter_of_file_managers_does_not_count_as_added(site: Path) -> None:
    (site / ".DS_Store").write_bytes(b"")
    swap_in(NEW, site)
    assert contents(site) == NEW


def test_a_file_in_the_way_is_refused(tmp_path: Path) -> None:
    (tmp_path / "site").write_text("a file")
    with pytest.raises(OutputError, match="a file of that name is in the way"):
        swap_in(NEW, tmp_path / "site")
    assert (tmp_path / "site").read_text() == "a file"


@pytest.mark.parametrize("parent", ["absent", "file"])
def test_a_parent_that_is_no_folder_is_refused(tmp_path: Path, parent: str) -> None:
    (tmp_path / "file").write_text("")
    with pytest.raises(OutputError, match=f"there is no folder .*{parent}"):
        check_replaceable(tmp_path / parent / "site")


def test_a_parent_one_may_not_write_in_is_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(os, "access", lambda path, mode: Path(path) != tmp_path)
    with pytest.raises(OutputError, match="no permission to write in"):
        check_replaceable(tmp_path / "site")


def test_a_mount_point_is_refused() -> None:
    with pytest.raises(OutputError, match="cannot write /: a mount point cannot be replaced"):
        check_replaceable(Path("/"))


def test_links_that_go_round_in_a_circle_are_refused(tmp_path: Path) -> None:
    (tmp_path / "one").symlink_to(tmp_path / "two")
    (tmp_path / "two").symlink_to(tmp_path / "one")
    with pytest.raises(OutputError, match=r"cannot write .*one"):
        swap_in(NEW, tmp_path / "one")


@pytest.mark.parametrize("name", ["../x", "/etc/x", "a/../../x", "a//b", "./a", "", ".", MARKER, "a\nb"])
def test_a_name_outside_the_folder_is_refused(tmp_path: Path, name: str) -> None:
    with pytest.raises(InputError, match="accepted is a plain relative path"):
        swap_in({name: b""}, tmp_path / "site")
    assert names_in(tmp_path) == []


@pytest.mark.parametrize("fault", [OSError(errno.ENOSPC, "No space left on device"), KeyboardInterrupt()])
def test_a_fault_in_mid_write_leaves_the_former_site_alone(
    site: Path, monkeypatch: pytest.MonkeyPatch, fault: BaseException
) -> None:
    fail_on_write(monkeypatch, "molecular", fault)
    expected = OutputError if isinstance(fault, OSError) else KeyboardInterrupt
    with pytest.raises(expected) as caught:
        swap_in(NEW, site)
    assert contents(site) == FORMER
    assert names_in(site.parent) == ["site"]
    if expected is OutputError:
        assert str(caught.value) == f"cannot write {site}: No space left on device"


def fail_on_write(monkeypatch: pytest.MonkeyPatch, part: str, fault: BaseException) -> None:
    """Let writing fail at the first path that has a folder named `part`."""
    write_bytes = Path.write_bytes

    def faulty(path: Path, data: bytes) -> int:
        if part in path.parts:
            raise fault
        return write_bytes(path, data)

    monkeypatch.setattr(Path, "write_bytes", faulty)


@pytest.fixture
def without_exchange(monkeypatch: pytest.MonkeyPatch) -> None:
    """A system that cannot exchange two folders in one step."""
    monkeypatch.setattr(write, "_exchange", lambda first, second: False)


@pytest.mark.usefixtures("without_exchange")
def test_without_the_one_step_exchange_the_site_is_replaced_as_well(site: Path) -> None:
    swap_in(NEW, site)
    assert contents(site) == NEW
    assert names_in(site.parent) == ["site"]


@pytest.mark.usefixtures("without_exchange")
@pytest.mark.parametrize("fault", [OSError(errno.EBUSY, "busy"), KeyboardInterrupt()])
@pytest.mark.parametrize("number", [1, 2])
def test_a_fault_between_the_renames_puts_the_former_site_back(
    site: Path, monkeypatch: pytest.MonkeyPatch, fault: BaseException, number: int
) -> None:
    rename, calls = Path.rename, []

    def faulty(path: Path, target: Path) -> Path:
        calls.append(path)
        if len(calls) == number:
            raise fault
        return rename(path, target)

    monkeypatch.setattr(Path, "rename", faulty)
    with pytest.raises((OutputError, KeyboardInterrupt)):
        swap_in(NEW, site)
    assert contents(site) == FORMER
    assert names_in(site.parent) == ["site"]


@pytest.mark.skipif(not sys.platform.startswith("linux"), reason="the one-step exchange is made on Linux")
def test_the_exchange_is_one_step_on_this_system(tmp_path: Path) -> None:
    for name in ("one", "two"):
        (tmp_path / name).mkdir()
        (tmp_path / name / name).touch()
    assert write._exchange(tmp_path / "one", tmp_path / "two")
    assert names_in(tmp_path / "one") == ["two"]
    assert not write._exchange(tmp_path / "one", tmp_path / "absent")


KILLED_WRITER = """
    import os, signal, sys
    from pathlib import Path
    from skychart.pages import write
    out, moment, number = Path(sys.argv[1]), sys.argv[2], int(sys.argv[3])
    def strike(*ignored):
        os.kill(os.getpid(), number)
    if moment == "mid-write":
        write_bytes = Path.write_bytes
        Path.write_bytes = lambda path, data: (strike if "molecular" in path.parts else write_bytes)(path, data)
    elif moment == "before-swap":
        write._put_in_place = strike
    else:
        put = write._put_in_place
        write._put_in_place = lambda fresh, target: (put(fresh, target), strike())
    new = {"index.html": b"new", "molecular/sun+02.html": b"new sheet", "static/skychart.css": b""}
    write.swap_in(new, out)
"""
MOMENTS = [("mid-write", FORMER), ("before-swap", FORMER), ("after-swap", NEW)]


@pytest.mark.parametrize("number", [signal.SIGKILL, signal.SIGTERM])
@pytest.mark.parametrize(("moment", "left"), MOMENTS)
def test_a_killed_writer_leaves_one_whole_site_and_the_next_one_tidies_up(
    site: Path, moment: str, left: dict[str, bytes], number: int
) -> None:
    command = [sys.executable, "-c", textwrap.dedent(KILLED_WRITER), str(site), moment, str(int(number))]
    assert subprocess.run(command, check=False).returncode == -number
    assert contents(site) == left
    swap_in(NEW, site)
    assert contents(site) == NEW
    assert names_in(site.parent) == ["site"]


def test_writers_at_the_same_time_leave_one_whole_site(tmp_path: Path) -> None:
    program = textwrap.dedent("""
        import sys
        from pathlib import Path
        from skychart.pages.write import swap_in
        for turn in range(20):
            swap_in({f"{sys.argv[2]}/{turn}/{n}": sys.argv[2].encode() for n in range(20)}, Path(sys.argv[1]))
    """)
    arguments = [sys.executable, "-c", program, str(tmp_path / "site")]
    writers = [subprocess.Popen([*arguments, name], stderr=subprocess.PIPE) for name in ("one", "two")]
    assert [writer.communicate()[1] for writer in writers] == [b"", b""]
    files = contents(tmp_path / "site")
    assert len(files) == 20
    assert len(set(files.values())) == 1
    assert names_in(tmp_path) == ["site"]


@pytest.mark.parametrize("look", [check_replaceable, lambda out: swap_in(NEW, out)], ids=["check", "swap"])
def test_another_writer_waits_while_a_folder_is_looked_at(
    site: Path, monkeypatch: pytest.MonkeyPatch, look: Callable[[Path], None]
) -> None:
    pytest.importorskip("fcntl", reason="writers hold each other back where the system has such locks")
    other = threading.Thread(target=swap_in, args=({"other.html": b""}, site))
    listed_files = write._listed_files

    def disturbed(marker: Path) -> set[str] | None:
        found = listed_files(marker)
        if other.ident is None:
            other.start()
            other.join(0.3)  # ample for a swap, if nothing kept it from happening between the two looks
        return found

    monkeypatch.setattr(write, "_listed_files", disturbed)
    look(site)
    other.join()
    assert contents(site) == {"other.html": b""}
    assert names_in(site.parent) == ["site"]

"""A single file is written whole or not at all."""

import errno
import os
from pathlib import Path

import pytest

from skychart.errors import OutputError
from skychart.export.files import bytes_written, check_writable, write_whole


def test_a_file_takes_the_place_of_a_former_one(tmp_path):
    """In one step, and nothing else is left in the folder."""
    path = tmp_path / "dome.exr"
    for data in (b"former", b"new"):
        check_writable(path)
        write_whole(path, data)
        assert path.read_bytes() == data
    assert os.listdir(tmp_path) == ["dome.exr"]


def test_a_fault_in_mid_write_leaves_the_former_file(tmp_path, monkeypatch):
    """One line says what was wrong; no half file stays behind."""
    path = tmp_path / "dome.exr"
    path.write_bytes(b"former")

    def full(target, data):
        with open(target, "wb") as file:
            file.write(data[:1])
        raise OSError(errno.ENOSPC, "No space left on device")

    monkeypatch.setattr(Path, "write_bytes", full)
    with pytest.raises(OutputError, match=r"^cannot write .*dome\.exr: No space left on device$"):
        write_whole(path, b"new")
    assert path.read_bytes() == b"former"
    assert os.listdir(tmp_path) == ["dome.exr"]


def test_a_link_stays_a_link(tmp_path):
    """What it names gets the new content."""
    path, link = tmp_path / "real.exr", tmp_path / "link.exr"
    path.write_bytes(b"former")
    link.symlink_to(path)
    write_whole(link, b"new")
    assert link.is_symlink()
    assert path.read_bytes() == b"new"


def test_a_place_that_cannot_be_written_is_told_before_the_work(tmp_path, monkeypatch):
    """A folder in the way, no folder to write in, no permission."""
    with pytest.raises(OutputError, match="a folder of that name is in the way"):
        check_writable(tmp_path)
    with pytest.raises(OutputError, match=r"there is no folder .*absent"):
        check_writable(tmp_path / "absent" / "dome.exr")
    monkeypatch.setattr(os, "access", lambda path, mode: False)
    with pytest.raises(OutputError, match="no permission to write in"):
        check_writable(tmp_path / "dome.exr")


def test_a_library_that_wants_a_path_is_read_back():
    """Its file has the ending it expects, and is gone afterwards."""
    seen = []

    def write(path):
        seen.append(Path(path))
        Path(path).write_bytes(b"content")

    assert bytes_written(write, ".exr") == b"content"
    assert seen[0].suffix == ".exr"
    assert not seen[0].parent.exists()

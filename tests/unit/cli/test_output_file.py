from __future__ import annotations

from pathlib import Path

import pytest

from tunnelcalc.cli.output_file import OutputFile
from tunnelcalc.errors import InputError


def output(path: Path) -> OutputFile:
    return OutputFile(path, "--out", ("written by us",))


@pytest.mark.parametrize("before", [None, "", "written by us, and more"])
def test_a_file_is_written_where_nothing_else_stands(tmp_path, before):
    path = tmp_path / "file"
    if before is not None:
        path.write_text(before)
    output(path).write("written by us\n")
    assert path.read_bytes() == b"written by us\n"
    assert list(tmp_path.iterdir()) == [path]


@pytest.mark.parametrize("before", [b"title: a project\n", b"\xff\xfe\0", b" " * 500])
def test_what_is_not_ours_is_left_as_it_is(tmp_path, before):
    path = tmp_path / "file"
    path.write_bytes(before)
    with pytest.raises(InputError, match="--out holds something else, which is not overwritten"):
        output(path).write("written by us")
    assert path.read_bytes() == before
    assert list(tmp_path.iterdir()) == [path]


def test_a_folder_or_a_place_in_no_folder_is_refused(tmp_path):
    with pytest.raises(InputError, match="--out is a folder"):
        output(tmp_path).check()
    with pytest.raises(InputError, match="--out lies in a folder that does not exist"):
        output(tmp_path / "missing" / "file").check()


def test_what_a_link_points_at_is_written_not_the_link(tmp_path):
    (tmp_path / "link").symlink_to(tmp_path / "file")
    output(tmp_path / "link").write("written by us")
    assert (tmp_path / "link").is_symlink()
    assert (tmp_path / "file").read_text() == "written by us"


def test_a_file_that_cannot_be_finished_leaves_the_earlier_one(tmp_path, monkeypatch):
    path = tmp_path / "file"
    output(path).write("written by us, first")

    def full(handle: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("os.fsync", full)
    with pytest.raises(OSError, match="No space left"):
        output(path).write("written by us, second")
    assert path.read_text() == "written by us, first"
    assert list(tmp_path.iterdir()) == [path]


def test_a_device_is_written_to_and_not_replaced():
    output(Path("/dev/null")).write("written by us")
    assert Path("/dev/null").is_char_device()

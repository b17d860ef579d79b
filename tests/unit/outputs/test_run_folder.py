"""The folder of a run appears whole, in a place of its own, or not at all."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

from tunnelcalc.errors import FolderHeldError, InputError
from tunnelcalc.outputs.run_folder import Target, copy_inputs, part_folder
from tunnelcalc.project import InputFile


def fail_half_way(target: Target) -> None:
    with part_folder(target) as part:
        assert part.parent == target.parent
        (part / "half.csv").write_text("a")
        raise ZeroDivisionError


def test_the_part_is_built_beside_its_place_and_removed_on_failure(tmp_path: Path):
    with pytest.raises(ZeroDivisionError):
        fail_half_way(Target(tmp_path, None))
    assert list((tmp_path / "runs").iterdir()) == []


def test_a_place_that_another_run_took_in_the_meantime_is_left_alone(tmp_path: Path):
    target = Target(tmp_path, None)
    with part_folder(target) as part:
        (part / "ours").touch()
        (tmp_path / "runs" / "0001").mkdir()  # taken, though empty so far
        assert target.place(part) == tmp_path / "runs" / "0002"
    assert list((tmp_path / "runs" / "0001").iterdir()) == []
    assert (tmp_path / "runs" / "0002" / "ours").exists()


def test_a_number_that_is_taken_between_looking_and_moving_is_passed_over(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
):
    target = Target(tmp_path, None)
    with part_folder(target) as part:
        (tmp_path / "runs" / "0001").mkdir()
        monkeypatch.setattr(Target, "_next_number", lambda self: 1)
        assert target.place(part).name == "0002"


def test_numbers_go_on_beyond_four_digits(tmp_path: Path):
    (tmp_path / "runs" / "9999").mkdir(parents=True)
    target = Target(tmp_path, None)
    with part_folder(target) as part:
        assert target.place(part).name == "10000"


def place_after_another(target: Target, theirs: Path) -> None:
    with part_folder(target) as part:
        theirs.parent.mkdir()
        theirs.touch()
        target.place(part)


def test_a_named_folder_that_is_filled_in_the_meantime_is_held(tmp_path: Path):
    with pytest.raises(FolderHeldError, match="was filled while"):
        place_after_another(Target(tmp_path, tmp_path / "out"), tmp_path / "out" / "theirs")
    assert [path.name for path in tmp_path.iterdir()] == ["out"]
    assert [path.name for path in (tmp_path / "out").iterdir()] == ["theirs"]


def test_a_folder_with_anything_in_it_is_refused_before_any_work(tmp_path: Path):
    (tmp_path / ".hidden").touch()
    with pytest.raises(InputError, match="is not empty"), part_folder(Target(tmp_path, tmp_path)):
        pytest.fail("the work began")


def test_an_empty_folder_is_taken(tmp_path: Path):
    (tmp_path / "out").mkdir()
    target = Target(tmp_path, tmp_path / "out")
    with part_folder(target) as part:
        (part / "ours").touch()
        assert target.place(part) == tmp_path / "out"
    assert (tmp_path / "out" / "ours").exists()


def test_others_may_read_a_run_as_the_umask_says(tmp_path: Path):
    before = os.umask(0o027)
    try:
        with part_folder(Target(tmp_path, None)) as part:
            assert part.stat().st_mode & 0o777 == 0o750
    finally:
        os.umask(before)


def test_inputs_are_copied_to_the_byte_with_their_folders(tmp_path: Path):
    copy_inputs(tmp_path, (InputFile("project.yaml", b"a\r\n"), InputFile("t/u/g.csv", b"\xff")))
    assert (tmp_path / "inputs" / "project.yaml").read_bytes() == b"a\r\n"
    assert (tmp_path / "inputs" / "t" / "u" / "g.csv").read_bytes() == b"\xff"

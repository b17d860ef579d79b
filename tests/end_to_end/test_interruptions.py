"""A run that is stopped, or that the machine stops, leaves nothing half done."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest
from end_to_end.foreign import check_plugin, install, writer_plugin
from end_to_end.projects import files_of, replaced, run

NAMED = replaced("project.yaml", "support_classes:", "plugins: [stranger]\nsupport_classes:")
WAITS = """\
import pathlib, time
pathlib.Path("started").touch()
time.sleep(60)
"""
DISK_FULL = "(folder / 'half').write_text('x')\nraise OSError(28, 'No space left on device')"


@pytest.mark.parametrize("number", [signal.SIGINT, signal.SIGTERM], ids=["keyboard", "terminated"])
def test_a_run_that_is_interrupted_leaves_nothing(project: Path, tmp_path: Path, number: int):
    environment = install(tmp_path / "site", "stranger", check_plugin("stranger", WAITS))
    NAMED(project)
    before = files_of(project)
    process = subprocess.Popen(
        [sys.executable, "-m", "tunnelcalc", "run", str(project)],
        cwd=tmp_path,
        env={**os.environ, **environment},
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
    )
    deadline = time.monotonic() + 60
    while not (tmp_path / "started").exists():
        assert time.monotonic() < deadline, "the run never began"
        time.sleep(0.02)
    assert list((project / "runs").glob(".run-*.part")), "the run is built beside its place"
    process.send_signal(number)
    out, error = process.communicate(timeout=30)
    assert process.returncode == 130
    assert (out, error) == ("", "tunnelcalc: interrupted; nothing was written\n")
    assert files_of(project) == before


def test_a_full_disk_leaves_nothing_and_is_no_fault_of_the_input(project: Path, tmp_path: Path):
    environment = install(tmp_path / "site", "stranger", writer_plugin("drawing", DISK_FULL))
    NAMED(project)
    before = files_of(project)
    ended = run(project, environment=environment)
    assert ended.returncode == 1
    assert ended.stderr == (
        "tunnelcalc: the machine refused: No space left on device\n"
        "  nothing was written; free the disk or correct the permission\n"
    )
    assert files_of(project) == before


def test_a_place_that_cannot_be_made_is_named(project: Path):
    before = files_of(project)
    ended = run(project, "--out", "/proc/tunnelcalc/out")
    assert ended.returncode == 1
    assert ended.stderr.startswith("tunnelcalc: the machine refused: /proc/tunnelcalc: ")
    assert files_of(project) == before


def test_a_folder_that_is_filled_in_the_meantime_is_left_alone(project: Path, tmp_path: Path):
    fills = "import pathlib\npathlib.Path('out').mkdir()\npathlib.Path('out/theirs').touch()\n"
    environment = install(tmp_path / "site", "stranger", writer_plugin("rival", fills))
    NAMED(project)
    ended = run(project, "--out", "out", environment=environment)
    assert ended.returncode == 6
    assert ended.stderr == (
        f"tunnelcalc: {project / 'out'} was filled while the run was computed; run again with "
        "another --out\n"
    )
    assert [path.name for path in (project / "out").iterdir()] == ["theirs"]
    assert not list(project.rglob("*.part"))


def test_what_a_killed_run_left_behind_is_in_nobodys_way(project: Path):
    left = project / "runs" / ".run-abc.part"
    left.mkdir()
    (left / "sections.csv").write_text("chainage_m\n")
    assert run(project).returncode == 0
    assert (project / "runs" / "0002" / "run.json").is_file()


def test_a_reader_who_goes_away_gets_no_traceback(project: Path):
    process = subprocess.Popen(
        [sys.executable, "-m", "tunnelcalc", "plugins"],
        cwd=project,
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
    )
    assert process.stdout is not None
    assert process.stderr is not None
    process.stdout.close()
    assert process.stderr.read() == ""
    process.stderr.close()
    assert process.wait(timeout=30) == 1

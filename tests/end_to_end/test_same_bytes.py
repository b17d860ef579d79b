"""The same ground gives the same bytes, however it is written down and wherever it is run."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest
from end_to_end.projects import run, tables_of

DEMO = Path(__file__).parents[2] / "projects" / "demo"


def rewritten(project: Path, out: str, *options: str, **environment: str) -> dict[str, bytes]:
    ended = run(project, "--out", out, *options, environment=environment)
    assert ended.returncode == 0, ended.stderr
    return tables_of(project / out)


@pytest.mark.parametrize("chunk", ["1", "7", "100000"])
def test_the_chunk_size_changes_nothing(project: Path, chunk: str):
    assert rewritten(project, "out", "--chunk", chunk) == tables_of(project / "runs" / "0001")


@pytest.fixture(scope="module")
def demonstration(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The demonstration project, computed with the chunk size of the program."""
    project = tmp_path_factory.mktemp("demo") / "project"
    shutil.copytree(DEMO, project, ignore=shutil.ignore_patterns("runs"))
    rewritten(project, "once")
    return project


@pytest.mark.parametrize("chunk", ["7", "100"])
def test_the_chunk_size_changes_nothing_of_the_demonstration(demonstration: Path, chunk: str):
    assert rewritten(demonstration, chunk, "--chunk", chunk) == tables_of(demonstration / "once")


def shuffled(table: Path, *order: int) -> None:
    head, *lines = table.read_text().splitlines()
    assert sorted(order) == list(range(len(lines)))
    table.write_text("\n".join([head, *(lines[number] for number in order)]) + "\n")


def test_the_order_of_rows_changes_nothing(project: Path):
    shuffled(project / "ground.csv", 2, 0, 3, 1)
    shuffled(project / "units.csv", 1, 2, 0)
    assert rewritten(project, "out") == tables_of(project / "runs" / "0001")


def test_the_way_a_table_is_saved_changes_nothing(project: Path):
    """Byte order mark, line ends of another system, quotes, blank lines and cells, spaces."""
    text = (project / "ground.csv").read_text()
    text = text.replace("sandstone", '"sandstone"').replace("75,0.4", " 75.0 ,4e-1")
    text = text.replace("\n", "\r\n").replace("70,120", ",,,,\r\n\r\n70,+120.")
    (project / "ground.csv").write_bytes(b"\xef\xbb\xbf" + text.encode())
    project_file = (project / "project.yaml").read_text()
    (project / "project.yaml").write_bytes(b"\xef\xbb\xbf" + project_file.encode())
    assert rewritten(project, "out") == tables_of(project / "runs" / "0001")


def test_old_line_ends_change_nothing(project: Path):
    text = (project / "ground.csv").read_text()
    (project / "ground.csv").write_bytes(text.replace("\n", "\r").encode())
    assert rewritten(project, "out") == tables_of(project / "runs" / "0001")


@pytest.mark.parametrize(
    "environment",
    [
        pytest.param({"PYTHONHASHSEED": "1", "TZ": "Pacific/Kiritimati"}, id="hash-seed-1-east"),
        pytest.param({"PYTHONHASHSEED": "4242", "TZ": "Etc/GMT+12"}, id="hash-seed-4242-west"),
        pytest.param({"LC_ALL": "C", "PYTHONUTF8": "0", "PYTHONCOERCECLOCALE": "0"}, id="plain-c"),
        pytest.param({"LC_ALL": "de_DE.UTF-8", "LANG": "de_DE.UTF-8"}, id="decimal-comma"),
        pytest.param({"PYTHONOPTIMIZE": "2", "COLUMNS": "20", "NO_COLOR": "1"}, id="optimised"),
    ],
)
def test_the_machine_changes_nothing(project: Path, environment: dict[str, str]):
    assert rewritten(project, "out", **environment) == tables_of(project / "runs" / "0001")


def test_a_screen_without_the_letters_of_a_title_ends_no_run(project: Path):
    text = (project / "project.yaml").read_text()
    (project / "project.yaml").write_text(
        text.replace("Invented culvert drive", "Erfundener Stollen für Übungen ≥ 2"),
        encoding="utf-8",
    )
    tables = rewritten(project, "out", PYTHONIOENCODING="ascii")
    assert tables == tables_of(project / "runs" / "0001")

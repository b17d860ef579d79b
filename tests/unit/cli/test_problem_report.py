from __future__ import annotations

import io
import json
import tempfile
from pathlib import Path

import pytest

from tunnelcalc.cli import problem_report
from tunnelcalc.cli.problem_report import MOST_SHOWN, document, listing, print_problems
from tunnelcalc.errors import ExitCode, Problem, Where


def problem(line: int) -> Problem:
    return Problem(Where("ground.csv", line, 4), f'holds "x{line}"', "write a number", "column")


def printed(count: int, file: Path | None = None) -> list[str]:
    stream = io.StringIO()
    print_problems([problem(line) for line in range(2, count + 2)], stream, file)
    return stream.getvalue().splitlines()


@pytest.fixture
def temporary(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    return tmp_path


@pytest.mark.parametrize(
    ("count", "last"),
    [
        (0, "no problems found"),
        (1, "1 problem found"),
        (MOST_SHOWN, f"{MOST_SHOWN} problems found"),
    ],
)
def test_few_problems_are_all_shown_and_counted(temporary, count, last):
    assert printed(count)[-1] == last
    assert len(printed(count)) == 2 * count + 1
    assert list(temporary.iterdir()) == []


def test_of_many_problems_the_first_are_shown_and_all_stand_in_a_temporary_file(temporary):
    *shown, last = printed(MOST_SHOWN + 1)
    (file,) = temporary.iterdir()
    assert last == f"{MOST_SHOWN + 1} problems found, {MOST_SHOWN} shown; all in {file}"
    assert len(shown) == 2 * MOST_SHOWN
    head, *kept = file.read_text(encoding="utf-8").splitlines()
    assert head == problem_report.TEXT_MARK
    assert kept[: len(shown)] == shown
    assert kept[len(shown) :] == [
        f'ground.csv:{MOST_SHOWN + 2}:4: column holds "x{MOST_SHOWN + 2}"',
        "  fix: write a number",
        f"{MOST_SHOWN + 1} problems found",
    ]


def test_a_named_file_takes_the_place_of_the_temporary_one(temporary):
    last = printed(MOST_SHOWN + 1, Path("list.txt"))[-1]
    assert last == f"{MOST_SHOWN + 1} problems found, {MOST_SHOWN} shown; all in list.txt"
    assert printed(1, Path("list.txt"))[-1] == "1 problem found; all in list.txt"
    assert list(temporary.iterdir()) == []


def test_without_room_for_a_file_every_problem_is_shown(tmp_path, monkeypatch):
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path / "missing"))
    *shown, last = printed(MOST_SHOWN + 1)
    assert last == f"{MOST_SHOWN + 1} problems found"
    assert len(shown) == 2 * (MOST_SHOWN + 1)


def test_the_document_has_every_problem_with_all_its_parts():
    found = [
        Problem(
            Where("ground.csv", 3, 4),
            'holds "60,5", which is not a number',
            "write 60.5",
            'column "cover_m"',
            "a number",
            "interval 0 to 10 m",
        ),
        Problem(Where("ground.xlsx", 3, 28, "Sheet 1"), "is empty", "fill it in"),
    ]
    read = json.loads(document("validate", ExitCode.INPUT, found))
    assert (read["command"], read["exit_code"], read["count"]) == ("validate", 2, 2)
    assert read["problems"] == [
        {
            "file": "ground.csv",
            "line": 3,
            "column": 4,
            "sheet": None,
            "cell": None,
            "name": 'column "cover_m"',
            "message": 'holds "60,5", which is not a number',
            "value": "60,5",
            "allowed": "a number",
            "context": "interval 0 to 10 m",
            "fix": "write 60.5",
        },
        {
            "file": "ground.xlsx",
            "line": 3,
            "column": 28,
            "sheet": "Sheet 1",
            "cell": "AB3",
            "name": None,
            "message": "is empty",
            "value": None,
            "allowed": None,
            "context": None,
            "fix": "fill it in",
        },
    ]


@pytest.mark.parametrize("count", [0, 1, MOST_SHOWN + 1])
def test_the_document_leaves_no_problem_out(count):
    found = [problem(line) for line in range(count)]
    read = json.loads(document("run", ExitCode.INPUT, found, {"notes": ["n"]}))
    assert [row["line"] or 0 for row in read["problems"]] == list(range(count))
    assert read["count"] == count
    assert read["notes"] == ["n"]


def test_the_listing_ends_with_the_count():
    assert listing(()).splitlines() == [problem_report.TEXT_MARK, "no problems found"]

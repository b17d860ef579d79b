"""Paths, files and syntax that a run refuses, with the whole message."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import GROUND, PROJECT, UNITS, all_of, content, replaced
from end_to_end.refusals import Case, assert_refused

ALIAS_BOMB = "\n".join(
    ["a0: &a0 [1, 2, 3, 4, 5, 6, 7, 8, 9, 10]"]
    + [f"a{n}: &a{n} [{', '.join([f'*a{n - 1}'] * 10)}]" for n in range(1, 8)]
).encode()
"""Eight lines that stand for a hundred million values."""


def link_out_of_the_project(project: Path) -> None:
    (project / "ground.csv").rename(project.parent / "outside.csv")
    (project / "ground.csv").symlink_to("../outside.csv")


def links_in_a_circle(project: Path) -> None:
    (project / "ground.csv").unlink()
    (project / "ground.csv").symlink_to("other.csv")
    (project / "other.csv").symlink_to("ground.csv")


def folder_in_place_of_a_table(project: Path) -> None:
    (project / "ground.csv").unlink()
    (project / "ground.csv").mkdir()


CASES: dict[str, Case] = {
    "path-upwards": (
        replaced("project.yaml", "table: ground.csv", "table: ../ground.csv"),
        (
            'project.yaml:6:3: key "ground.table" names "../ground.csv", which leaves the '
            "project folder"
        ),
        "  allowed: a path inside the project folder, relative to it",
        "  fix: copy the file into the project folder and name it by its path from there",
    ),
    "path-out-and-back-in": (
        replaced("project.yaml", "table: ground.csv", "table: ../project/ground.csv"),
        (
            'project.yaml:6:3: key "ground.table" names "../project/ground.csv", which '
            "leaves the project folder"
        ),
        "  allowed: a path inside the project folder, relative to it",
        "  fix: copy the file into the project folder and name it by its path from there",
    ),
    "path-absolute": (
        replaced("project.yaml", "table: ground.csv", "table: /etc/ground.csv"),
        (
            'project.yaml:6:3: key "ground.table" names "/etc/ground.csv", which leaves '
            "the project folder"
        ),
        "  allowed: a path inside the project folder, relative to it",
        "  fix: copy the file into the project folder and name it by its path from there",
    ),
    "link-out-of-the-project": (
        link_out_of_the_project,
        'project.yaml:6:3: key "ground.table" names "ground.csv", which leaves the project folder',
        "  allowed: a path inside the project folder, relative to it",
        "  fix: copy the file into the project folder and name it by its path from there",
    ),
    "links-in-a-circle": (
        links_in_a_circle,
        (
            'project.yaml:6:3: key "ground.table" names "ground.csv", which cannot be '
            "read: Too many levels of symbolic links"
        ),
        "  fix: name a readable file inside the project folder",
    ),
    "folder-in-place-of-a-table": (
        folder_in_place_of_a_table,
        (
            'project.yaml:6:3: key "ground.table" names "ground.csv", which cannot be '
            "read: it is a folder"
        ),
        "  fix: name a readable file inside the project folder",
    ),
    "no-such-table": (
        replaced("project.yaml", "table: ground.csv", "table: grund.csv"),
        (
            'project.yaml:6:3: key "ground.table" names "grund.csv", which cannot be read: '
            "there is no such file"
        ),
        "  fix: name a readable file inside the project folder",
    ),
    "ending-that-nobody-reads": (
        replaced("project.yaml", "table: ground.csv", "table: ground.ods"),
        'project.yaml:6:3: key "ground.table" names "ground.ods", which no plugin can read',
        "  allowed: a file ending in .ags or .csv or .tsv or .txt or .xlsm or .xlsx",
        "  fix: save the table so",
    ),
    "yaml-tab": (
        replaced("project.yaml", "  radius_m: 3.0", "\tradius_m: 3.0"),
        "project.yaml:4:1: is indented with a tab, which YAML does not allow",
        "  fix: indent with spaces",
    ),
    "yaml-key-twice": (
        replaced("project.yaml", "  radius_m: 3.0\n", "  radius_m: 3.0\n  radius_m: 5.2\n"),
        'project.yaml:5:3: key "radius_m" stands twice, first in line 4',
        "  fix: keep one of the two",
    ),
    "yaml-that-is-a-list": (
        content("project.yaml", b"- title\n- opening\n"),
        "project.yaml:1:1: holds no keys",
        "  allowed: keys with values: title, opening, ground, ...",
        "  fix: write the project as keys with values",
    ),
    "yaml-with-comments-only": (
        content("project.yaml", b"# nothing yet\n"),
        "project.yaml: is empty",
        "  fix: write the project into it, title first",
    ),
    "yaml-colon-in-text": (
        replaced("project.yaml", "title: Invented culvert drive", "title: Drive: invented"),
        "project.yaml:2:13: is not YAML: mapping values are not allowed here",
        "  fix: check the indentation, and put text with : or # in quotes",
    ),
    "yaml-alias-bomb": (
        content("project.yaml", ALIAS_BOMB),
        "project.yaml:1:34: begins more values than a project can have",
        "  allowed: at most 200000 values, nested 40 deep",
        "  fix: remove aliases that repeat one another",
    ),
    "yaml-nested-deeply": (
        replaced("project.yaml", "radius_m: 3.0", "radius_m: " + "[" * 50 + "3.0" + "]" * 50),
        "project.yaml:4:52: is nested too deeply",
        "  allowed: at most 200000 values, nested 40 deep",
        "  fix: nest less deeply",
    ),
    "yaml-nested-beyond-measure": (
        replaced("project.yaml", "radius_m: 3.0", "radius_m: " + "[" * 3000 + "]" * 3000),
        "project.yaml: is nested too deeply",
        "  allowed: at most 200000 values, nested 40 deep",
        "  fix: nest less deeply",
    ),
    "yaml-in-utf-16": (
        content("project.yaml", PROJECT.encode("utf-16")),
        "project.yaml: is not a text file: it holds null bytes",
        "  fix: save it as plain text in UTF-8",
    ),
    "table-in-utf-16-without-mark": (
        content("ground.csv", GROUND.encode("utf-16-le")),
        "ground.csv: is not a text file: it holds null bytes",
        "  allowed: UTF-8, or UTF-16 with its byte order mark",
        '  fix: save the table as "CSV UTF-8"',
    ),
    "table-in-latin-1": (
        content("ground.csv", GROUND.replace("gouge", "Störung").encode("latin-1")),
        "ground.csv:5: is not UTF-8 text: byte 0xf6 cannot be read",
        "  allowed: UTF-8, or UTF-16 with its byte order mark",
        '  fix: save the table as "CSV UTF-8"; plain CSV may be Windows-1252, which is not guessed',
    ),
    "table-binary": (
        content("ground.csv", bytes(range(256))),
        "ground.csv: is not a text file: it holds null bytes",
        "  allowed: UTF-8, or UTF-16 with its byte order mark",
        '  fix: save the table as "CSV UTF-8"',
    ),
    "workbook-named-csv": (
        content("ground.csv", b"PK\x03\x04 and what follows"),
        "ground.csv: is a workbook or another packed file, not text",
        "  allowed: UTF-8, or UTF-16 with its byte order mark",
        "  fix: give a workbook the ending .xlsx, or save the table as CSV",
    ),
    "workbook-damaged": (
        all_of(
            replaced("project.yaml", "table: ground.csv", "table: ground.xlsx"),
            content("ground.xlsx", b"PK\x03\x04 and what follows"),
        ),
        "ground.xlsx: is not a workbook, or a damaged one",
        "  allowed: a workbook (.xlsx)",
        "  fix: save it again as .xlsx",
    ),
    "table-too-large": (
        content("ground.csv", bytes(200_000_000)),
        "ground.csv: has 200 MB",
        "  allowed: at most 67 MB",
        "  fix: join neighbouring intervals of the same ground, or divide the project",
    ),
    "table-empty": (
        content("ground.csv", b""),
        "ground.csv: holds no table",
        "  allowed: a header row and one row an interval or unit",
        "  fix: write the column names into the first row",
    ),
    "table-with-header-only": (
        content("ground.csv", GROUND.splitlines()[0].encode()),
        "ground.csv: has a header and no rows",
        "  fix: write one row an interval or unit",
    ),
    "units-with-header-only": (
        content("units.csv", UNITS.splitlines()[0].encode()),
        "units.csv: has a header and no rows",
        "  fix: write one row an interval or unit",
    ),
    "table-with-both-decimal-signs": (
        content(
            "ground.csv",
            GROUND.replace(",", ";").replace("75;0.4", "75;0,4").encode(),
        ),
        (
            'ground.csv:3:5: column "block_width_m" holds "0,4", with a decimal comma; the '
            'table also has a decimal point, in "1.1"'
        ),
        "  allowed: one decimal sign in the whole table",
        '  fix: write "0.4", if it is a number; write names that look like numbers otherwise',
    ),
    "table-with-thousands-separators": (
        content("ground.csv", GROUND.replace(",", ";").replace(";60;", ";1'060.5;").encode()),
        'ground.csv:2:4: column "cover_m" holds "1\'060.5", which is not a number',
        "  interval 0 to 45 m; allowed: a number at least 0, at most 10000, in m",
        "  fix: write 1060.5, without thousands separators",
    ),
    "table-with-an-open-quote": (
        replaced("ground.csv", "45,70,siltstone", '45,70,"siltstone'),
        "ground.csv:5: is not CSV: unexpected end of data",
        "  fix: close the quotes, and save the table as CSV with commas",
    ),
    "row-with-a-cell-too-many": (
        replaced("ground.csv", "45,70,siltstone,75", "45,70,siltstone,75,5"),
        "ground.csv:3: has 6 cells, the header has 5",
        "  allowed: 5 cells",
        "  fix: write decimal points, not commas, and put text with commas in quotes",
    ),
    "row-with-a-cell-too-few": (
        replaced("ground.csv", "120,150,gouge,200,", "120,150,gouge,200"),
        "ground.csv:5: has 4 cells, the header has 5",
        "  allowed: 5 cells",
        "  fix: write every cell of the row, empty ones too",
    ),
}


@pytest.mark.parametrize("case", CASES.values(), ids=CASES.keys())
def test_a_file_that_cannot_be_read_is_refused(project: Path, case: Case):
    assert_refused(project, case)

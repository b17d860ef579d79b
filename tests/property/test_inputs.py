"""Whatever stands in the files of a project, reading it gives a project or a list of problems.

Every example is read in this process: an exception of another kind, or a hang, fails the test.
"""

from __future__ import annotations

import re
from collections.abc import Callable

import pytest
from end_to_end.projects import GROUND, PROJECT, UNITS, write_project
from hypothesis import example, given, settings
from hypothesis import strategies as st

from tunnelcalc.errors import InputError
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.project import Project

REGISTRY = load_plugins()
FILES = {"project.yaml": PROJECT, "ground.csv": GROUND, "units.csv": UNITS}
PATIENT = settings(max_examples=150, deadline=None)

Read = Callable[[str, bytes], Project | InputError]


@pytest.fixture(scope="module")
def read(tmp_path_factory: pytest.TempPathFactory) -> Read:
    """Reads the small project with one of its files replaced."""
    folder = write_project(tmp_path_factory.mktemp("inputs") / "project")

    def of(file: str, content: bytes) -> Project | InputError:
        (folder / file).write_bytes(content)
        try:
            return read_project(folder, REGISTRY)
        except InputError as error:
            return error
        finally:
            (folder / file).write_text(FILES[file], encoding="utf-8", newline="")

    return of


def assert_told(outcome: Project | InputError) -> None:
    """A project with sections, or problems that name a place and a remedy, in printable lines."""
    if isinstance(outcome, Project):
        assert outcome.ground.count > 0
        return
    assert outcome.problems
    for problem in outcome.problems:
        assert problem.where.file in FILES
        assert problem.message
        assert problem.fix
        text = str(problem)
        assert 2 <= len(text.splitlines()) <= 3
        assert all(line.isprintable() for line in text.split("\n"))
        text.encode("utf-8")


@PATIENT
@given(file=st.sampled_from(sorted(FILES)), content=st.binary(max_size=400))
def test_any_bytes_are_read_or_refused(read: Read, file: str, content: bytes):
    assert_told(read(file, content))


@PATIENT
@given(file=st.sampled_from(sorted(FILES)), content=st.text(max_size=400))
@example(file="project.yaml", content='"\\UFFFFFFFF": 1')
@example(file="project.yaml", content='"\\ud800": 1')
@example(file="project.yaml", content="&a [*a]")
@example(file="project.yaml", content="%YAML 1." + "9" * 5000 + "\n--- a")
@example(file="project.yaml", content="title: \x85x\n\u2028opening: {radius_m: 3}")
@example(file="project.yaml", content="? {a: 1}\n: 2\n!!binary x: !local y")
@example(file="ground.csv", content="from_m,to_m\n" + "9" * 200_000 + ",1\n")
@example(file="ground.csv", content='"a\n\nb","from_m"\r\n1,2\r')
@example(file="units.csv", content="ground_unit\n")
@example(file="units.csv", content="gsi\n1\n")
def test_any_text_is_read_or_refused(read: Read, file: str, content: str):
    assert_told(read(file, content.encode("utf-8", "surrogatepass")))


PIECES = st.one_of(
    st.text(max_size=6),
    st.sampled_from(list("\t\n\x1b:[]{}#,'\"~0")),
    st.sampled_from(["  ", "- ", "&a ", "*a", "!!float ", "|\n", "<<: ", "---\n", "yes"]),
    st.sampled_from(["-1", "nan", "1e999", "1e-320", "9" * 30]),
)


@PATIENT
@given(file=st.sampled_from(sorted(FILES)), data=st.data())
def test_a_valid_file_with_a_few_slips_is_read_or_refused(read: Read, file: str, data):
    text = FILES[file]
    for _ in range(data.draw(st.integers(1, 3))):
        start = data.draw(st.integers(0, len(text)))
        end = min(len(text), start + data.draw(st.integers(0, 12)))
        text = text[:start] + data.draw(PIECES) + text[end:]
    assert_told(read(file, text.encode("utf-8", "surrogatepass")))


@PATIENT
@given(data=st.data())
def test_a_value_of_the_project_file_is_read_or_refused(read: Read, data):
    """Any YAML value in place of the value of one key."""
    lines = PROJECT.splitlines()
    keyed = [n for n, line in enumerate(lines) if re.search(r": \S", line)]
    number = data.draw(st.sampled_from(keyed))
    value = data.draw(
        st.one_of(
            st.floats().map(str),
            st.integers().map(str),
            st.sampled_from(["", "~", "[]", "{}", "[1, 2]", "{a: 1}", "yes", "'5'", "5 m", "1_0"]),
            st.text(st.characters(categories=["L", "N", "P", "S"]), max_size=8).map(repr),
        )
    )
    lines[number] = lines[number].partition(": ")[0] + ": " + value
    assert_told(read("project.yaml", "\n".join(lines).encode()))


PLAIN_NUMBER = re.compile(r"[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?", re.ASCII)


def in_range(column: str, text: str) -> bool:
    """The ranges as the project states them, written out once more."""
    if not PLAIN_NUMBER.fullmatch(text):
        return False
    value = float(text)
    return {
        "unit_weight_kn_m3": 5 <= value <= 60,
        "stress_ratio": 0 < value <= 10,
        "intact_strength_mpa": 0 < value <= 1000,
        "mi": 0 < value <= 60,
        "gsi": 0 < value <= 100,
        "disturbance": 0 <= value <= 1,
        "poisson_ratio": 0 <= value < 0.5,
        "dilation_deg": 0 <= value <= 60,
        "modulus_ratio": 0 < value <= 10000,
    }[column]


OPTIONAL = {"stress_ratio", "dilation_deg", "modulus_ratio"}
COLUMNS = UNITS.splitlines()[0].split(",")[1:]
CELLS = st.one_of(
    st.floats().map(str),
    st.floats(-1, 101).map(lambda value: f"{value:.3f}"),
    st.sampled_from(["0", "-0", "1", "0.5", "0.49999", "5", "60", "100", "100.0001", "1000"]),
    st.sampled_from(["", "1e5", "1E1", "+5", ".5", "5.", "1_0", "0x5", "5 5", "5%", "1e400"]),
    st.sampled_from(["\u0665", "\u22125", "5\u00a0", "\uff15", "Infinity", "NaN", "None"]),
    st.text(st.characters(exclude_characters=',"\r\n\0', exclude_categories=["Cs"]), max_size=5),
)


@settings(max_examples=300, deadline=None)
@given(column=st.sampled_from(COLUMNS), row=st.integers(1, 3), cell=CELLS)
def test_a_cell_is_accepted_only_if_it_is_a_number_in_range(
    read: Read, column: str, row: int, cell: str
):
    lines = [line.split(",") for line in UNITS.splitlines()]
    number = lines[0].index(column)
    lines[row][number] = cell
    outcome = read("units.csv", "\n".join(",".join(line) for line in lines).encode())
    assert_told(outcome)
    written = cell.strip()
    fine = in_range(column, written) or (not written and column in OPTIONAL)
    assert isinstance(outcome, Project) == fine
    if isinstance(outcome, Project) and written:
        name = lines[row][0]
        values = outcome.ground[column][outcome.ground["ground_unit"] == name]
        assert set(values.tolist()) == {float(written)}
    elif isinstance(outcome, InputError) and written:
        (problem,) = outcome.problems
        assert str(problem).startswith(f'units.csv:{row + 1}:{number + 1}: column "{column}" holds')

"""A project's own words for a choice of a support kind: steel sections. All values invented."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import openpyxl
import pytest
from end_to_end.projects import PROJECT, Damage, all_of, content, replaced
from unit.inputs.arriving import table
from unit.inputs.reading import REGISTRY, read, told

from tunnelcalc.errors import InputError
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.parameter import Misfit
from tunnelcalc.plugin.registry import Offer, Registry

OWN = (
    "        section_area_mm2: 4300\n"
    "        section_inertia_mm4: 14500000\n"
    "        section_depth_mm: 140\n"
)
HEADER = "designation,section_area_mm2,section_inertia_mm4,section_depth_mm"
ARCH = "ARCH 29,3700,6160000,124"


def named(file: str = "sections.csv") -> Damage:
    key = f"tables: {{steel_sets: {{profile: {file}}}}}\n"
    return replaced("project.yaml", "support_classes:\n", f"{key}support_classes:\n")


def chosen(word: str) -> Damage:
    return replaced("project.yaml", OWN, f"        profile: {word}\n")


def sections(*lines: str, header: str = HEADER, word: str = "ARCH 29") -> Damage:
    return all_of(named(), chosen(word), table("sections.csv", header, *lines))


def values_of(project):
    return project.support_classes[1].elements[1].values


def test_a_row_stands_for_its_values_and_tells_where_it_is_from(tmp_path: Path):
    header = f"{HEADER},source"
    project = read(tmp_path, sections("WIDE,5000,2e7,150,", f"{ARCH},mill sheet 7", header=header))
    values = values_of(project)
    assert values["profile"] == "ARCH 29"
    assert [values[name] for name in HEADER.split(",")[1:]] == [3700.0, 6.16e6, 124.0]
    assert values["profile_source"] == "sections.csv:3, mill sheet 7"
    assert not any("sections.csv" in warning for warning in project.warnings)
    assert "sections.csv" in [file.path for file in project.files]


def test_without_a_source_the_row_itself_is_it(tmp_path: Path):
    assert values_of(read(tmp_path, sections(ARCH)))["profile_source"] == "sections.csv:2"


def test_a_workbook_does_as_well(tmp_path: Path):
    def write(project: Path) -> None:
        book = openpyxl.Workbook()
        book.active.title = "Sets"
        book.active.append(HEADER.split(","))
        book.active.append(["ARCH 29", 3700, 6160000, 124])
        book.save(project / "sections.xlsx")

    project = read(tmp_path, named('"sections.xlsx#Sets"'), chosen("ARCH 29"), write)
    assert values_of(project)["section_area_mm2"] == 3700.0
    assert values_of(project)["profile_source"].startswith("sections.xlsx:Sets")


def test_the_words_of_the_program_stay(tmp_path: Path):
    project = read(tmp_path, sections(ARCH, word="HEB 160"))
    assert values_of(project)["profile"] == "HEB 160"
    assert "section_area_mm2" not in values_of(project)
    (idle,) = [text for text in project.warnings if "sections.csv" in text]
    assert idle == "tables: sections.csv is used by nothing: no profile of steel_sets names a row"


def test_every_problem_is_told_at_once_with_its_place(tmp_path: Path):
    """A h^2 / 4 = 14.2e6 and A h^2 / 24 = 2.37e6 mm4 for 3700 mm2 and 124 mm."""
    found = told(
        tmp_path,
        sections(
            ARCH,
            "arch29,3700,6160000,124",
            "heb160,3700,6160000,124",
            "own,3700,6160000,124",
            ",3700,6160000,124",
            "CM,37,616,12.4",
            "TOO STIFF,3700,16160000,124",
            "TOO SOFT,3700,616000,124",
            "GAP,3700,,124",
            "WORD,3700,much,124",
            "MINUS,-3700,6160000,124",
        ),
    )
    at, program = "sections.csv:{}:{}: column ", "which is a word of the program's own"
    assert found == [
        at.format(3, 1) + '"designation" holds "arch29", which stands already at sections.csv:2',
        at.format(4, 1) + f'"designation" holds "heb160", {program}',
        at.format(5, 1) + f'"designation" holds "own", {program}',
        at.format(6, 1) + '"designation" is empty',
        at.format(7, 2) + '"section_area_mm2" holds "37", which is out of range',
        at.format(7, 3) + '"section_inertia_mm4" holds "616", which is out of range',
        at.format(8, 3) + '"section_inertia_mm4" is 1.616e+07 mm4, more than this area and depth '
        "can have, 1.42228e+07 mm4",
        at.format(9, 3) + '"section_inertia_mm4" is 616000 mm4, less than a rhombus of this area '
        "and depth has, 2.37047e+06 mm4",
        at.format(10, 3) + '"section_inertia_mm4" is empty',
        at.format(11, 3) + '"section_inertia_mm4" holds "much", which is not a number',
        at.format(12, 2) + '"section_area_mm2" holds "-3700", which is out of range',
    ]


def test_a_row_with_a_problem_is_told_once_where_an_element_names_it(tmp_path: Path):
    (only,) = told(tmp_path, sections("ARCH 29,3700,616000,124"))
    assert only.startswith('sections.csv:2:3: column "section_inertia_mm4"')


@pytest.mark.parametrize(
    ("damage", "first"),
    [
        (
            all_of(named(), chosen("ARCH 29")),
            'key "tables.steel_sets.profile" names "sections.csv"',
        ),
        (
            sections(ARCH, header="name,section_area_mm2,section_inertia_mm4,section_depth_mm"),
            "name",
        ),
        (sections("4,4,4", header="designation,section_area_mm2,section_depth_mm"), "inertia"),
        (sections(), "has a header and no rows"),
    ],
)
def test_of_a_table_that_cannot_be_read_any_word_may_be_meant(tmp_path, damage, first):
    found = told(tmp_path, damage)
    assert any(first in text for text in found)
    assert not any("support_classes" in text for text in found)


def test_a_misspelt_word_is_told_with_the_nearest_and_few_others(tmp_path: Path):
    (only,) = told_in_full(tmp_path, sections(ARCH, word="ARCH29"))
    assert 'profile" holds "ARCH29"' in only[0]
    assert only[1].startswith("  allowed: ARCH 29 or ")
    assert only[1].endswith(" or one of 76 more")
    assert only[2] == '  fix: did you mean "ARCH 29"?'


def test_a_word_that_is_like_no_other_asks_for_a_table(tmp_path: Path):
    (only,) = told_in_full(tmp_path, chosen("Q"))
    fix = "  fix: write one of the allowed words, or add yours to a table that tables names"
    assert only[-1] == fix


def told_in_full(folder: Path, *damages: Damage) -> list[list[str]]:
    with pytest.raises(InputError) as caught:
        read(folder, *damages)
    return [str(problem).splitlines() for problem in caught.value.problems]


def test_values_beside_a_word_that_states_them_have_no_use(tmp_path: Path):
    word = replaced("project.yaml", OWN, f"        profile: ARCH 29\n{OWN}")
    found = told(tmp_path, named(), word, table("sections.csv", HEADER, ARCH))
    assert len(found) == 3
    assert all("has no use with profile: ARCH 29" in text for text in found)


@pytest.mark.parametrize(
    ("key", "unknown"),
    [
        ("tables: {shotcrete: {profile: a.csv}}", "tables.shotcrete"),
        ("tables: {steel_sets: {contact: a.csv}}", "tables.steel_sets.contact"),
    ],
)
def test_a_table_for_what_takes_none_is_unknown(tmp_path: Path, key: str, unknown: str):
    text = PROJECT.replace("support_classes:\n", f"{key}\nsupport_classes:\n")
    (only,) = told(tmp_path, content("project.yaml", text.encode()))
    assert f'key "{unknown}" is unknown' in only


class _Raising:
    """`steel_sets` of a stranger whose look at a row fails."""

    def __init__(self, kind, answer):
        self._kind = kind
        (profile,) = [p for p in kind.parameters if p.name == "profile"]
        changed = replace(profile, words_from=replace(profile.words_from, misfits=answer))
        self.parameters = tuple(changed if p is profile else p for p in kind.parameters)

    def __getattr__(self, name):
        return getattr(self._kind, name)


def registry_with(answer) -> Registry:
    offers = dict(REGISTRY.offers)
    old = offers["support_kind", "steel_sets"]
    offers["support_kind", "steel_sets"] = Offer(
        old.sort, old.name, _Raising(old.thing, answer), old.source
    )
    return Registry(offers, sources=REGISTRY.sources)


def test_a_plugin_that_fails_at_a_row_is_told(tmp_path: Path):
    def fails(values):
        raise ZeroDivisionError("by nothing")

    folder = tmp_path / "project"
    read(tmp_path, sections(ARCH))
    with pytest.raises(InputError) as caught:
        read_project(folder, registry_with(fails))
    (problem,) = caught.value.problems
    assert "the plugin of steel_sets failed with ZeroDivisionError" in str(problem)
    finds = registry_with(lambda values: [Misfit("section_depth_mm", "is odd", "mend it")])
    with pytest.raises(InputError) as caught:
        read_project(folder, finds)
    assert 'sections.csv:2:4: column "section_depth_mm" is odd' in str(caught.value.problems[0])

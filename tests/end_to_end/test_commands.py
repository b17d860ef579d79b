"""The other commands: what they print, and that they change nothing."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from end_to_end.projects import files_of, tunnelcalc

import tunnelcalc as package
from tunnelcalc.plugin.registry import SORTS


def printed(project: Path, *arguments: str) -> str:
    before = files_of(project)
    ended = tunnelcalc(*arguments, folder=project)
    assert (ended.returncode, ended.stderr) == (0, "")
    assert files_of(project) == before
    return ended.stdout


def test_validate_says_what_a_project_holds_and_what_it_leaves_out(project: Path):
    assert printed(project, "validate", ".") == (
        "note: no water_head_m is given: stresses and strength are total\n"
        "no problems found: 16 sections, 2 support classes\n"
    )


def test_plugins_lists_what_each_plugin_offers_with_units_and_ranges(project: Path):
    text = printed(project, "plugins")
    assert [line for line in text.splitlines() if not line.startswith(" ")] == [
        sort
        for sort in SORTS
        if sort != "verification_check"  # they have a command of their own
    ]
    version = package.__version__
    for line in (
        f"  steel_sets  from steel_sets (tunnelcalc {version})",
        "      thickness_mm: thickness of the ring; a number at least 10, at most 2000, in mm",
        "      contact: contact with the ground; embedded or blocked",
        "      block_spacing_deg: angle between neighbouring blocks; a number at least 1, "
        "at most 120, in deg; only if contact is blocked",
        f"  tension  from rock_bolts (tunnelcalc {version})",
        "      load check for rock_bolts, in kN",
        "      rule for rock_bolts, friction_bolts, grouted_rock_bolts, in m",
        "      load check for rock_bolts, friction_bolts, in kN",
        f"  crown_dead_weight  from class_checks (tunnelcalc {version})",
        "      load check of a class, in MPa, counts where criteria: crown_dead_weight: yes",
        f"  hoek_diederichs_2006  from methods (tunnelcalc {version})",
        f"  csv  from csv_reader (tunnelcalc {version})",
        "      files ending in .csv, .tsv, .txt",
        "      cover_m over radius_m: advisory below 10; outside below 4 (common practice, no "
        "source)",
    ):
        assert f"\n{line}\n" in text


def test_stages_tells_the_chain_and_every_need_is_given_before(project: Path):
    first, *blocks = printed(project, "stages", ".").split("\n\n")
    given = set(first.removeprefix("inputs give: ").split(", "))
    names = []
    for number, block in enumerate(blocks, 1):
        head, _, needs, gives = (line.strip() for line in block.strip().splitlines())
        names.append(re.fullmatch(rf"{number}\. (\w+) \((in chunks|whole alignment)\)", head)[1])
        assert set(needs.removeprefix("needs: ").split(", ")) <= given
        given |= set(gives.removeprefix("gives: ").split(", "))
    assert names == [
        "in_situ_stress",
        "mass_disturbance",
        "strength",
        "intact_modulus",
        "deformation_modulus",
        "hazards",
        "ground_reaction",
        "support",
        "choice",
        "zoning",
        "flags",
    ]
    assert {"closure_mm", "required_class", "scheduled_class"} <= given


def test_version_is_told(project: Path):
    assert printed(project, "--version") == f"{package.__version__}\n"


@pytest.mark.parametrize("arguments", [(), ("compute", "."), ("run",), ("run", ".", "--force")])
def test_a_command_that_is_not_understood_ends_with_2_and_the_usage(
    project: Path, arguments: tuple[str, ...]
):
    ended = tunnelcalc(*arguments, folder=project)
    assert ended.returncode == 2
    assert ended.stderr.startswith("usage: tunnelcalc")


def test_what_a_screen_cannot_show_is_written_out(project: Path):
    text = (project / "project.yaml").read_text()
    (project / "project.yaml").write_text('"\\ud800\\e[31m": 1\n' + text)
    ended = tunnelcalc("validate", ".", folder=project)
    assert (ended.returncode, ended.stderr) == (2, "")
    assert ended.stdout.startswith('project.yaml:1:1: key "\\ud800\\x1b[31m" is unknown\n')


def test_names_are_printed_as_they_are_and_never_taken_for_markup(project: Path):
    for file, old in (("project.yaml", "name: light"), ("project.yaml", "title: Invented")):
        text = (project / file).read_text()
        new = old.replace("light", "'[bold]B1[/] :rock:'").replace("Invented", "'[red]'  #")
        (project / file).write_text(text.replace(old, new))
    ended = tunnelcalc("run", ".", "--out", "out", folder=project)
    assert ended.stdout.startswith("[red]\n")
    assert "[bold]B1[/] :rock:" in ended.stdout

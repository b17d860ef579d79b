"""`tunnelcalc tune` with words and with what is held: would yielding elements do?

Ground and classes are invented: siltstone in which rigid sets yield and sliding ones hold, deeper
siltstone that uses up their travel.
"""

from __future__ import annotations

import math
from pathlib import Path

import pytest
from end_to_end.projects import completed, files_of, rows, tunnelcalc
from tunnelcalc_steel_sets.kind import SteelSets

from tunnelcalc.cli.main import main
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.tune.tuning import tune

SETS = """\
      - kind: steel_sets
        profile: HEB 120
        yield_strength_mpa: 235
        steel_modulus_gpa: 200
        spacing_m: 1
        contact: embedded
"""
PROJECT = f"""\
title: Invented adit
opening: {{radius_m: 3}}
ground: {{table: ground.csv}}
support_classes:
  - name: sets
    installed_at_m: 1
    elements:
{SETS}\
criteria: {{factor_of_safety: 1.3, closure_pct: 6.0}}
schedule: {{minimum_zone_m: 0, carry_m: 0}}
"""
GROUND = """\
from_m,to_m,ground_unit,cover_m,unit_weight_kn_m3,stress_ratio,intact_strength_mpa,mi,gsi,disturbance,poisson_ratio,dilation_deg,modulus_ratio
0,30,siltstone,250,25,1,20,7,35,0,0.28,0,350
30,60,deep siltstone,320,25,1,20,7,32,0,0.28,0,350
"""
SHALLOW, DEEP = "15", "45"
JOINTS = "steel_sets.joints=rigid,sliding"
SLIP = "steel_sets.slip_load_kn=20:780"
HELD = ("joint_count=5", "slip_load_kn=200", "joint_travel_mm=200")


def write(folder: Path, text: str = PROJECT) -> Path:
    folder.mkdir(parents=True)
    (folder / "project.yaml").write_text(text, encoding="utf-8")
    (folder / "ground.csv").write_text(GROUND, encoding="utf-8")
    return folder


def options(vary: tuple[str, ...], held: tuple[str, ...]) -> list[str]:
    return [
        *(word for text in vary for word in ("--vary", text)),
        *(word for text in held for word in ("--set", f"steel_sets.{text}")),
    ]


@pytest.fixture(scope="module")
def advised(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A project with advice on its sets. Tests only look at it."""
    project = write(tmp_path_factory.mktemp("words") / "project")
    asked = options((JOINTS, SLIP), (*HELD, "joints=sliding"))
    ended = tunnelcalc("tune", project, *asked, folder=project)
    assert (ended.returncode, ended.stderr) == (0, "")
    return project / "tuned" / "0001"


def found(advised: Path, chainage: str, parameter: str) -> dict[str, str]:
    (row,) = [
        row
        for row in rows(advised / "advice.csv")
        if (row["chainage_m"], row["parameter"]) == (chainage, parameter)
    ]
    return row


def run_with(folder: Path, joints: str) -> dict[str, dict[str, str]]:
    """What a run of its own says of the class, by chainage."""
    project = write(folder, PROJECT.replace(SETS, SETS + joints))
    return {row["chainage_m"]: row for row in rows(completed(project) / "classes.csv")}


def test_the_words_that_do_are_told_by_section(advised):
    shallow, deep = (found(advised, at, "joints") for at in (SHALLOW, DEEP))
    assert (shallow["value_now"], shallow["words_tried"]) == ("rigid", "rigid;sliding")
    assert shallow["adequate_words"] == "sliding"
    assert shallow["verdict"] == "adequate with these words"
    assert (deep["adequate_words"], deep["verdict"]) == ("", "no word is adequate")
    assert shallow["held"] == ";".join(f"steel_sets.{text}" for text in HELD)


def test_each_word_is_what_a_run_with_it_finds(advised, tmp_path):
    sliding = "".join(f"        {text.replace('=', ': ')}\n" for text in ("joints=sliding", *HELD))
    runs = {
        "rigid": run_with(tmp_path / "rigid", ""),
        "sliding": run_with(tmp_path / "sliding", sliding),
    }
    tried = [row for row in rows(advised / "trade_off.csv") if row["parameter"] == "joints"]
    assert len(tried) == 4
    for row in tried:
        expected = runs[row["parameter_value"]][row["chainage_m"]]
        names = ("factor_of_safety", "supported_closure_pct", "missing_pressure_mpa")
        for name in (*names, "governing_check", "adequate"):
            assert row[name] == expected[name], name


def test_a_number_varies_while_a_word_is_held(advised):
    """While the joints slide the set carries its slip load, of its thrust at yield no more than
    1 / 1.3. Area by the nominal depth, width, web, flange and root radius of the profile: 120,
    120, 6.5, 11 and 12 mm (EN 10365, from memory; independent calculation)."""
    area_mm2 = 2 * 120 * 11 + (120 - 2 * 11) * 6.5 + (4 - math.pi) * 12**2
    told = found(advised, SHALLOW, "slip_load_kn")
    assert told["value_now"] == ""
    assert told["adequate_from"] == "20"
    assert float(told["adequate_to"]) == pytest.approx(0.235 * area_mm2 / 1.3, abs=1e-3)
    assert "steel_sets.joints=sliding" in told["held"]


def test_the_figures_of_both_are_written(advised):
    drawn = {path.name for path in advised.iterdir() if path.suffix in (".svg", ".png")}
    names = ("trade_off_steel_sets_joints", "trade_off_steel_sets_slip_load_kn")
    assert drawn == {f"{name}.{ending}" for name in names for ending in ("svg", "png")}


def test_without_a_plugin_that_draws_the_tables_are_written(tmp_path):
    registry = load_plugins()
    registry.remove_plugin("report")
    project = write(tmp_path / "project")
    tuned = tune(project, registry, [JOINTS], [f"steel_sets.{text}" for text in HELD])
    names = sorted(path.name for path in tuned.folder.iterdir())
    assert names == ["advice.csv", "trade_off.csv", "tune.json"]


REFUSED = {
    "what-a-word-needs": (
        (JOINTS,),
        ("joint_count=5",),
        [
            f'--vary holds "{JOINTS}", which needs more than the class states\n'
            "  allowed: steel_sets.slip_load_kn: a number above 0, at most 5000, in kN\n"
            "  fix: add --set steel_sets.slip_load_kn=VALUE\n",
            f'--vary holds "{JOINTS}", which needs more than the class states\n'
            "  allowed: steel_sets.joint_travel_mm: a number above 0, at most 2000, in mm\n"
            "  fix: add --set steel_sets.joint_travel_mm=VALUE\n",
        ],
    ),
    "of-no-use": (
        (SLIP, "steel_sets.spacing_m=0.5:2"),
        ("joint_count=5",),
        [
            f'--vary holds "{SLIP}", which has no use in what is tried\n'
            "  allowed: slip_load_kn only where joints is sliding\n"
            "  fix: add --set steel_sets.joints=sliding, or leave it out\n",
            '--set holds "steel_sets.joint_count=5", which has no use in what is tried\n'
            "  allowed: joint_count only where joints is sliding\n"
            "  fix: add --set steel_sets.joints=sliding, or leave it out\n",
        ],
    ),
    "all-that-is-misspelt": (
        ("steel_sets.joints=rigid,slidin", "steel_set.spacing_m=1:2"),
        ("joint_cont=5", "contact=glued", "spacing_m=-1", "spacing_m_=high"),
        [
            '--set holds "steel_sets.contact=glued", which has no word that can be used\n'
            "  allowed: embedded or blocked\n"
            "  fix: name one of them\n",
            '--set holds "steel_sets.spacing_m=-1", which has no value that can be used\n'
            "  allowed: a number at least 0.1, at most 10, in m\n"
            "  fix: correct the value\n",
            '--set holds "steel_sets.spacing_m_=high", which has no parameter that can be used\n',
            '--set holds "steel_sets.joint_cont=5", which has no parameter that can be used\n',
            '  fix: did you mean "joint_count"?\n',
            '--vary holds "steel_sets.joints=rigid,slidin", which has no word that can be used\n'
            "  allowed: rigid or sliding\n"
            '  fix: did you mean "sliding"?\n',
            '--vary holds "steel_set.spacing_m=1:2", which has no element that can be used\n',
        ],
    ),
    "twice": (
        ("steel_sets.spacing_m=1:2", "steel_sets.spacing_m=1:3"),
        (),
        [
            '--vary holds "steel_sets.spacing_m=1:3", whose parameter was given before\n'
            "  allowed: each parameter once\n"
            "  fix: leave one of the two out\n"
        ],
    ),
    "the-same-word-twice": (
        ("steel_sets.joints=rigid,sliding,rigid",),
        (),
        [
            '--vary holds "steel_sets.joints=rigid,sliding,rigid", which names "rigid" more than '
            "once\n  allowed: each word once\n  fix: leave the others out\n"
        ],
    ),
    "held-and-varied-alone": (
        ("steel_sets.spacing_m=1:2",),
        ("spacing_m=1.5",),
        [
            '--set holds "steel_sets.spacing_m=1.5", which --vary changes\n'
            "  allowed: what holds while something else varies\n"
            "  fix: leave it out\n"
        ],
    ),
    "stronger-than-the-profile": (
        (JOINTS,),
        ("joint_count=5", "slip_load_kn=900", "joint_travel_mm=200"),
        [
            f'--vary holds "{JOINTS}", which does not fit with "sliding"\n'
            "  allowed: values that fit\n"
            "  fix: slip_load_kn is 900 kN; the profile yields in thrust at 799.144 kN, before "
            "the joints slide; correct the slip load, or take a stronger profile\n"
        ],
    ),
}


@pytest.mark.parametrize("name", REFUSED)
def test_every_problem_is_told_at_once(tmp_path, name):
    vary, held, told = REFUSED[name]
    project = write(tmp_path / "project")
    before = files_of(project)
    ended = tunnelcalc("tune", project, *options(vary, held), folder=project)
    assert (ended.returncode, ended.stdout) == (2, "")
    for message in told:
        assert message in ended.stderr
    count = sum(message.startswith("--") for message in told)
    assert ended.stderr.endswith(f"{count} problem{'s' if count > 1 else ''} found\n")
    assert files_of(project) == before


OWN = """\
designation,section_area_mm2,section_inertia_mm4,section_depth_mm
MY 1,3400,8640000,120
MY 2,7800,57000000,200
"""


def write_with_own(folder: Path, profile: str) -> Path:
    """The project with sets of a section of its own table."""
    key = "tables: {steel_sets: {profile: sections.csv}}\nsupport_classes:\n"
    text = PROJECT.replace("support_classes:\n", key)
    project = write(folder, text.replace("profile: HEB 120", f"profile: {profile}"))
    (project / "sections.csv").write_text(OWN, encoding="utf-8")
    return project


def test_words_of_the_projects_own_table_vary_as_a_run_with_each_finds(tmp_path):
    project = write_with_own(tmp_path / "project", "MY 1")
    vary = ("--vary", "steel_sets.profile=MY 1,MY 2,HEB 200", "--vary", "steel_sets.spacing_m=1:2")
    ended = tunnelcalc("tune", project, *vary, folder=project)
    assert (ended.returncode, ended.stderr) == (0, "")
    tried = rows(project / "tuned" / "0001" / "trade_off.csv")
    named = ("factor_of_safety", "supported_closure_pct", "adequate")
    for word in ("MY 1", "MY 2", "HEB 200"):
        run_folder = completed(write_with_own(tmp_path / word, word))
        expected = {row["chainage_m"]: row for row in rows(run_folder / "classes.csv")}
        found = [row for row in tried if row["parameter_value"] == word]
        assert found
        for row in found:
            assert all(row[name] == expected[row["chainage_m"]][name] for name in named), word


def test_a_word_of_the_projects_table_is_suggested_among_few(tmp_path):
    project = write_with_own(tmp_path / "project", "MY 1")
    ended = tunnelcalc("tune", project, "--vary", "steel_sets.profile=MY 11", folder=project)
    assert ended.returncode == 2
    assert 'did you mean "MY 1"?' in ended.stderr
    assert "more\n" in ended.stderr  # of many words few are listed
    assert len(ended.stderr) < 400


def test_a_plugin_that_fails_is_no_mistake_of_the_user(tmp_path, monkeypatch, capsys):
    def fails(*_: object) -> None:
        raise KeyError("anything")

    project = write(tmp_path / "project")
    # The project itself is judged first, then what is tried.
    calls = iter([lambda *_: (), lambda *_: (), lambda *_: ()])
    monkeypatch.setattr(SteelSets, "misfits", lambda *given: next(calls, fails)(*given))
    ended = main(["tune", str(project), "--vary", "steel_sets.spacing_m=1:2"])
    assert ended == 1
    told = capsys.readouterr().err
    assert "the plugin of steel_sets failed with KeyError" in told
    assert "problem" not in told


def test_a_word_that_ages_needs_the_rate_of_advance(tmp_path):
    shotcrete = (
        "      - kind: shotcrete\n        thickness_mm: 60\n        strength_mpa: 25\n"
        "        modulus_gpa: 10\n        poisson_ratio: 0.2\n"
    )
    project = write(tmp_path / "project", PROJECT.replace(SETS, shotcrete))
    vary = ("tune", project, "--vary", "shotcrete.hardening=meschke_1996")
    ended = tunnelcalc(*vary, folder=project)
    assert ended.returncode == 2
    assert "advance_m_per_day is missing: shotcrete hardens while the face moves on" in ended.stderr
    tuned = tune(project, load_plugins(), [vary[-1]], ["advance_m_per_day=3"])
    assert tuned.missing == ()
    assert {row["words_tried"] for row in rows(tuned.folder / "advice.csv")} == {"meschke_1996"}

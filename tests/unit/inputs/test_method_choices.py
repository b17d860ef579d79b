"""Methods by ground unit: what a project may choose, and what each choice asks of the ground."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import Damage
from unit.inputs.arriving import ground_key, project_key, table
from unit.inputs.reading import read, told

UNITS = {
    "ground_unit": ("sandstone", "siltstone", "gouge"),
    "unit_weight_kn_m3": ("25", "25.5", "22"),
    "stress_ratio": ("1", "0.9", ""),
    "intact_strength_mpa": ("55", "20", "3"),
    "mi": ("17", "7", "8"),
    "gsi": ("62", "35", "12"),
    "disturbance": ("0", "0", "0"),
    "poisson_ratio": ("0.25", "0.28", "0.3"),
    "dilation_deg": ("0", "2", "0"),
}
GIVEN = {"strength": "hoek_brown_2002", "ground_reaction": "hoek_brown_perfectly_plastic"}
LINE = {"friction_angle_deg": ("", "", "24"), "cohesion_mpa": ("", "", "0.12")}
MODULUS = {"rock_mass_modulus_mpa": ("", "", "400")}


def units(**columns: tuple[str, str, str]) -> Damage:
    """The units table with more columns, or with others; `None` leaves one out."""
    chosen = {name: cells for name, cells in {**UNITS, **columns}.items() if cells is not None}
    lines = zip(*chosen.values(), strict=True)
    return table("units.csv", ",".join(chosen), *(",".join(line) for line in lines))


def methods(**steps: str) -> Damage:
    """Each step's value as YAML."""
    return project_key("methods:\n" + "".join(f"  {s}: {v}\n" for s, v in steps.items()))


def of_gouge(**steps: str) -> Damage:
    """Methods of the gouge alone."""
    return methods(**{step: f"{{by_unit: {{gouge: {name}}}}}" for step, name in steps.items()})


STRAIGHT = of_gouge(strength="mohr_coulomb", ground_reaction="mohr_coulomb_perfectly_plastic")

BRITTLE = methods(ground_reaction="hoek_brown_brittle")
ASKED = ground_key("  estimates: {residual_gsi: [measured, cai_2007]}\n")


class TestWhatMayBeChosen:
    def test_a_method_of_one_unit_stands_beside_the_default_of_the_others(self, tmp_path: Path):
        project = read(tmp_path, STRAIGHT, units(**LINE, **MODULUS))
        choice = project.methods["strength"]
        assert choice.names == ("hoek_brown_2002", "mohr_coulomb")
        assert choice.of_unit("gouge") == "mohr_coulomb"
        assert choice.of_unit("sandstone") == "hoek_brown_2002"
        number = dict(
            zip(project.ground["ground_unit"], project.ground["strength_method"], strict=True)
        )
        assert number == {"sandstone": 0, "siltstone": 0, "gouge": 1}

    def test_a_default_of_the_projects_own_is_for_all_units_that_are_not_named(self, tmp_path):
        chosen = methods(
            deformation_modulus="{default: hoek_2002, by_unit: {gouge: hoek_diederichs_2006}}"
        )
        choice = read(tmp_path, chosen).methods["deformation_modulus"]
        assert choice.names == ("hoek_2002", "hoek_diederichs_2006")
        assert choice.of_unit("siltstone") == "hoek_2002"

    def test_one_method_for_all_needs_no_column_of_numbers(self, tmp_path: Path):
        project = read(tmp_path, methods(strength="hoek_brown_2002"))
        assert not any(name.endswith("_method") for name in project.ground)

    def test_a_unit_that_nobody_has_is_told_with_the_nearest_name(self, tmp_path: Path):
        wrong = methods(deformation_modulus="{by_unit: {goudge: hoek_2002}}")
        assert told(tmp_path, wrong) == [
            'project.yaml:10:35: key "methods.deformation_modulus.by_unit" names the ground unit '
            '"goudge", which no interval has'
        ]

    def test_units_that_nobody_has_are_told_each_in_its_line(self, tmp_path: Path):
        named = (
            "\n    by_unit:\n      gouge: hoek_2002\n      clay: hoek_2002\n      marl: hoek_2002"
        )
        found = told(tmp_path, methods(deformation_modulus=named))
        assert [line.split(" ", 1)[0] for line in found] == [
            "project.yaml:13:7:",
            "project.yaml:14:7:",
        ]

    def test_a_law_that_the_strength_of_its_unit_does_not_serve_is_refused(self, tmp_path: Path):
        wrong = of_gouge(strength="mohr_coulomb")
        assert told(tmp_path, wrong, units(**LINE, **MODULUS)) == [
            'project.yaml:10:24: the ground_reaction method is "hoek_brown_perfectly_plastic", '
            'which needs a, mb, s; the strength "mohr_coulomb" does not give it '
            '(ground unit "gouge")'
        ]

    @pytest.mark.parametrize(
        ("law", "place"),
        [
            ("mohr_coulomb_brittle", "10:3"),
            ("{default: mohr_coulomb_brittle, by_unit: {gouge: elastic}}", "10:21"),
            ("{by_unit: {gouge: mohr_coulomb_brittle}}", "10:31"),
        ],
    )
    def test_a_law_that_does_not_fit_is_told_where_it_is_chosen(self, tmp_path, law, place):
        first, *_ = told(tmp_path, methods(ground_reaction=law))
        assert first.startswith(f"project.yaml:{place}: the ground_reaction method is")

    def test_laws_of_two_units_that_do_not_fit_are_told_each_in_its_line(self, tmp_path: Path):
        lines = (f"\n      {unit}: mohr_coulomb_brittle" for unit in ("gouge", "sandstone"))
        named = f"\n    by_unit:{''.join(lines)}"
        found = told(tmp_path, methods(ground_reaction=named))
        misfits = [line.split(" ", 1)[0] for line in found if "does not give it" in line]
        assert misfits == ["project.yaml:12:7:", "project.yaml:13:7:"]

    def test_a_residual_straight_line_is_not_given_by_the_curved_criterion(self, tmp_path: Path):
        wrong = of_gouge(ground_reaction="mohr_coulomb_brittle")
        first, *_ = told(tmp_path, wrong)
        assert "needs residual_cohesion_mpa, residual_friction_angle_deg" in first

    def test_a_disturbed_ring_needs_a_strength_that_disturbance_weakens(self, tmp_path: Path):
        wrong = of_gouge(
            strength="hoek_brown_constants", ground_reaction="hoek_brown_disturbed_ring"
        )
        constants = {"mb": ("", "", "1.5"), "s": ("", "", "0.002"), "a": ("", "", "0.5")}
        thickness = {"disturbed_thickness_m": ("", "", "1")}
        assert told(tmp_path, wrong, units(**constants, **thickness, **MODULUS)) == [
            'project.yaml:11:31: the ground_reaction method is "hoek_brown_disturbed_ring", which '
            'needs strength weakened by disturbance; the strength "hoek_brown_constants" does not '
            'give it (ground unit "gouge")'
        ]

    def test_the_straight_line_law_takes_the_equivalent_line_of_the_curved_one(self, tmp_path):
        read(tmp_path, of_gouge(ground_reaction="mohr_coulomb_perfectly_plastic"))

    @pytest.mark.parametrize(
        ("value", "what"),
        [
            ("{by_unit: {gouge: no_such}}", 'holds "no_such"'),
            ("{default: no_such, by_unit: {gouge: hoek_2002}}", 'holds "no_such"'),
            ("{default: hoek_2002}", "is missing"),
            ("{by_unit: {gouge: hoek_2002}, unit: x}", "is unknown"),
            ("[hoek_2002]", "list"),
        ],
    )
    def test_what_is_no_choice_is_refused(self, tmp_path: Path, value: str, what: str):
        first, *_ = told(tmp_path, methods(deformation_modulus=value))
        assert what in first


class TestWhatAMethodRequires:
    def test_a_value_that_only_one_unit_needs_is_asked_of_it_alone(self, tmp_path: Path):
        # The sandstone and the siltstone lack the straight line, the gouge the index.
        columns = {**LINE, **MODULUS, "gsi": ("62", "35", ""), "mi": ("17", "7", "")}
        project = read(tmp_path, STRAIGHT, units(**columns))
        assert project.ground.count > 0

    def test_a_column_that_nobody_gives_is_told_once(self, tmp_path: Path):
        found = told(tmp_path, STRAIGHT, units(**MODULUS))
        assert found == [
            'ground.csv:1: column "friction_angle_deg" is missing: neither ground.csv nor '
            "units.csv gives it",
            'ground.csv:1: column "cohesion_mpa" is missing: neither ground.csv nor units.csv '
            "gives it",
        ]

    def test_a_value_that_is_missing_is_told_where_the_interval_stands(self, tmp_path: Path):
        lacking = {**LINE, "cohesion_mpa": ("0.5", "", "")}
        assert told(tmp_path, STRAIGHT, units(**lacking, **MODULUS)) == [
            'ground.csv:5: column "cohesion_mpa" has no value here and none for its ground unit'
        ]

    def test_what_the_default_method_needs_is_asked_of_every_unit(self, tmp_path: Path):
        assert told(tmp_path, units(gsi=("62", "35", ""))) == [
            'ground.csv:5: column "gsi" has no value here and none for its ground unit'
        ]

    def test_a_value_outside_the_range_of_a_method_is_told_once_a_unit(self, tmp_path: Path):
        chosen = methods(deformation_modulus="serafim_pereira_1983")
        found = told(tmp_path, chosen, units(rmr89=("70", "40", "20")))
        assert found == [
            'units.csv:2:10: column "rmr89" is 70, outside the range of the method '
            "serafim_pereira_1983"
        ]

    def test_a_value_of_the_ground_table_outside_a_range_is_told_in_its_cell(self, tmp_path):
        chosen = methods(deformation_modulus="serafim_pereira_1983")
        cell = table(
            "ground.csv",
            "from_m,to_m,ground_unit,cover_m,rmr89",
            "0,45,sandstone,60,50",
            "45,70,siltstone,75,51",
            "70,120,sandstone,90,0",
            "120,150,gouge,200,55",
        )
        assert told(tmp_path, chosen, cell) == [
            'ground.csv:3:5: column "rmr89" is 51, outside the range of the method '
            "serafim_pereira_1983",
            'ground.csv:5:5: column "rmr89" is 55, outside the range of the method '
            "serafim_pereira_1983",
        ]

    def test_the_ends_of_a_methods_range_are_its_own(self, tmp_path: Path):
        chosen = methods(deformation_modulus="bieniawski_1978")
        (first,) = told(tmp_path, chosen, units(rmr89=("70", "50", "100")))
        assert "is 50, outside the range of the method bieniawski_1978" in first

    def test_a_measured_modulus_makes_the_needs_of_an_estimate_void(self, tmp_path: Path):
        chosen = methods(deformation_modulus="serafim_pereira_1983")
        measured = {"rock_mass_modulus_mpa": ("9000", "800", "200")}
        project = read(tmp_path / "none", chosen, units(**measured))
        assert set(project.ground["rock_mass_modulus_mpa"].tolist()) == {9000, 800, 200}
        outside = {**measured, "rmr89": ("70", "", "90")}
        read(tmp_path / "outside", chosen, units(**outside))
        lacking = {"rock_mass_modulus_mpa": ("9000", "", "200"), "rmr89": ("70", "", "90")}
        assert told(tmp_path / "some", chosen, units(**lacking)) == [
            'ground.csv:3: column "rmr89" has no value here and none for its ground unit'
        ]

    def test_residual_strength_is_asked_for_where_the_law_needs_it(self, tmp_path: Path):
        chosen = of_gouge(ground_reaction="hoek_brown_brittle")
        read(tmp_path / "given", chosen, units(residual_gsi=("", "", "8")))
        (missing,) = told(tmp_path / "missing", chosen)
        assert 'column "residual_gsi" is missing' in missing

    def test_the_critical_strain_is_asked_for_by_softening_alone(self, tmp_path: Path):
        chosen = of_gouge(ground_reaction="hoek_brown_softening")
        (missing,) = told(tmp_path, chosen, units(residual_gsi=("", "", "8")))
        assert 'column "critical_shear_strain" is missing' in missing


class TestIdleValues:
    def test_a_value_that_no_chosen_method_reads_is_noted(self, tmp_path: Path):
        project = read(tmp_path, units(rmr89=("60", "", "20")))
        assert "given, but no method that the project chose reads it: rmr89" in project.warnings

    def test_residual_strength_without_a_law_that_needs_it_is_noted(self, tmp_path: Path):
        chosen = of_gouge(ground_reaction="hoek_brown_brittle")
        project = read(tmp_path, chosen, units(residual_gsi=("30", "", "8")))
        notes = [text for text in project.warnings if text.startswith("residual_gsi")]
        assert notes == ["residual_gsi is given for sandstone, where no chosen method reads it"]

    def test_a_thickness_that_no_law_knows_is_noted(self, tmp_path: Path):
        thickness = {"disturbed_thickness_m": ("1.5", "", "")}
        assert any(
            "disturbed_thickness_m" in w for w in read(tmp_path, units(**thickness)).warnings
        )

    def test_what_is_read_is_not_noted(self, tmp_path: Path):
        project = read(tmp_path, STRAIGHT, units(**LINE, **MODULUS))
        assert not any(
            text.endswith("reads it") or "reads it: " in text for text in project.warnings
        )


class TestResidualStrength:
    def test_above_the_peak_it_is_refused_once_a_unit(self, tmp_path: Path):
        chosen = methods(ground_reaction="hoek_brown_brittle")
        assert told(tmp_path, chosen, units(residual_gsi=("63", "30", "8"))) == [
            'units.csv:2:10: column "residual_gsi" is 63, above gsi, 62'
        ]

    def test_equal_to_the_peak_it_is_accepted(self, tmp_path: Path):
        read(
            tmp_path,
            of_gouge(ground_reaction="hoek_brown_brittle"),
            units(residual_gsi=("", "", "12")),
        )

    @pytest.mark.parametrize(
        ("column", "cell"),
        [("residual_friction_angle_deg", "25"), ("residual_cohesion_mpa", "0.13")],
    )
    def test_of_the_straight_line_too(self, tmp_path: Path, column: str, cell: str):
        chosen = of_gouge(strength="mohr_coulomb", ground_reaction="mohr_coulomb_brittle")
        residual = {
            "residual_friction_angle_deg": ("", "", "20"),
            "residual_cohesion_mpa": ("", "", "0"),
            column: ("", "", cell),
        }
        (first,) = told(tmp_path, chosen, units(**LINE, **MODULUS, **residual))
        assert first.startswith("units.csv:4:1")
        assert f'column "{column}" is {cell}, above {column.removeprefix("residual_")}' in first

    @pytest.mark.parametrize(("column", "cell"), [("residual_mb", "1.6"), ("residual_s", "0.01")])
    def test_of_entered_constants_too(self, tmp_path: Path, column: str, cell: str):
        chosen = of_gouge(strength="hoek_brown_constants", ground_reaction="hoek_brown_brittle")
        constants = {
            "mb": ("", "", "1.5"),
            "s": ("", "", "0.002"),
            "a": ("", "", "0.5"),
            "residual_mb": ("", "", "0.6"),
            "residual_s": ("", "", "0"),
            "residual_a": ("", "", "0.5"),
        }
        read(tmp_path / "sound", chosen, units(**constants, **MODULUS))
        constants[column] = ("", "", cell)
        (first,) = told(tmp_path / "above", chosen, units(**constants, **MODULUS))
        assert f'column "{column}" is {cell}, above {column.removeprefix("residual_")}' in first


class TestEstimatedResidualIndex:
    """Cai et al. (2007): GSIr = GSI exp(-0.0134 GSI), used only where the project asks for it."""

    def test_it_is_not_used_unasked(self, tmp_path: Path):
        (missing,) = told(tmp_path, BRITTLE)
        assert 'column "residual_gsi" is missing' in missing

    def test_asked_for_it_fills_what_was_not_measured(self, tmp_path: Path):
        project = read(tmp_path, BRITTLE, ASKED, units(residual_gsi=("", "20", "")))
        of_unit = dict(
            zip(project.ground["ground_unit"], project.ground["residual_gsi"], strict=True)
        )
        # 62 exp(-0.8308) and 12 exp(-0.1608), worked by hand.
        assert of_unit["sandstone"] == pytest.approx(27.0134, abs=1e-3)
        assert of_unit["siltstone"] == 20
        assert of_unit["gouge"] == pytest.approx(10.2175, abs=1e-3)

    def test_above_the_index_where_it_would_fall_again_it_is_refused(self, tmp_path: Path):
        # 1 / 0.0134 = 74.63: beyond it better ground would have less residual strength.
        better = units(gsi=("74.6", "74.7", "12"))
        (first,) = told(tmp_path, BRITTLE, ASKED, better)
        assert first.startswith("units.csv:3:6:")
        assert "gives no residual_gsi: gsi 74.7 is outside the range of its relation" in first

    def test_better_ground_that_needs_no_residual_strength_does_not_stop_it(self, tmp_path: Path):
        read(
            tmp_path,
            of_gouge(ground_reaction="hoek_brown_brittle"),
            ASKED,
            units(gsi=("80", "35", "12")),
        )

"""The key `flags`: what is taken, and what is told."""

from __future__ import annotations

from pathlib import Path

import pytest
import yaml
from unit.inputs.reading import read, told

from tunnelcalc.inputs.flag_settings import editable
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.validity import FlagSettings, Level, Override, Side, ThresholdSetting

FLAGS = {flag.name: flag for flag in load_plugins().flags(())}
ACCEPTED = {
    "flag": "shallow_cover",
    "from_m": 100,
    "to_m": 120,
    "person": "A. Person",
    "reason": "invented",
}


def with_flags(value: object):
    """Adds the key `flags` at the end of the project."""

    def damage(project: Path) -> None:
        file = project / "project.yaml"
        added = yaml.safe_dump({"flags": value}, sort_keys=False)
        file.write_text(file.read_text(encoding="utf-8") + added, encoding="utf-8")

    return damage


def edited(**thresholds: object):
    return with_flags({"thresholds": thresholds})


def accepted(*overrides: dict[str, object]):
    return with_flags({"overrides": [{**ACCEPTED, **override} for override in overrides]})


def test_without_the_key_nothing_is_edited_and_not_assessed_counts_as_advisory(tmp_path: Path):
    assert read(tmp_path).flags == FlagSettings("advisory", (), ())


def test_everything_that_the_key_says_stands_in_the_project(tmp_path: Path):
    said = {
        "not_assessed": "outside",
        "thresholds": {
            "shallow_cover": {"advisory_below": 8, "origin": "guideline, invented"},
            "stress_ratio": {"outside_above": 3},
        },
        "overrides": [ACCEPTED],
    }
    assert read(tmp_path, with_flags(said)).flags == FlagSettings(
        "outside",
        (
            ThresholdSetting(
                "shallow_cover", Level.ADVISORY, Side.BELOW, 8.0, "guideline, invented"
            ),
            ThresholdSetting("stress_ratio", Level.OUTSIDE, Side.ABOVE, 3.0, ""),
        ),
        (Override("shallow_cover", 100.0, 120.0, "A. Person", "invented"),),
    )


def lines_of(tmp_path: Path, damage) -> str:
    """The one problem, without its place."""
    (line,) = told(tmp_path, damage)
    file, _, rest = line.partition(":")
    assert file == "project.yaml"
    return rest.split(": ", 1)[1]


@pytest.mark.parametrize(
    ("damage", "expected"),
    [
        pytest.param(
            with_flags({"not_assessed": "clear"}),
            'key "flags.not_assessed" holds "clear"',
            id="not-assessed-is-never-clear",
        ),
        pytest.param(
            edited(shalow_cover={"advisory_below": 8}),
            'key "flags.thresholds.shalow_cover" is unknown',
            id="unknown-flag",
        ),
        pytest.param(
            edited(low_gsi={"outside_below": 8}),
            'key "flags.thresholds.low_gsi.outside_below" is unknown',
            id="side-that-the-flag-has-not",
        ),
        pytest.param(
            edited(swelling={"advisory_above": 1}),
            'key "flags.thresholds.swelling" is a flag of yes or no: it has no threshold',
            id="yes-or-no",
        ),
        pytest.param(
            edited(low_gsi={"origin": "x"}),
            'key "flags.thresholds.low_gsi" states no threshold',
            id="no-threshold",
        ),
        pytest.param(
            edited(low_gsi={"advisory_below": "many"}),
            'key "flags.thresholds.low_gsi.advisory_below" holds "many", which is not a number',
            id="no-number",
        ),
        pytest.param(
            edited(shallow_cover={"advisory_below": 3}),
            'key "flags.thresholds.shallow_cover.advisory_below" is 3, out of order with '
            "outside_below, which is 4",
            id="advisory-beyond-the-flags-own-outside",
        ),
        pytest.param(
            edited(squeezing={"advisory_above": 4, "outside_above": 3}),
            'key "flags.thresholds.squeezing.outside_above" is 3, out of order with '
            "advisory_above, which is 4",
            id="outside-nearer-than-advisory",
        ),
        pytest.param(
            edited(stress_ratio={"advisory_below": 1.5}),
            'key "flags.thresholds.stress_ratio.advisory_below" is 1.5, out of order with '
            "advisory_above, which is 1.25",
            id="sides-that-cross",
        ),
        pytest.param(
            accepted({"flag": "shallow_covr"}),
            'key "flags.overrides[1].flag" holds "shallow_covr"',
            id="override-of-no-flag",
        ),
        pytest.param(
            accepted({"to_m": 100}),
            'key "flags.overrides[1].to_m" is 100 m along the axis, not above from_m, which is 100',
            id="override-of-no-length",
        ),
        pytest.param(
            accepted({"person": " "}),
            'key "flags.overrides[1].person" is empty',
            id="override-by-nobody",
        ),
        pytest.param(
            accepted({}, {"from_m": 110, "to_m": 120}),
            'key "flags.overrides[2].from_m" overlaps another override of "shallow_cover"',
            id="override-twice",
        ),
        pytest.param(
            accepted({"from_m": 100, "to_m": 100.5}),
            'override of "shallow_cover" holds no section between 100 and 100.5 m',
            id="override-of-no-section",
        ),
        pytest.param(
            accepted({"to_m": 150.5}),
            'key "flags.overrides[1].to_m" holds "150.5", which lies beyond the end of the '
            "alignment",
            id="override-beyond-the-end",
        ),
        pytest.param(
            accepted({"from_m": -20}),
            'key "flags.overrides[1].from_m" holds "-20", which lies before the start of the '
            "alignment",
            id="override-before-the-start",
        ),
        pytest.param(
            accepted({"from_m": 900, "to_m": 950}),
            'key "flags.overrides[1].to_m" holds "950", which lies beyond the end of the alignment',
            id="override-wholly-beyond-is-told-once",
        ),
    ],
)
def test_what_is_wrong_is_told_with_its_place(tmp_path: Path, damage, expected: str):
    assert lines_of(tmp_path, damage) == expected


def test_a_person_and_a_reason_are_required(tmp_path: Path):
    bare = {key: ACCEPTED[key] for key in ("flag", "from_m", "to_m")}
    found = told(tmp_path, with_flags({"overrides": [bare]}))
    assert [line.split('"')[1] for line in found] == [
        "flags.overrides[1].person",
        "flags.overrides[1].reason",
    ]


def test_an_override_may_end_where_the_alignment_ends(tmp_path: Path):
    (override,) = read(tmp_path, accepted({"from_m": 0, "to_m": 150})).flags.overrides
    assert (override.from_m, override.to_m) == (0, 150)


def test_the_same_stretch_may_be_accepted_for_two_flags_and_stretches_may_meet(tmp_path: Path):
    damage = accepted({"to_m": 110}, {"flag": "low_gsi"}, {"from_m": 110})
    assert len(read(tmp_path, damage).flags.overrides) == 3


@pytest.mark.parametrize("name", sorted(name for name in FLAGS if editable(FLAGS[name])))
def test_every_threshold_of_every_flag_can_be_edited(tmp_path: Path, name: str):
    own = {key: threshold.value for key, threshold in editable(FLAGS[name]).items()}
    (settings,) = [read(tmp_path, edited(**{name: own})).flags]
    assert [setting.value for setting in settings.thresholds] == list(own.values())

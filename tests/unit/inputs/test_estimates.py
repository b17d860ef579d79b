"""Quality and strength from observations: hand values, preference, spread, refusals.

The relations are published: Hoek, Carter & Diederichs (2013), Hoek, Kaiser & Bawden (1995), Cai &
Kaiser (2006). Their values here are worked by hand from the printed equations.
"""

from __future__ import annotations

import math
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest
from end_to_end.projects import Damage, replaced
from unit.inputs.arriving import ground_key, observed
from unit.inputs.reading import read, told

from tunnelcalc.errors import InputError
from tunnelcalc.project import Project

NO_GSI = replaced("units.csv", ",gsi,", ",boundary_tolerance_m,")
"""The units table without the index: its numbers belong to a column that nobody computes with."""
NO_STRENGTH = replaced("units.csv", ",intact_strength_mpa,", ",boundary_tolerance_m,")


def order(quantity: str, *names: str) -> Damage:
    return ground_key(f"  estimates: {{{quantity}: [{', '.join(names)}]}}\n")


def of_units(project: Project, name: str) -> list[float]:
    """By interval, the one value of a column."""
    cuts = [0, 45, 70, 120, 150]
    found = []
    for start, end in pairwise(cuts):
        middle = project.ground["chainage_m"]
        values = project.ground[name][(middle > start) & (middle < end)]
        assert np.all(values == values[0]) or np.all(np.isnan(values))
        found.append(float(values[0]))
    return found


def block_volume(volume: float, condition: float) -> float:
    above = 26.5 + 8.79 * math.log(condition) + 0.9 * math.log(volume)
    return above / (1 + 0.0151 * math.log(condition) - 0.0253 * math.log(volume))


HAND = {
    # GSI = 1.5 JCond89 + RQD / 2
    "jcond89_rqd": (
        "jcond89,rqd_pct",
        ("25,80", "10,40", "20,50", "0,10"),
        [77.5, 35, 55, 5],
    ),
    # GSI = RMR89' - 5, from 23 on
    "rmr89_dry": ("rmr89_dry", ("67", "23", "40.5", "100"), [62, 18, 35.5, 95]),
    # GSI = 9 ln Q' + 44
    "q_prime": ("q_prime", ("1", "10", "0.1", "100"), [44, 64.7232658, 23.2767342, 85.4465317]),
    # Jc = 1 leaves (26.5 + 0.9 ln Vb) / (1 - 0.0253 ln Vb)
    "block_volume": (
        "block_volume_cm3,joint_condition",
        ("1,1", "1000,1", "1000000,2", "10000,0.5"),
        [
            26.5,
            (26.5 + 0.9 * 6.907755279) / (1 - 0.0253 * 6.907755279),
            block_volume(1e6, 2),
            block_volume(1e4, 0.5),
        ],
    ),
}


@pytest.mark.parametrize(
    ("name", "header", "cells", "values"), [(k, *v) for k, v in HAND.items()], ids=HAND
)
def test_each_relation_gives_its_published_value(tmp_path: Path, name, header, cells, values):
    project = read(tmp_path, NO_GSI, observed(header, *cells))
    np.testing.assert_allclose(of_units(project, "gsi"), values, rtol=1e-8)
    (gsi,) = [found for found in project.origins if found.quantity == "gsi"]
    assert set(gsi.origin.tolist()) == {"estimated"}
    assert all(method.startswith(f"{name}: ") for method in gsi.method.tolist())


def test_intact_strength_is_the_factor_of_the_project_times_the_point_load(tmp_path: Path):
    cells = ("2.5,24", "1,18", "3,22", "0.2,12")
    project = read(tmp_path, NO_STRENGTH, observed("point_load_mpa,point_load_factor", *cells))
    assert of_units(project, "intact_strength_mpa") == pytest.approx([60, 18, 66, 2.4])


def test_the_factor_may_stand_with_the_unit_and_the_index_with_the_interval(tmp_path: Path):
    factor = replaced("units.csv", "modulus_ratio\n", "modulus_ratio,point_load_factor\n")
    rows = (
        replaced("units.csv", "0,275\n", "0,275,20\n"),
        replaced("units.csv", "2,350\n", "2,350,15\n"),
        replaced("units.csv", ",,200\n", ",,200,10\n"),
    )
    load = observed("point_load_mpa", "3", "2", "4", "0.5")
    project = read(tmp_path, NO_STRENGTH, factor, *rows, load)
    assert of_units(project, "intact_strength_mpa") == pytest.approx([60, 30, 80, 5])


def test_an_index_without_a_factor_gives_no_strength(tmp_path: Path):
    lines = told(tmp_path, NO_STRENGTH, observed("point_load_mpa", "3", "2", "4", "0.5"))
    assert lines == [
        'ground.csv:1: column "intact_strength_mpa" is missing: neither ground.csv nor units.csv '
        "gives it"
    ]


TWO_SOURCES = observed("jcond89,rqd_pct,rmr89_dry", "20,60,75", ",,50", "25,70,", ",,")
"""By interval: 60 and 70; 45; 72.5; nothing. The units have 62, 35, 62, 12."""

ORDERS = {
    "measured-first": (("measured", "jcond89_rqd", "rmr89_dry"), [62, 35, 62, 12]),
    "rating-first": (("rmr89_dry", "jcond89_rqd", "measured"), [70, 45, 72.5, 12]),
    "joints-first": (("jcond89_rqd", "measured", "rmr89_dry"), [60, 35, 72.5, 12]),
}


@pytest.mark.parametrize(("names", "values"), ORDERS.values(), ids=ORDERS)
def test_the_first_source_that_an_interval_has_is_taken(tmp_path: Path, names, values):
    project = read(tmp_path, TWO_SOURCES, order("gsi", *names))
    assert of_units(project, "gsi") == values


@pytest.mark.parametrize("names", [names for names, _ in ORDERS.values()], ids=ORDERS)
def test_the_spread_between_all_sources_is_kept_whichever_is_taken(tmp_path: Path, names):
    project = read(tmp_path, TWO_SOURCES, order("gsi", *names))
    np.testing.assert_array_equal(of_units(project, "gsi_spread"), [10, 10, 10.5, np.nan])
    assert "gsi_spread" in project.ground_columns
    assert of_units(project, "estimates_differ") == [1, 1, 1, 0]


def test_sources_that_agree_do_not_raise_the_flag(tmp_path: Path):
    project = read(
        tmp_path,
        observed("jcond89,rqd_pct", "20,64", "10,40", "20,64", ","),
        order("gsi", "jcond89_rqd", "measured"),
    )
    np.testing.assert_array_equal(of_units(project, "gsi_spread"), [0, 0, 0, np.nan])
    assert not project.ground["estimates_differ"].any()


def test_the_origin_follows_the_source_that_was_taken(tmp_path: Path):
    project = read(tmp_path, TWO_SOURCES, order("gsi", "jcond89_rqd", "measured"))
    (gsi,) = [found for found in project.origins if found.quantity == "gsi"]
    assert gsi.from_m.tolist() == [0, 45, 70, 120]
    assert gsi.to_m.tolist() == [45, 70, 120, 150]
    assert gsi.value.tolist() == [60, 35, 72.5, 12]
    assert gsi.origin.tolist() == ["estimated", "unit", "estimated", "unit"]
    source = "jcond89_rqd: Hoek, Carter & Diederichs (2013), ARMA 13-672"
    assert gsi.method.tolist() == [source, "", source, ""]


def test_a_stated_value_that_the_order_does_not_name_is_not_taken(tmp_path: Path):
    lines = told(tmp_path, TWO_SOURCES, order("gsi", "jcond89_rqd", "rmr89_dry"))
    assert lines == ['ground.csv:5: column "gsi" has no value here and none for its ground unit']


def test_a_source_that_the_order_does_not_name_may_be_out_of_its_range(tmp_path: Path):
    wet = observed("rmr89_dry", "10", "10", "10", "10")
    project = read(tmp_path, wet, order("gsi", "measured"))
    assert of_units(project, "gsi") == [62, 35, 62, 12]


def problems(tmp_path: Path, *damages: Damage) -> list[str]:
    with pytest.raises(InputError) as caught:
        read(tmp_path, *damages)
    return str(caught.value).splitlines()


def test_several_sources_without_an_order_are_refused(tmp_path: Path):
    assert problems(tmp_path, TWO_SOURCES) == [
        (
            'ground.csv:2: column "gsi" has gsi from measured and jcond89_rqd and rmr89_dry, and '
            "the project does not say which to take"
        ),
        (
            '  interval 0 to 45 m, ground unit "sandstone" and 2 more intervals; '
            "allowed: a number above 0, at most 100"
        ),
        "  fix: state the order of preference under ground: estimates: gsi",
    ]


def test_a_wet_looking_rating_is_refused_once(tmp_path: Path):
    assert problems(tmp_path, NO_GSI, observed("rmr89_dry", "22", "40", "50", "60")) == [
        (
            'ground.csv:2:5: column "rmr89_dry" gives no gsi: rmr89_dry 22 is outside the range '
            "of its relation"
        ),
        (
            '  interval 0 to 45 m, ground unit "sandstone"; '
            "allowed: rmr89_dry 23 to 100 (Hoek, Kaiser & Bawden (1995))"
        ),
        "  fix: correct the observation, or leave it out and state gsi itself",
    ]


def test_an_observation_of_a_unit_is_told_once_and_where_it_stands(tmp_path: Path):
    rated = replaced("units.csv", ",gsi,", ",rmr89_dry,")
    lines = problems(
        tmp_path,
        rated,
        replaced("units.csv", "17,62", "17,12"),
        replaced("units.csv", "8,12", "8,40"),
    )
    assert lines == [
        (
            'units.csv:2:6: column "rmr89_dry" gives no gsi: rmr89_dry 12 is outside the range '
            "of its relation"
        ),
        '  ground unit "sandstone"; allowed: rmr89_dry 23 to 100 (Hoek, Kaiser & Bawden (1995))',
        "  fix: correct the observation, or leave it out and state gsi itself",
    ]


REFUSED = {
    "block-volume-beyond-its-chart": (
        (
            NO_GSI,
            observed("block_volume_cm3,joint_condition", "1,0.001", "1,1", "1,1", "1,1"),
        ),
        [
            'ground.csv:2:5: column "block_volume_cm3" gives no gsi: block_volume_cm3 1, '
            "joint_condition 0.001 is outside the range of its relation"
        ],
    ),
    "q-prime-too-low": (
        (NO_GSI, observed("q_prime", "0.001", "1", "1", "1")),
        [
            'ground.csv:2:5: column "q_prime" gives no gsi: q_prime 0.001 is outside the range of '
            "its relation"
        ],
    ),
    "point-load-too-high": (
        (
            NO_STRENGTH,
            observed("point_load_mpa,point_load_factor", "60,20", "1,20", "1,20", "1,20"),
        ),
        [
            'ground.csv:2:5: column "point_load_mpa" gives no intact_strength_mpa: point_load_mpa '
            "60, point_load_factor 20 is outside the range of its relation"
        ],
    ),
    "a-cell-that-is-no-number": (
        (NO_GSI, observed("jcond89,rqd_pct", "2O,50", "20,50", "20,50", "20,50")),
        ['ground.csv:2:5: column "jcond89" holds "2O", which is not a number'],
    ),
    "every-cell-out-of-range": (
        (NO_GSI, observed("jcond89,rqd_pct", "31,50", "31,50", "31,50", "31,50")),
        [
            f'ground.csv:{n}:5: column "jcond89" holds "31", which is out of range'
            for n in range(2, 6)
        ],
    ),
    "half-of-a-pair": (
        (NO_GSI, observed("jcond89,rqd_pct", "20,50", "20,", "20,50", "20,50")),
        ['ground.csv:3: column "gsi" has no value here and none for its ground unit'],
    ),
    "unknown-source": (
        (order("gsi", "measured", "rmr76"),),
        ['project.yaml:8:31: key "ground.estimates.gsi" holds "rmr76"'],
    ),
    "source-twice": (
        (order("gsi", "measured", "measured"),),
        [
            'project.yaml:8:31: key "ground.estimates.gsi" holds "measured", which stands already',
        ],
    ),
    "source-of-another-quantity": (
        (order("mi", "point_load"),),
        ['project.yaml:8:20: key "ground.estimates.mi" holds "point_load"'],
    ),
    "unknown-quantity": (
        (order("poisson_ratio", "measured"),),
        ['project.yaml:8:15: key "ground.estimates.poisson_ratio" is unknown'],
    ),
    "no-list": (
        (ground_key("  estimates: {gsi: measured}\n"),),
        ['project.yaml:8:15: key "ground.estimates.gsi" holds "measured"'],
    ),
}


@pytest.mark.parametrize(("damages", "lines"), REFUSED.values(), ids=REFUSED)
def test_an_estimate_that_cannot_be_made_is_refused(tmp_path: Path, damages, lines):
    assert told(tmp_path, *damages) == lines

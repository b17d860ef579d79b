"""Which part of a curve a figure shows: never squashed by a closure without bound."""

from __future__ import annotations

import math
import warnings
from dataclasses import replace

import numpy as np
import pytest
from tunnelcalc_report import page
from tunnelcalc_report.ground_reaction import _notes
from tunnelcalc_report.views import enlarged, whole

from tunnelcalc import api

SPRING = {0: api.INSTALLED, 1: api.CAPACITY, 2: api.BEYOND}


def curves(
    free_mm: float = 50.0, rest_mm: float = 30.0, start_mm: float = 10.0, capacity: float = 0.8
) -> api.SectionCurves:
    """Ground under 5 MPa and one element that rests at 0.4 MPa."""
    pressures = np.array([0.0, 0.4, 5.0])
    ground = api.ReactionOfGround(
        5.0, 2.0, pressures, np.array([free_mm, rest_mm, 0.0]), np.array([9.0, 6.0, 3.0])
    )
    stiffness = 0.4 / (rest_mm - start_mm) * 1000
    at = start_mm + np.array([0, 1, 1.2]) * capacity / stiffness * 1000
    pressure = np.array([0, 1, 1.2]) * capacity
    element = api.ReactionOfElement(
        "ring", 2.0, start_mm, stiffness, capacity, 0.4, 0.0, at, pressure, SPRING
    )
    support = api.ReactionOfClass((element,), at, pressure, 0.4, rest_mm, 6.0)
    profile = api.ClosureAlongDrive(np.zeros(1), np.zeros(1), np.zeros(1))
    case = api.CaseCurves("mean", ground, profile, support)
    return api.SectionCurves(
        title="Invented",
        chainage="5.00",
        chainage_m=5.0,
        from_m=0.0,
        to_m=10.0,
        ground_unit="",
        radius_m=3.0,
        closure_limit_pct=1.0,
        methods={},
        support_class="heavy",
        required_class="heavy",
        governing_case="mean",
        cases=(case,),
        envelopes=(),
        unknown=(),
    )


def test_the_whole_curve_is_shown_where_it_can_be_read():
    view = whole(curves())
    assert (view.left, view.right) == (0, pytest.approx(52.5))
    assert view.top > 5


def test_a_closure_without_bound_is_cut_and_told():
    absurd = curves(free_mm=1e7)
    assert whole(absurd).right == 180  # six times the closure at rest, and its limit
    assert any("1.00e+07 mm, is beyond" in note for note in _notes(absurd, *both(absurd)))


def test_an_unknown_closure_is_told():
    unknown = curves(free_mm=math.nan)
    assert math.isfinite(whole(unknown).right)
    assert "closure without support cannot be computed" in _notes(unknown, *both(unknown))


def both(of: api.SectionCurves):
    return enlarged(of), whole(of)


@pytest.mark.parametrize(
    ("free", "rest", "start"),
    [(50, 30, 10), (1e7, 12000, 11990), (0.61, 0.6, 0.55), (31, 30, 29.9)],
)
def test_the_enlarged_view_holds_installation_and_rest_at_a_readable_size(free, rest, start):
    view = enlarged(curves(free, rest, start))
    width = view.right - view.left
    assert view.left <= start < rest < view.right
    assert rest - start > 0.15 * width
    assert 0.15 < 0.4 / view.top < 0.9


def test_capacity_is_in_the_enlarged_view_unless_it_is_far():
    assert enlarged(curves(capacity=0.8)).top > 0.8
    far = curves(capacity=50.0)
    assert enlarged(far).top < 5
    assert "capacity beyond the axes at left: ring" in _notes(far, *both(far))


def with_elements(of: api.SectionCurves, *elements: api.ReactionOfElement) -> api.SectionCurves:
    (case,) = of.cases
    support = replace(case.support, elements=(*case.support.elements, *elements))
    return replace(of, cases=(replace(case, support=support),))


def element(label: str, start_mm: float, capacity: float) -> api.ReactionOfElement:
    """20 MPa/m, like the ring."""
    at = start_mm + np.array([0, 1, 1.2]) * capacity / 20 * 1000
    pressure = np.array([0, 1, 1.2]) * capacity
    return api.ReactionOfElement(
        label, 2.0, start_mm, 20.0, capacity, 0.0, 0.0, at, pressure, SPRING
    )


def test_all_that_lies_off_the_enlarged_axes_is_named():
    crowded = with_elements(
        curves(free_mm=900.0), *(element(f"late_{n}", 500.0 + n, 0.5) for n in range(3))
    )
    crowded = with_elements(crowded, element("strong", 12.0, 4.0), element("weak", 12.0, 0.2))
    crowded = replace(crowded, closure_limit_pct=9.0)
    view = enlarged(crowded)
    assert view.right < 50  # where the ring would reach its capacity; the closure limit: 270
    notes = _notes(crowded, view, whole(crowded))
    assert "the closure limit is beyond the axis at left" in notes
    assert "installed beyond the closure axis at left: late_0, late_1, late_2" in notes
    assert "capacity beyond the axes at left: ring, strong" in notes


def test_a_closure_limit_before_the_enlarged_axis_is_told():
    late = curves(free_mm=2000.0, rest_mm=1000.0, start_mm=990.0)
    assert enlarged(late).left > late.closure_limit_mm
    notes = _notes(late, *both(late))
    assert "the closure limit lies before the axis at left" in notes
    assert not any("closure limit" in note for note in _notes(curves(), *both(curves())))


def test_a_long_note_is_shown_to_its_last_word_above_the_caution():
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.figure import Figure

    notes = [f"capacity beyond the axes at left: {'a long name, ' * 60}the last"]
    figure = Figure(figsize=(page.WIDTH_IN, page.HEIGHT_IN))
    page.note(figure, notes)
    (text,) = figure.texts
    assert text.get_text().endswith("the last.")
    assert text.get_text().count("\n") > 2
    on_sheet = text.get_window_extent(FigureCanvasAgg(figure).get_renderer())
    box = on_sheet.transformed(figure.transFigure.inverted())
    _, legend_top = page.bottom_above_legend(1, notes)
    assert 0.03 < box.y0 < box.y1 < legend_top - page.LEGEND_ROW


def test_an_element_beyond_its_capacity_is_told():
    weak = curves(capacity=0.3)
    assert "ring is beyond its capacity at rest" in _notes(weak, *both(weak))


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (0.0, "0 mm"),
        (0.60649, "0.606 mm"),
        (45.18, "45.2 mm"),
        (1386.1, "1386 mm"),
        (49609.4, "49609 mm"),
        (2.93e7, "2.93e+07 mm"),
        (math.nan, "unknown"),
    ],
)
def test_closures_are_rounded_so_that_neighbours_can_be_told_apart(value, text):
    assert page.millimetres(value) == text


def test_a_users_own_settings_change_nothing_and_are_left_alone():
    import matplotlib as mpl

    with mpl.rc_context({"font.size": 30.0}):
        with page.drawing():
            assert mpl.rcParams["font.size"] == page.STYLE["font.size"]
        assert mpl.rcParams["font.size"] == 30.0


def test_a_letter_that_the_font_lacks_stops_nothing():
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        with page.drawing():
            warnings.warn("Glyph 38567 (x) missing from font(s) DejaVu Sans.", stacklevel=1)

"""The figure of a parameter: what is worst, which check governs there, and what a value buys."""

from __future__ import annotations

from dataclasses import replace
from xml.etree import ElementTree

import numpy as np
import pytest
from tunnelcalc_report.trade_off import (
    ParameterFigure,
    _drawn,
    adequate_m,
    governing_at_worst,
    spread,
)

from tunnelcalc import api

NAN = float("nan")


def trade_off() -> api.TradeOff:
    """Three values on three sections of 10, 20 and 30 m; the last is never computed."""
    factor = np.array([[0.5, 0.9, NAN], [1.4, 1.1, NAN], [2.0, 1.8, NAN]])
    governing = np.array(
        [["sets:yield", "b", "c"], ["a", "ring:hoop", "c"], ["a", "ring:hoop", "c"]]
    )
    return api.TradeOff(
        title="Invented",
        support_class="heavy",
        element="sets",
        parameter="spacing_m",
        unit="m",
        tried=(0.5, 1.0, 2.0),
        now=1.5,
        held=("sets.joints=sliding",),
        required_factor=1.3,
        closure_limit_pct=1.0,
        length_m=np.array([10.0, 20.0, 30.0]),
        factor_of_safety=factor,
        closure_pct=np.array([[2.0, 3.0, NAN], [0.9, 1.5, NAN], [0.5, 0.8, NAN]]),
        missing_pressure_mpa=np.zeros((3, 3)),
        governing=governing.astype(object),
        adequate=np.array([[False] * 3, [True, False, False], [True, True, False]]),
        evaluated=np.array([[True, True, False]] * 3),
    )


def test_the_worst_is_the_least_factor_and_the_largest_closure():
    of = trade_off()
    factor = spread(of.factor_of_safety, worst_is_least=True)
    closure = spread(of.closure_pct, worst_is_least=False)
    assert factor.worst.tolist() == [0.5, 1.1, 1.8]
    assert factor.median.tolist() == pytest.approx([0.7, 1.25, 1.9])
    assert closure.worst.tolist() == [3.0, 1.5, 0.8]
    assert closure.best.tolist() == [2.0, 0.9, 0.5]


def test_where_nothing_is_known_nothing_is_drawn():
    nothing = spread(np.full((2, 3), NAN), worst_is_least=True)
    assert np.all(np.isnan(nothing))
    unknown = replace(trade_off(), factor_of_safety=np.full((3, 3), NAN))
    assert governing_at_worst(unknown) == ["", "", ""]


def test_the_governing_check_is_that_of_the_worst_section():
    assert governing_at_worst(trade_off()) == ["sets:yield", "ring:hoop", "ring:hoop"]


def test_lengths_are_those_of_the_adequate_sections():
    assert adequate_m(trade_off()).tolist() == [0.0, 10.0, 30.0]


def figure_of(of: api.TradeOff, tmp_path, monkeypatch):
    """The figure as it is saved."""
    from tunnelcalc_report import page

    kept = []
    monkeypatch.setattr(page, "saved", lambda figure, folder, name: kept.append(figure) or ())
    with page.drawing():
        _drawn(of, tmp_path)
    return kept[0]


def test_lines_limits_and_the_value_now_stand_where_they_should(tmp_path, monkeypatch):
    factor, closure, length = figure_of(trade_off(), tmp_path, monkeypatch).axes
    assert factor.lines[0].get_ydata().tolist() == [0.5, 1.1, 1.8]
    assert closure.lines[0].get_ydata().tolist() == [3.0, 1.5, 0.8]
    assert length.lines[0].get_ydata().tolist() == [0.0, 10.0, 30.0]
    assert length.lines[0].get_drawstyle() == "steps-mid"  # a section is adequate or not
    for axes, limit in ((factor, 1.3), (closure, 1.0), (length, 60.0)):
        level = [line for line in axes.lines if list(line.get_ydata()) == [limit, limit]]
        assert len(level) == 1
        assert any(list(line.get_xdata()) == [1.5, 1.5] for line in axes.lines)
    assert length.get_xlabel() == "sets.spacing_m [m]"
    units = [axes.get_ylabel() for axes in (factor, closure, length)]
    assert units == ["factor of safety [-]", "closure [% of R]", "length [m]"]


def test_far_different_values_are_drawn_on_a_logarithmic_axis_that_says_so(tmp_path, monkeypatch):
    far = replace(trade_off(), closure_pct=trade_off().closure_pct * [[1.0, 100.0, 1.0]])
    _, closure, _ = figure_of(far, tmp_path, monkeypatch).axes
    assert closure.get_yscale() == "log"
    assert closure.get_title(loc="left") == "closure of the wall at rest, log scale"


def test_what_is_held_and_what_could_not_be_judged_is_told(tmp_path, monkeypatch):
    texts = [text.get_text() for text in figure_of(trade_off(), tmp_path, monkeypatch).texts]
    (note,) = [text for text in texts if text.startswith("Note: ")]
    assert "held meanwhile: sets.joints=sliding" in note
    assert "3 of 9 trials could not be evaluated" in note


def test_no_text_lies_over_another(tmp_path, monkeypatch):
    from matplotlib.backends.backend_agg import FigureCanvasAgg

    figure = figure_of(trade_off(), tmp_path, monkeypatch)
    canvas = FigureCanvasAgg(figure)
    canvas.draw()
    renderer = canvas.get_renderer()
    texts = [*figure.texts, *figure.legends[0].get_texts()]
    for axes in figure.axes:
        texts += [axes.xaxis.label, axes.yaxis.label, axes._left_title]
        texts += [label for label in axes.get_xticklabels() if axes is figure.axes[-1]]
    boxes = [text.get_window_extent(renderer) for text in texts if text.get_text()]
    for position, box in enumerate(boxes):
        assert not any(box.overlaps(other) for other in boxes[position + 1 :])


def words() -> api.TradeOff:
    return replace(
        trade_off(), parameter="joints", unit="", tried=("rigid", "sliding", "none"), now="rigid"
    )


def one_value() -> api.TradeOff:
    of = trade_off()
    tables = ("factor_of_safety", "closure_pct", "missing_pressure_mpa", "governing", "adequate")
    return replace(
        of,
        tried=(0.5,),
        evaluated=of.evaluated[:1],
        **{name: getattr(of, name)[:1] for name in tables},
    )


def unknown() -> api.TradeOff:
    nothing = np.full((3, 3), NAN)
    return replace(trade_off(), factor_of_safety=nothing, closure_pct=nothing, now=None)


def odd_names() -> api.TradeOff:
    odd = "=1 $x_{$ <script>alert(1)</script> ../" + 40 * "long "
    return replace(trade_off(), title=odd, support_class=odd, held=(odd,))


@pytest.mark.parametrize("of", [trade_off, words, one_value, unknown, odd_names])
def test_the_same_trade_off_gives_the_same_bytes_in_the_files_that_are_named(of, tmp_path):
    for folder in (tmp_path / "one", tmp_path / "two"):
        folder.mkdir()
        names = tuple(ParameterFigure().draw(of(), folder))
        assert sorted(path.name for path in folder.iterdir()) == sorted(names)
        assert {name.rpartition(".")[0] for name in names} == {of().file_name}
    for name in names:
        one, two = ((tmp_path / folder / name).read_bytes() for folder in ("one", "two"))
        assert one == two
        if name.endswith("svg"):
            ElementTree.fromstring(one)
            assert b"<script" not in one

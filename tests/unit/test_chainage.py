"""Chainage as it is written, and metres along the axis."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tunnelcalc.chainage import KM_PLUS_M, METRES, ChainageError, Equation, Notation

PLAIN = Notation()
KM = Notation(KM_PLUS_M)
FALLING = Notation(KM_PLUS_M, "K ", -1, 5000.0)
JUMP = Notation(KM_PLUS_M, equations=(Equation(1000.0, 1200.0),))
"""At axis metre 1000 the chainage jumps from 1+000 to 1+200: 1+100 does not exist."""
OVERLAP = Notation(KM_PLUS_M, equations=(Equation(1000.0, 900.0),))
"""At axis metre 1000 the chainage falls back to 0+900: 0+950 exists twice."""


def written(notation: Notation, x: float) -> str:
    (text,) = notation.written(np.array([x]))
    return text


@pytest.mark.parametrize(
    ("notation", "text", "metres"),
    [
        pytest.param(PLAIN, "12345.6", 12345.6, id="plain"),
        pytest.param(PLAIN, "12+345.60", 12345.6, id="km-plus-m-undeclared"),
        pytest.param(PLAIN, "-3.5", -3.5, id="plain-negative"),
        pytest.param(KM, "12+345.60", 12345.6, id="km-plus-m"),
        pytest.param(KM, "12345.6", 12345.6, id="plain-where-km-plus-m-is-written"),
        pytest.param(KM, "0+000", 0, id="zero"),
        pytest.param(KM, "-1+250.5", -1250.5, id="negative"),
        pytest.param(KM, "-0+250", -250, id="negative-below-a-kilometre"),
        pytest.param(KM, " 1+000 ", 1000, id="blanks-around"),
        pytest.param(FALLING, "K 5+000.00", 0, id="falling-start"),
        pytest.param(FALLING, "K4+000", 1000, id="falling-prefix-without-its-blank"),
        pytest.param(FALLING, "3+999.5", 1000.5, id="falling-without-prefix"),
        pytest.param(FALLING, "K -0+100", 5100, id="falling-beyond-zero"),
        pytest.param(JUMP, "1+000", 1000, id="jump-back"),
        pytest.param(JUMP, "1+200", 1000, id="jump-ahead"),
        pytest.param(JUMP, "1+300", 1100, id="jump-beyond"),
        pytest.param(OVERLAP, "0+950@1", 950, id="overlap-first"),
        pytest.param(OVERLAP, "0+950@2", 1050, id="overlap-second"),
        pytest.param(OVERLAP, "0+900@2", 1000, id="overlap-ahead"),
        pytest.param(OVERLAP, "0+800", 800, id="overlap-once-before"),
        pytest.param(OVERLAP, "1+001", 1101, id="overlap-once-after"),
    ],
)
def test_a_written_chainage_is_read_as_metres_along_the_axis(notation, text, metres):
    assert notation.axis_m(text) == pytest.approx(metres, abs=1e-9)


@pytest.mark.parametrize(
    ("notation", "text", "reason"),
    [
        pytest.param(KM, "12+34", "is not a chainage", id="two-digits-of-metres"),
        pytest.param(KM, "12+3456", "is not a chainage", id="four-digits-of-metres"),
        pytest.param(KM, "12 + 345", "is not a chainage", id="blanks-inside"),
        pytest.param(KM, "12+345,6", "is not a chainage", id="decimal-comma"),
        pytest.param(KM, "K 1+000", "is not a chainage", id="prefix-not-declared"),
        pytest.param(KM, "", "is not a chainage", id="nothing"),
        pytest.param(KM, "\u0663+\u0663\u0664\u0665", "is not a chainage", id="foreign-digits"),
        pytest.param(KM, "nan", "is not a chainage", id="nan"),
        pytest.param(KM, "1e400", "is beyond 10000 km", id="infinite"),
        pytest.param(KM, "99999+000", "is beyond 10000 km", id="too-far"),
        pytest.param(PLAIN, "1e400", "is beyond 10000 km", id="plain-infinite"),
        pytest.param(JUMP, "1+100", "lies on no stretch of the alignment", id="skipped"),
        pytest.param(JUMP, "1+300@1", "lies on no stretch of the alignment", id="wrong-stretch"),
        pytest.param(KM, "1+000@2", "lies on no stretch of the alignment", id="no-such-stretch"),
        pytest.param(KM, "1+000@", "lies on no stretch of the alignment", id="stretch-unnamed"),
        pytest.param(OVERLAP, "0+950", "occurs twice: write 0+950@1 or 0+950@2", id="ambiguous"),
    ],
)
def test_what_is_no_chainage_of_the_alignment_is_refused(notation, text, reason):
    with pytest.raises(ChainageError) as caught:
        notation.axis_m(text)
    assert str(caught.value) == reason


@pytest.mark.parametrize(
    ("notation", "metres", "text"),
    [
        pytest.param(KM, 12345.6, "12+345.60", id="km-plus-m"),
        pytest.param(KM, 999.994, "0+999.99", id="just-below-the-kilometre"),
        pytest.param(KM, 999.996, "1+000.00", id="rounded-to-the-kilometre"),
        pytest.param(KM, 999.995, "1+000.00", id="half-a-centimetre-below"),
        pytest.param(KM, -0.004, "0+000.00", id="no-negative-zero"),
        pytest.param(KM, -1250.5, "-1+250.50", id="negative"),
        pytest.param(KM, -999.999, "-1+000.00", id="negative-rounded"),
        pytest.param(Notation(METRES, "m "), 12345.6, "m 12345.60", id="metres"),
        pytest.param(Notation(METRES, "m "), -0.004, "m 0.00", id="metres-no-negative-zero"),
        pytest.param(FALLING, 0, "K 5+000.00", id="falling-start"),
        pytest.param(FALLING, 1000.5, "K 3+999.50", id="falling"),
        pytest.param(FALLING, 5100, "K -0+100.00", id="falling-beyond-zero"),
        pytest.param(JUMP, 999.9, "0+999.90", id="before-the-jump"),
        pytest.param(JUMP, 1000, "1+200.00", id="at-the-jump"),
        pytest.param(JUMP, 1100, "1+300.00", id="beyond-the-jump"),
        pytest.param(OVERLAP, 850, "0+850.00", id="before-the-overlap"),
        pytest.param(OVERLAP, 950, "0+950.00@1", id="overlap-first"),
        pytest.param(OVERLAP, 1050, "0+950.00@2", id="overlap-second"),
        pytest.param(OVERLAP, 899.997, "0+900.00@1", id="rounded-into-the-overlap"),
        pytest.param(OVERLAP, 1150, "1+050.00", id="beyond-the-overlap"),
    ],
)
def test_a_place_is_written_in_the_notation(notation, metres, text):
    assert written(notation, metres) == text


def test_equations_along_a_falling_alignment_count_onward():
    """K 5+000 falls to 3+200, which is 3+150 ahead: axis metre 1800, then 50 m less to go."""
    notation = Notation(KM_PLUS_M, "", -1, 5000.0, (Equation(3200.0, 3150.0),))
    assert notation.axis_m("3+200") == notation.axis_m("3+150") == 1800
    assert notation.axis_m("3+000") == 1950
    with pytest.raises(ChainageError, match="lies on no stretch"):
        notation.axis_m("3+180")


def test_only_plain_metres_that_are_axis_metres_are_plain():
    assert PLAIN.is_plain
    assert not any(
        notation.is_plain
        for notation in (KM, FALLING, JUMP, Notation(prefix="K"), Notation(start=10.0))
    )


CENTIMETRES = st.integers(-200_000, 600_000)
METRES_ALONG = st.floats(-2000, 6000)


@st.composite
def notations(draw: st.DrawFn) -> Notation:
    """Any notation with up to three equations, each beyond the one before."""
    direction = draw(st.sampled_from([1, -1]))
    start = draw(CENTIMETRES) / 100
    equations, ahead = [], start
    for _ in range(draw(st.integers(0, 3))):
        back = ahead + direction * draw(st.floats(1, 2000))
        ahead = back + draw(st.floats(-900, 900))
        equations.append(Equation(back, ahead))
    form = draw(st.sampled_from([KM_PLUS_M, METRES]))
    prefix = draw(st.sampled_from(["", "K", "Ch. "]))
    return Notation(form, prefix, direction, start, tuple(equations))


@given(notation=notations(), x=METRES_ALONG)
def test_what_is_written_reads_back_to_a_centimetre(notation: Notation, x: float):
    assert notation.axis_m(written(notation, x)) == pytest.approx(x, abs=0.01)


@given(
    form=st.sampled_from([KM_PLUS_M, METRES]),
    direction=st.sampled_from([1, -1]),
    start=CENTIMETRES,
    pair=st.tuples(METRES_ALONG, METRES_ALONG),
)
def test_without_equations_writing_keeps_the_order_along_the_axis(form, direction, start, pair):
    notation = Notation(form, "K ", direction, start / 100)
    first, second = (notation.axis_m(text) for text in notation.written(np.sort(pair)))
    assert first <= second
    plain = (
        [float(text.split(" ")[1]) for text in notation.written(np.sort(pair))]
        if (form == METRES)
        else [0.0, 0.0]
    )
    assert direction * plain[0] <= direction * plain[1]


@given(notation=notations(), pair=st.tuples(METRES_ALONG, METRES_ALONG))
def test_places_farther_apart_than_the_rounding_keep_their_order(notation: Notation, pair):
    first, second = np.sort(pair)
    if second - first > 0.02:
        near, far = notation.written(np.array([first, second]))
        assert notation.axis_m(near) < notation.axis_m(far)


def test_an_interval_that_ends_at_an_equation_ends_in_its_own_stretch():
    notation = Notation("km+m", "", 1, 0.0, (Equation(1100.0, 1080.0),))
    assert notation.ends(1050.0, 1100.0) == ("1+050.00", "1+100.00@1")
    assert notation.ends(1100.0, 1150.0) == ("1+080.00@2", "1+130.00")

"""Text as people write it."""

from __future__ import annotations

import math

import pytest

from tunnelcalc.errors import Problems
from tunnelcalc.text import (
    MOST_WORDS,
    as_number,
    decoded,
    few,
    meant,
    number_fix,
    quoted,
    suggestion,
    words_near,
)

PROFILES = tuple(f"{series} {size}" for series in ("HA", "HB") for size in range(100, 300, 20))


@pytest.mark.parametrize(
    ("text", "value"),
    [("5", 5), ("+5.", 5), (".5", 0.5), ("-1.5e-3", -0.0015), ("1E3", 1000), ("007", 7)],
)
def test_plain_numbers_are_numbers(text: str, value: float):
    assert as_number(text) == value


@pytest.mark.parametrize(
    "text",
    ["", "nan", "inf", "-Infinity", "1_000", "0x10", "1,5", "5 m", "\u0665", "\u22125", "--5", "."],
)
def test_what_only_a_computer_takes_for_a_number_is_none(text: str):
    assert as_number(text) is None


def test_a_number_too_large_for_a_double_is_infinite():
    assert as_number("-1e400") == -math.inf


@pytest.mark.parametrize(
    ("text", "fix"),
    [
        pytest.param("4,5", "write 4.5, with a decimal point", id="decimal-comma"),
        pytest.param("-0,25", "write -0.25, with a decimal point", id="negative"),
        pytest.param("1,250", "write 1250 or 1.250, whichever is meant", id="either"),
        pytest.param("1.250,5", "write 1250.5, without thousands separators", id="both"),
        pytest.param("1,250.5", "write 1250.5, without thousands separators", id="both-ways"),
        pytest.param("1,250,000", "write 1250000, without thousands separators", id="millions"),
        pytest.param("1 250,5", "write 1250.5, without thousands separators", id="space"),
        pytest.param("1\u202f250", "write 1250, without thousands separators", id="thin-space"),
        pytest.param("1'250.5", "write 1250.5, without thousands separators", id="apostrophe"),
        *(
            pytest.param(
                text,
                "format the cell as a number and write it again: it was taken for a date",
                id=text,
            )
            for text in ("2024-05-03", "3.5.24", "03/05/2024", "3-May", "3. Jan")
        ),
        *(
            pytest.param(
                text,
                "write a plain number with a decimal point, without unit or thousands separator",
                id=text,
            )
            for text in ("12 MPa", "1.250.5", "1,25,000.5", "1 250 00", "a")
        ),
    ],
)
def test_the_remedy_for_a_number_is_the_number_that_was_meant(text: str, fix: str):
    assert number_fix(text) == fix


def test_a_misspelt_name_suggests_the_known_one_whatever_its_case():
    known = ("cover_m", "gsi", "Marl")
    assert suggestion("Cover_M ", known) == "cover_m"
    assert suggestion("marll", known) == "Marl"
    assert suggestion("temperature", known) is None


def test_quoted_text_stays_in_its_line():
    assert quoted("a\n\x1b[31m\ud800") == '"a\\n\\x1b[31m\\ud800"'
    assert quoted("Füße") == '"Füße"'
    assert quoted("x" * 81) == '"' + "x" * 77 + '..."'
    assert quoted("x" * 80) == '"' + "x" * 80 + '"'


def test_of_very_many_names_a_few_are_told():
    assert few(["a", "b"]) == "a, b"
    assert few([str(number) for number in range(23)]).endswith("18, 19 and 3 more")


@pytest.mark.parametrize(
    ("content", "told"),
    [
        pytest.param(
            b"a\nb\xff", "f.csv:2: is not UTF-8 text: byte 0xff cannot be read", id="latin-1"
        ),
        pytest.param(b"\xff\xfea\0", "f.csv: is not a text file: it holds null bytes", id="utf-16"),
    ],
)
def test_what_is_no_text_is_told(content: bytes, told: str):
    problems = Problems()
    assert decoded("f.csv", content, problems) is None
    assert [str(problem).splitlines()[0] for problem in problems] == [told]


def test_a_byte_order_mark_is_no_text():
    problems = Problems()
    assert decoded("f.csv", b"\xef\xbb\xbfa", problems) == "a"
    assert len(problems) == 0


def test_of_few_words_all_are_told_and_of_many_the_nearest():
    few_words = PROFILES[:MOST_WORDS]
    assert words_near(few_words, "HB 281") == " or ".join(few_words)
    near = words_near(PROFILES, "HB 281")
    assert near.startswith("HB 280 or ")
    assert near.endswith(" or one of 15 more")
    assert words_near(PROFILES).startswith("HA 100 or HA 120 or ")


@pytest.mark.parametrize(
    ("written", "question"),
    [
        ("HB280", 'did you mean "HB 280"?'),
        (" hb 280", 'did you mean "HB 280"?'),
        ("HC 280", 'did you mean "HA 280" or "HB 280"?'),
        ("circular", None),
    ],
)
def test_the_nearest_word_is_asked_for_and_equally_near_ones_all(written, question):
    assert meant(written, PROFILES) == question

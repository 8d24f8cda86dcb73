"""Printed codes: their alphabet, their patterns, and how they are searched."""

from datetime import date

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.identification import gs1, lot_code

DAY = date(2026, 3, 5)


@pytest.mark.parametrize("text", ["S26064A", "14-032-B", "0123456789", "A"])
def test_printable(text):
    assert lot_code.is_valid(text)


@pytest.mark.parametrize(
    "text", ["", "O1", "I1", "S26064AAAAA", "s1", "A B", "Ä1", "A/1", "A_1", "A\n", "\u0661"]
)
def test_not_printable(text):
    assert not lot_code.is_valid(text)


@pytest.mark.parametrize(
    ("typed", "code"),
    [(" s26 064 a ", "S26064A"), ("14\u2013032\u2011b", "14-032-B"), ("so1i", "SO1I")],
)
def test_normalise(typed, code):
    assert lot_code.normalise(typed) == code


def test_a_search_reads_o_as_zero_and_i_as_one():
    assert lot_code.search_key("s26o64i") == "S260641"


@pytest.mark.parametrize(
    ("serial", "text"), [(0, "A"), (7, "H"), (8, "J"), (12, "N"), (23, "Z"), (24, "AA"), (48, "BA")]
)
def test_letters_skip_o_and_i(serial, text):
    assert lot_code.letters(serial) == text


@pytest.mark.parametrize(
    ("pattern", "serial", "code", "text"),
    [
        ("S{YY}{DDD}{LETTER}", 0, "", "S26064A"),
        ("{CODE}{YY}{DDD}{SEQ}", 11, "qt", "QT2606412"),
        ("{YY}-{DDD}-{LETTER}", 1, "", "26-064-B"),
    ],
)
def test_render(pattern, serial, code, text):
    assert lot_code.render(pattern, DAY, serial, code) == text


@pytest.mark.parametrize(
    ("pattern", "why"),
    [
        ("S{YY}{DDD}", "needs"),
        ("S{DAY}{SEQ}", "nothing else"),
        ("S{SEQ.__class__}", "nothing else"),
        ("S{{SEQ}}", "nothing else"),
        ("S{SEQ", "nothing else"),
        ("LOT{SEQ}", "cannot be printed"),
        ("SYRUP{YY}{DDD}{SEQ}", "cannot be printed"),
        ("S{SEQ} ", "cannot be printed"),
    ],
)
def test_a_pattern_that_cannot_serve_is_refused(pattern, why):
    with pytest.raises(ValueError, match=why):
        lot_code.render(pattern, DAY, 0)


def test_no_serial_below_zero():
    with pytest.raises(ValueError, match="below zero"):
        lot_code.render("S{SEQ}{LETTER}", DAY, -1)


@given(st.integers(0, 500), st.integers(0, 500))
def test_two_runs_of_a_day_never_share_a_code(one, other):
    codes = {lot_code.render("S{YY}{DDD}{LETTER}", DAY, serial) for serial in (one, other)}
    assert len(codes) == len({one, other})


@given(st.from_regex(r"\A[A-HJ-NP-Z0-9-]{1,10}\Z"))
def test_every_printable_code_may_stand_in_a_gs1_lot(text):
    assert lot_code.is_valid(text)
    assert gs1.valid_lot(text)
    assert lot_code.normalise(text) == text

"""A check digit catches what a hand gets wrong."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.identification import gs1

BODIES = st.text("0123456789", min_size=7, max_size=13)


@given(BODIES.filter(lambda body: len(body) + 1 in gs1.GTIN_LENGTHS))
def test_a_gtin_with_its_digit_is_valid(body):
    assert gs1.valid_gtin(f"{body}{gs1.check_digit(body)}")


@given(st.text("0123456789", min_size=13, max_size=13), st.integers(0, 12), st.integers(1, 9))
def test_one_wrong_digit_is_caught(body, place, shift):
    check = gs1.check_digit(body)
    wrong = str((int(body[place]) + shift) % 10)
    assert not gs1.valid_gtin(f"{body[:place]}{wrong}{body[place + 1 :]}{check}")


@pytest.mark.parametrize("text", ["", "12a", "\u0661\u0662", "1.2", "²"])
def test_only_digits_have_a_check_digit(text):
    with pytest.raises(ValueError, match="digits only"):
        gs1.check_digit(text)
    assert not gs1.has_check_digit(text)


@pytest.mark.parametrize("text", ["", "0", "123456789", "00000000000000000"])
def test_other_lengths_are_no_gtin(text):
    assert not gs1.valid_gtin(text)

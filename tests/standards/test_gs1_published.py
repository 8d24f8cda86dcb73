"""GS1 check digits and lot characters against published vectors.

S2: GS1's own syntax engine test vectors, READ. Web: GS1's check digit page, MEMORY.
"""

import pytest

from lots.identification import gs1


@pytest.mark.parametrize(
    ("text", "valid"),
    [
        ("02345673", True),  # GTIN-8, S2
        ("12345673", False),
        ("416000336108", True),  # GTIN-12, S2
        ("416000336109", False),
        ("1234567890128", True),  # GTIN-13, S2
        ("1234567890129", False),
        ("12345678901231", True),  # GTIN-14, S2
        ("12345678901232", False),
        ("95012345678903", True),  # S2
        ("95012345678902", False),
        ("09521234543213", True),  # the example range 952, S2
    ],
)
def test_gtin(text, valid):
    assert gs1.valid_gtin(text) is valid


@pytest.mark.parametrize(
    ("text", "valid"), [("123456789012345675", True), ("123456789012345670", False)]
)
def test_sscc(text, valid):  # S2
    assert gs1.has_check_digit(text) is valid


@pytest.mark.parametrize(
    ("digits", "check"),
    [("629104150021", 3), ("37610425002123456", 9)],
)
def test_check_digit(digits, check):  # Web
    assert gs1.check_digit(digits) == check


@pytest.mark.parametrize(
    ("lot", "valid"),
    [
        ("!\"%&'()*+,-/", True),
        ("SYR26-03A", True),
        ("A" * 20, True),
        ("ABC ", False),
        ("A#B", False),
        ("A B", False),
        ("A" * 21, False),
        ("", False),
        ("É", False),
        ("AB\n", False),
    ],
)
def test_lot_characters(lot, valid):  # S2; the length from the format X..20
    assert gs1.valid_lot(lot) is valid

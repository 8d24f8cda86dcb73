"""GS1 check digits and what may stand in a lot number."""

import re

# GS1 General Specifications, figure 7.11-1: character set 82, which has no space.
_SET_82 = re.compile(r"[!\"%&'()*+,\-./0-9:;<=>?A-Z_a-z]{1,20}")
_DIGITS = re.compile(r"[0-9]+")
GTIN_LENGTHS = (8, 12, 13, 14)


def check_digit(digits: str) -> int:
    """Return the modulo-10 check digit (0–9) of the digits before it.

    Weights 3, 1, 3 … from the right, the same for GTIN, GLN and SSCC (GS1 General Specifications,
    section 7.9). Raises ValueError for anything but ASCII digits.
    """
    if not _DIGITS.fullmatch(digits):
        raise ValueError("A check digit is computed over digits only.")
    total = sum(int(d) * (3 if place % 2 == 0 else 1) for place, d in enumerate(reversed(digits)))
    return -total % 10


def has_check_digit(text: str) -> bool:
    """Whether two or more digits end in their right check digit."""
    return (
        len(text) > 1
        and _DIGITS.fullmatch(text) is not None
        and check_digit(text[:-1]) == int(text[-1])
    )


def valid_gtin(text: str) -> bool:
    """Whether a text is a GTIN of 8, 12, 13 or 14 digits with its right check digit."""
    return len(text) in GTIN_LENGTHS and has_check_digit(text)


def valid_lot(text: str) -> bool:
    """Whether a text may stand in Application Identifier (10): 1–20 of character set 82."""
    return _SET_82.fullmatch(text) is not None

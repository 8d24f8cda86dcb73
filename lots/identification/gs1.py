"""GS1 check digits and what may stand in a lot number."""

import re

# GS1 General Specifications, figure 7.11-1: character set 82 (no space).
_SET_82 = re.compile(r"[!\"%&'()*+,\-./0-9:;<=>?A-Z_a-z]{1,20}")


def check_digit(digits: str) -> int:
    """Return the modulo-10 check digit of the digits before it."""
    if not digits.isdigit():
        raise ValueError("A check digit is computed over digits only.")
    total = sum(int(d) * (3 if place % 2 == 0 else 1) for place, d in enumerate(reversed(digits)))
    return -total % 10


def valid_gtin(text: str) -> bool:
    """Whether a text is a GTIN of 8, 12, 13 or 14 digits with its right check digit."""
    return (
        len(text) in (8, 12, 13, 14)
        and text.isascii()
        and text.isdigit()
        and check_digit(text[:-1]) == int(text[-1])
    )


def valid_lot(text: str) -> bool:
    """Whether a text may stand in Application Identifier (10): 1–20 of character set 82."""
    return _SET_82.fullmatch(text) is not None

"""Printed lot codes: at most ten of A–Z without O and I, 0–9 and the hyphen."""

import re
from datetime import date

ALPHABET = "ABCDEFGHJKLMNPQRSTUVWXYZ"
_VALID = re.compile(r"[A-HJ-NP-Z0-9-]{1,10}")


def normalise(text: str) -> str:
    """Return a code as it would be printed: upper case, no spaces."""
    return "".join(text.split()).upper()


def search_key(text: str) -> str:
    """Return a code with O read as 0 and I as 1: for searching only."""
    return normalise(text).replace("O", "0").replace("I", "1")


def is_valid(text: str) -> bool:
    """Whether a code may be printed."""
    return _VALID.fullmatch(text) is not None


def letters(serial: int) -> str:
    """Return A, B … Z (without I and O), AA, AB … for 0, 1, 2 …"""
    text, number = "", serial + 1
    while number:
        number, place = divmod(number - 1, len(ALPHABET))
        text = ALPHABET[place] + text
    return text


def render(pattern: str, day: date, serial: int) -> str:
    """Return the code of a pattern with {YY}, {DDD}, {SEQ} and {LETTER}.

    Raises ValueError for a pattern whose code cannot be printed.
    """
    text = pattern.format(YY=f"{day:%y}", DDD=f"{day:%j}", SEQ=serial + 1, LETTER=letters(serial))
    if not is_valid(text):
        raise ValueError(f"The code pattern {pattern} gives {text}, which cannot be printed.")
    return text

"""Printed lot codes: at most ten of A–Z without O and I, 0–9 and the hyphen."""

import re
from datetime import date

# O and I are left out because a coder's dots make them 0 and 1.
LETTERS = "ABCDEFGHJKLMNPQRSTUVWXYZ"
MAX_LENGTH = 10
TOKENS = ("YY", "DDD", "SEQ", "LETTER", "CODE")
_SERIALS = ("SEQ", "LETTER")
_VALID = re.compile(r"[A-HJ-NP-Z0-9-]{1,10}")
_TOKEN = re.compile(r"\{([^{}]*)\}")
# Phones replace a typed hyphen by one of these.
_DASHES = dict.fromkeys(map(ord, "\u2010\u2011\u2012\u2013\u2014\u2212"), "-")


def normalise(text: str) -> str:
    """Return a code as it would be printed: upper case, no spaces, plain hyphens."""
    return "".join(text.split()).translate(_DASHES).upper()


def search_key(text: str) -> str:
    """Return a code with O read as 0 and I as 1: for searching only, never for printing."""
    return normalise(text).replace("O", "0").replace("I", "1")


def is_valid(text: str) -> bool:
    """Whether a code may be printed: 1–10 characters of the alphabet."""
    return _VALID.fullmatch(text) is not None


def letters(serial: int) -> str:
    """Return A, B … Z (without I and O), AA, AB … for 0, 1, 2 …; ValueError below zero."""
    if serial < 0:
        raise ValueError("A serial number cannot be below zero.")
    text, number = "", serial + 1
    while number:
        number, place = divmod(number - 1, len(LETTERS))
        text = LETTERS[place] + text
    return text


def check_pattern(pattern: str) -> None:
    """Raise ValueError for a pattern with an unknown token, or without a serial.

    Without {SEQ} or {LETTER} every run of a day would get the same code.
    """
    found = _TOKEN.findall(pattern)
    unknown = [token for token in found if token not in TOKENS]
    if unknown or "{" in _TOKEN.sub("", pattern) or "}" in _TOKEN.sub("", pattern):
        known = ", ".join(f"{{{token}}}" for token in TOKENS)
        raise ValueError(f"The code pattern {pattern} may use {known} and nothing else in braces.")
    if not set(found) & set(_SERIALS):
        raise ValueError(f"The code pattern {pattern} needs {{SEQ}} or {{LETTER}}.")


def render(pattern: str, day: date, serial: int, code: str = "") -> str:
    """Return the code of a pattern for the nth run of a day, counted from 0.

    {YY} is the year's two digits, {DDD} the day of the year, {SEQ} the run from 1, {LETTER} the
    run from A, {CODE} the product's own short code. Raises ValueError for a pattern that
    ``check_pattern`` refuses or whose code cannot be printed.
    """
    check_pattern(pattern)
    values = {
        "YY": f"{day.year % 100:02d}",
        "DDD": f"{day.timetuple().tm_yday:03d}",
        "SEQ": str(serial + 1),
        "LETTER": letters(serial),
        "CODE": normalise(code),
    }
    text = _TOKEN.sub(lambda match: values[match[1]], pattern)
    if not is_valid(text):
        raise ValueError(f"The code pattern {pattern} gives {text}, which cannot be printed.")
    return text

"""Folded text: how words are compared when someone searches, whatever accents and case they use."""

import unicodedata

# Letters that no decomposition takes apart, though people type them as two or without a stroke.
_APART = str.maketrans(
    {"œ": "oe", "æ": "ae", "ø": "o", "ł": "l", "đ": "d", "’": "'", "\u2010": "-", "\u2011": "-"}
)


def fold(text: str) -> str:
    """Return a text without accents, case or doubled spaces: "ÉRABLE" and "erable" are one."""
    apart = unicodedata.normalize("NFKD", text.casefold().translate(_APART))
    plain = "".join(letter for letter in apart if not unicodedata.combining(letter))
    return " ".join(plain.casefold().split())

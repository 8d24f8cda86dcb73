"""How wide text is set, estimated from above, so that a picture made without a browser fits it."""

from unicodedata import combining, east_asian_width

ELLIPSIS = "…"
CODE_WIDTH = 0.65  # of the size: every letter of the face for codes
_NARROW = frozenset("iljtfr.,;:'|!()[] ·-")
_WIDE = frozenset("WMmw@%…—")


def _width(letter: str, code: bool) -> float:
    if combining(letter):
        return 0.0
    if east_asian_width(letter) in "WF":
        return 1.05
    if code:
        return CODE_WIDTH
    if letter in _NARROW:
        return 0.4
    if letter in _WIDE:
        return 0.98
    if letter.isupper() or not letter.isascii():
        return 0.76
    return 0.66 if letter.isdigit() else 0.62


def width(text: str, size: float, code: bool = False) -> float:
    """Return the most a text can take, in pixels, in the text face or the face for codes."""
    return size * sum(_width(letter, code) for letter in text)


def fit(text: str, size: float, room: float, code: bool = False) -> str:
    """Return a text that fits the room, cut with an ellipsis where it does not."""
    if width(text, size, code) <= room:
        return text
    while text and width(text + ELLIPSIS, size, code) > room:
        text = text[:-1]
    return text.rstrip() + ELLIPSIS


def lines(text: str, size: float, room: float) -> list[str]:
    """Return a text broken at its spaces into lines that fit, each cut where one word does not."""
    found = [""]
    for word in text.split():
        longer = f"{found[-1]} {word}".strip()
        if found[-1] and width(longer, size) > room:
            found.append(word)
        else:
            found[-1] = longer
    return [fit(line, size, room) for line in found]

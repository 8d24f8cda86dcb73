"""Reads a drawn picture back: its boxes, bars and texts, each text as wide as its face sets it."""

import xml.etree.ElementTree as ET
from functools import cache
from pathlib import Path

from fontTools.ttLib import TTFont

from lots.documents import lettering

FONTS = Path("lots/web/static/fonts")
SVG = "{http://www.w3.org/2000/svg}"


@cache
def face(name):
    font = TTFont(FONTS / f"{name}.woff2")
    return font["head"].unitsPerEm, font.getBestCmap(), font["hmtx"]


def width(words, size, family, bold):
    unit, letters, advance = face(f"{family}-{'700' if bold else '400'}")
    return sum(advance[letters[ord(one)]][0] if ord(one) in letters else unit for one in words) * (
        size / unit
    )


class Drawn:
    """The rectangles of a picture: (left, top, right, bottom)."""

    def __init__(self, text):
        self.root = ET.fromstring(text)  # noqa: S314 - our own picture
        self.boxes, self.bars, self.texts, self.words, self.sizes = [], [], [], [], []
        for one in self.root.iter():
            if one.tag == f"{SVG}rect" and one.get("class") in ("box", "again", "bar"):
                x, y = float(one.get("x")), float(one.get("y"))
                box = (x, y, x + float(one.get("width")), y + float(one.get("height")))
                (self.bars if one.get("class") == "bar" else self.boxes).append(box)
            elif one.tag == f"{SVG}text":
                self._text(one)

    def _text(self, one):
        x, y, size = (float(one.get(name)) for name in ("x", "y", "font-size"))
        family = "mono" if "Mono" in one.get("font-family") else "next"
        wide = width(one.text, size, family, one.get("font-weight") == "700")
        assert wide <= lettering.width(one.text, size, family == "mono") + 0.01, one.text
        self.texts.append((x, y - 0.75 * size, x + wide, y + 0.22 * size))
        self.words.append(one.text)
        self.sizes.append(size)

    @property
    def size(self):
        return float(self.root.get("width")), float(self.root.get("height"))


def overlaps(rects, others=None):
    """Return the pairs that share a point: of one list, or of two."""
    tagged = [(*rect, 0, number) for number, rect in enumerate(rects)]
    tagged += [(*rect, 1, number) for number, rect in enumerate(others or ())]
    found, open_ = [], []
    for rect in sorted(tagged):
        open_ = [one for one in open_ if one[2] > rect[0]]
        for one in open_:
            apart = rect[3] <= one[1] or one[3] <= rect[1]
            if not apart and (others is None or one[4] != rect[4]):
                found.append((one, rect))
        open_.append(rect)
    return found


def inside(one, other):
    return other[0] <= one[0] and other[1] <= one[1] and one[2] <= other[2] and one[3] <= other[3]


def assert_readable(text):
    """Refuse a picture where two things lie on one another, or a text is too small."""
    drawn = Drawn(text)
    assert "style=" not in text
    assert min(drawn.sizes) >= 11
    assert overlaps(drawn.boxes) == []
    assert overlaps(drawn.bars) == []
    assert overlaps(drawn.texts) == []
    assert overlaps(drawn.bars, drawn.boxes) == []
    assert overlaps(drawn.bars, drawn.texts) == []
    for one, other in overlaps(drawn.boxes, drawn.texts):
        box, words = (one, other) if one[4] == 0 else (other, one)
        assert inside(words, box), drawn.words[words[5]]
    page = (0, 0, *drawn.size)
    assert all(inside(one, page) for one in (*drawn.boxes, *drawn.bars, *drawn.texts))
    return drawn

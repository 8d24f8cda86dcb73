"""The marks of a chain's picture, each placed on its grid."""

from collections.abc import Callable
from dataclasses import dataclass
from html import escape

from lots.models import DrawRole, Lot

from . import lettering
from .chain_graph import Bar, Break, Graph, Lane, Use, matter
from .chain_layout import Layout

PITCH, DAY_GAP, HEAD, BAND_HEAD, WORD, LANE = 116, 18, 34, 20, 14, 36
SIDE = 10  # between a bar and the label beside it
AGAIN = 8  # after how many columns a long lane says its code again
THIN, THICK = 2.5, 8.0
INK, SOFT, GROUND, BAR, LINE = "#1B2A24", "#4A5650", "#FBFAF6", "#1F5F4A", "#6B776F"
TEXT = "Lot Next, Verdana, sans-serif"
CODE = "Lot Mono, DejaVu Sans Mono, monospace"
DASHES = {
    DrawRole.CARRY_OVER: "9 6",
    DrawRole.AID: "0.1 6",
    DrawRole.PACKAGING: "0.1 6",
    DrawRole.CLEANING: "0.1 6",
    DrawRole.RESIDUE: "1 8",
}


@dataclass(frozen=True)
class Frame:
    """A piece of the grid in pixels."""

    graph: Graph
    layout: Layout
    first: int
    last: int
    shown: frozenset[str]
    pitch: int
    x: dict[int, int]
    top: dict[int, float]
    bands: list[tuple[str, float]]
    width: int
    height: int
    url: Callable[[Lot], str] | None

    @property
    def room(self) -> int:
        """Return how wide a label may be."""
        return self.pitch - 2 * SIDE

    def holds(self, column: int) -> bool:
        """Whether a column stands in this piece."""
        return self.first <= column < self.last


def text(
    x: float, y: float, words: str, size: float, *, code: bool = False, bold: bool = False,
    fill: str = INK,
) -> str:  # fmt: skip
    """Return one line of text."""
    family = CODE if code else TEXT
    weight = ' font-weight="700"' if bold else ""
    return (
        f'<text x="{x:g}" y="{y:g}" font-family="{family}" font-size="{size:g}"{weight} '
        f'fill="{fill}">{escape(words)}</text>'
    )


def body(frame: Frame, name: str) -> str:
    """Return all marks: what lies beneath first."""
    graph, layout = frame.graph, frame.layout
    bars = [one for key, one in graph.bars.items() if frame.holds(layout.column.get(key, -1))]
    lanes = [one for key, one in graph.lanes.items() if key in frame.shown]
    breaks = [one for key, one in graph.breaks.items() if key in frame.shown]
    beneath = (
        f'<defs><pattern id="{name}-held" width="7" height="7" patternUnits="userSpaceOnUse" '
        f'patternTransform="rotate(45)"><rect width="7" height="7" fill="#FFFFFF"/>'
        f'<rect width="2.5" height="7" fill="#8F2418"/></pattern></defs>'
        f'<rect width="{frame.width}" height="{frame.height}" fill="{GROUND}"/>'
    )
    return "".join(
        [
            beneath,
            *(_band(frame, words, y) for words, y in frame.bands),
            heads(frame, frame.height),
            *(_break(frame, one) for one in breaks),
            *(_bar(frame, one) for one in bars),
            *(_lane(frame, one, name) for one in lanes),
            *(_label(frame, one, name) for one in lanes),
        ]
    )


def heads(frame: Frame, height: float) -> str:
    """Return the name of each day over its first column, and the line before it."""
    parts, year = [], 0
    for column, x in frame.x.items():
        day = frame.layout.days[column]
        if column > frame.first and day == frame.layout.days[column - 1]:
            continue
        words = f"{day.day} {day:%b}" if day.year == year else f"{day.day} {day:%b %Y}"
        year = day.year
        left = x - DAY_GAP / 2
        parts.append(f'<path d="M{left:g} 0V{height:g}" stroke="#CFD4CC"/>')
        parts.append(text(x, 22, lettering.fit(words, 13, frame.pitch, False), 13, bold=True))
    return "".join(parts)


def _band(frame: Frame, words: str, y: float) -> str:
    parts = [f'<path d="M0 {y:g}H{frame.width}" stroke="#CFD4CC"/>']
    for column, x in frame.x.items():
        if (column - frame.first) % AGAIN == 0:
            name = lettering.fit(words, 12, frame.room)
            parts.append(text(x + SIDE, y + 14, name, 12, fill=SOFT))
    return "".join(parts)


def _bar(frame: Frame, bar: Bar) -> str:
    x = frame.x[frame.layout.column[bar.key]]
    first, last = frame.layout.span[bar.key]
    top, bottom = frame.top[first], frame.top[last] + LANE
    word = f"{bar.count} × {bar.word}" if bar.count > 1 else bar.word
    room = frame.pitch - SIDE
    lines = [(word, True), *([(bar.note, False)] if bar.note else [])]
    parts = [
        text(x - 3, top - 6 - WORD * (len(lines) - 1 - place), lettering.fit(line, 12, room), 12,
             bold=bold)
        for place, (line, bold) in enumerate(lines)
    ]  # fmt: skip
    told = f"{word}, {bar.day.day} {bar.day:%B %Y} {bar.clock}"
    told = f"{told}, {bar.note}" if bar.note else told
    return (
        f'<g><title>{escape(told)}</title><rect class="bar" x="{x - 3}" y="{top:g}" width="6" '
        f'height="{bottom - top:g}" rx="2" fill="{BAR}"/>{"".join(parts)}</g>'
    )


def _break(frame: Frame, one: Break) -> str:
    """A double line across the rows of its vessel, with kind and time."""
    x = frame.x[frame.layout.column[one.key]]
    first, last = frame.layout.span[one.key]
    tops = [top for row, top in frame.top.items() if first <= row <= last]
    ends = f"{min(tops) - 4:g}V{max(tops) + LANE + 2:g}"
    words = lettering.lines(f"{one.words} {one.clock}", 12, frame.room)[:3]
    y = frame.top[frame.layout.row[one.key]] + 11
    lines = (text(x + SIDE, y + 12 * place, line, 12) for place, line in enumerate(words))
    told = f"{one.words}, {one.band}, {one.day.day} {one.day:%B %Y} {one.clock}"
    return (
        f'<g><title>{escape(told)}</title><path class="break" d="M{x - 3} {ends}M{x + 3} {ends}" '
        f'stroke="{INK}" stroke-width="2"/>{"".join(lines)}</g>'
    )


def _steps_of(frame: Frame, lane: Lane) -> list[tuple[int, list[Use]]]:
    """Return the columns that draw from a lane, in order, with what each draws."""
    found: dict[int, list[Use]] = {}
    for use in lane.uses:
        found.setdefault(frame.layout.column[use.bar], []).append(use)
    start = frame.layout.column[lane.maker]
    return sorted((column, uses) for column, uses in found.items() if column > start)


def _stroke(lane: Lane, left: list[Use], name: str) -> tuple[float, str]:
    """Return how wide a piece of lane is and its stroke, from what is still to be drawn of it."""
    food = [use for use in left if matter(use.role)]
    if food or not left:
        share = sum(use.quantity for use in food) / lane.made if lane.made > 0 else 0.0
        width = THIN + (THICK - THIN) * min(share, 1.0)
        colour = f"url(#{name}-held)" if lane.mark == "held" else LINE
        return (max(width, 7.0) if lane.mark == "held" else width), f'stroke="{colour}"'
    roles = [DrawRole(use.role) for use in left]
    role = next((one for one in DASHES if one in roles), DrawRole.RESIDUE)
    width = {DrawRole.CARRY_OVER: 3.5, DrawRole.RESIDUE: 2.0}.get(role, 3.5)
    colour = "#7B877F" if role == DrawRole.RESIDUE else LINE
    cap = ' stroke-linecap="round"' if role not in (DrawRole.CARRY_OVER, DrawRole.RESIDUE) else ""
    return width, f'stroke="{colour}" stroke-dasharray="{DASHES[role]}"{cap}'


def _lane(frame: Frame, lane: Lane, name: str) -> str:
    """The line of a lot: narrower after each draw, bridging the bars that it does not meet."""
    y = frame.top[frame.layout.row[lane.key]] + LANE / 2
    start = frame.layout.column[lane.maker]
    at = float(frame.x[start] if frame.holds(start) else frame.x[frame.first] - frame.pitch)
    steps = _steps_of(frame, lane)
    parts, dots = [], []
    if frame.holds(start) or not steps:
        parts.append(_piece(at, at + SIDE, y, *_stroke(lane, lane.uses, name)))
    for place, (column, uses) in enumerate(steps):
        if column < frame.first:
            continue
        left = [use for _, later in steps[place:] for use in later]
        end = float(frame.x[column]) if frame.holds(column) else frame.width - 6.0
        parts.append(_piece(at, end, y, *_stroke(lane, left, name)))
        if not frame.holds(column):
            break
        solid = any(matter(use.role) for use in uses)
        fill = BAR if solid else GROUND
        dots.append(
            f'<circle cx="{end:g}" cy="{y:g}" r="5" fill="{fill}" stroke="{BAR}" stroke-width="2"/>'
        )
        at = end
    return "".join(parts) + "".join(dots)


def _piece(x1: float, x2: float, y: float, width: float, stroke: str) -> str:
    # Long lanes get a ground of their own, so that the bars they pass run beneath them.
    halo = ""
    if x2 - x1 > SIDE + 8:
        halo = (
            f'<path d="M{x1 + 6:g} {y:g}H{x2 - 6:g}" stroke="{GROUND}" '
            f'stroke-width="{width + 6:.3g}"/>'
        )
    # A pattern needs a shape with a height: a straight line has none.
    if "url(" in stroke:
        fill = stroke.replace("stroke=", "fill=")
        return (
            f'{halo}<rect x="{x1:g}" y="{y - width / 2:g}" width="{x2 - x1:g}" '
            f'height="{width:.3g}" {fill} stroke="#8F2418"/>'
        )
    return f'{halo}<path d="M{x1:g} {y:g}H{x2:g}" stroke-width="{width:.3g}" {stroke}/>'


def _label(frame: Frame, lane: Lane, name: str) -> str:
    """The box with a lot's code beside its maker, and its code again along a long lane."""
    start = frame.layout.column[lane.maker]
    top = frame.top[frame.layout.row[lane.key]]
    steps = _steps_of(frame, lane)
    end = steps[-1][0] if steps else start
    again = [
        frame.x[column] + SIDE
        for column in frame.x
        if max(start + 2, frame.first) < column < end and (column - frame.first) % AGAIN == 0
    ]
    if not frame.holds(start):
        again.insert(0, frame.x[frame.first] - frame.pitch + SIDE)
    parts = [_again(frame, lane, x, top) for x in again]
    if frame.holds(start):
        parts.append(_box(frame, lane, frame.x[start] + SIDE, top, name))
    return "".join(parts)


def _again(frame: Frame, lane: Lane, x: float, top: float) -> str:
    code = lettering.fit(lane.code, 12, frame.room - 8, code=True)
    width = lettering.width(code, 12, code=True) + 8
    return (
        f'<rect class="again" x="{x:g}" y="{top + 9:g}" width="{width:.4g}" height="18" '
        f'fill="{GROUND}"/>{text(x + 4, top + 22.5, code, 12, code=True, fill=SOFT)}'
    )


def _box(frame: Frame, lane: Lane, x: float, top: float, name: str) -> str:
    room, strip = frame.room, 12 if lane.mark else 0
    lines = (
        text(x + 6 + strip, top + 15, lane.code, 12.5, code=True, bold=True),
        text(x + 6 + strip, top + 30, lettering.fit(lane.words, 12, room - 12 - strip), 12,
             bold=bool(lane.mark)),
    )  # fmt: skip
    bold = ' stroke-width="2"' if lane.asked else ""
    box = (
        f'<rect class="box" x="{x:g}" y="{top:g}" width="{room}" height="{LANE}" rx="2" '
        f'fill="#FFFFFF" stroke="{INK}"{bold}/>'
    )
    around = (
        f'<rect id="{name}-asked" class="asked" x="{x - 4:g}" y="{top - 4:g}" '
        f'width="{room + 8}" height="{LANE + 8}" rx="3" fill="{GROUND}" stroke="{INK}" '
        f'stroke-width="2"/>'
    )
    parts = [around, box] if lane.asked else [box]
    if strip:
        fill = f"url(#{name}-held)" if lane.mark == "held" else "#8F2418"
        parts.append(
            f'<rect x="{x + 1:g}" y="{top + 1:g}" width="{strip}" height="{LANE - 2}" '
            f'fill="{fill}"/>'
        )
    told = f"{lane.code}, {lane.words}"
    inside = f"<title>{escape(told)}</title>{''.join(parts)}{''.join(lines)}"
    if frame.url and lane.count == 1:
        return f'<a href="{escape(frame.url(lane.lot))}">{inside}</a>'
    return f"<g>{inside}</g>"

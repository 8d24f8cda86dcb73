"""The picture of a chain: a server-made SVG with time from left to right.

A step is a thin upright bar with its word; a lot is a lane between bars with its code; columns
are days. It uses attributes alone, no style, and says nothing by colour that it does not say by
word and shape, so that it prints in black and white.
"""

from collections.abc import Callable
from dataclasses import dataclass
from html import escape

from lots.models import Lot
from lots.tracing.story import Story

from . import lettering
from .chain_draw import BAND_HEAD, DAY_GAP, GROUND, HEAD, LANE, PITCH, WORD, Frame, body, heads
from .chain_graph import Graph, graph_of
from .chain_layout import Layout, lay_out

SHEET_COLUMNS = 5  # what a sheet of paper holds at a size that can be read
Url = Callable[[Lot], str]


@dataclass(frozen=True)
class Picture:
    """A drawn chain, the heads of its days apart, and what it holds."""

    svg: str
    days: str
    width: int
    lots: int
    joined: bool


@dataclass(frozen=True)
class Sheet:
    """One piece of a chain cut for paper, and the days it shows."""

    caption: str
    svg: str


def svg(story: Story, url: Url | None = None) -> str:
    """Return the picture as SVG text, each lot a link where ``url`` gives its address."""
    return draw(story, url).svg


def draw(story: Story, url: Url | None = None) -> Picture:
    """Return the whole picture, to be scrolled sideways, with the heads of its days apart."""
    graph = graph_of(story)
    layout = lay_out(graph)
    frame = _frame(graph, layout, 0, len(layout.days), url)
    width = frame.width
    text = _wrap(story, frame, "chain", f"{_counts(story, graph, layout)} The tables say the same.")
    days = (
        f'<svg class="picture-days" xmlns="http://www.w3.org/2000/svg" aria-hidden="true" '
        f'width="{width}" height="{HEAD}" viewBox="0 0 {width} {HEAD}">'
        f'<rect width="{width}" height="{HEAD}" fill="{GROUND}"/>{heads(frame, height=HEAD)}</svg>'
    )
    return Picture(text, days, width, len(story.lots), len(graph.lanes) < len(story.lots))


def sheets(story: Story, url: Url | None = None) -> list[Sheet]:
    """Return the picture cut into pieces as wide as paper; lots that only wait are left out."""
    graph = graph_of(story)
    layout = lay_out(graph)
    found = []
    for first, last in _pieces(layout):
        frame = _frame(graph, layout, first, last, url, waiting=False)
        days = dict.fromkeys(f"{day.day} {day:%B %Y}" for day in layout.days[first:last])
        ends = list(days)
        caption = ends[0] if len(ends) == 1 else f"{ends[0]} to {ends[-1]}"
        drawn = _wrap(story, frame, f"chain-{first}", f"{caption}.")
        found.append(Sheet(caption, drawn))
    return found


def _pieces(layout: Layout) -> list[tuple[int, int]]:
    """Return the columns of each sheet: whole days where they fit."""
    days, found, first = layout.days, [], 0
    while first < len(days):
        last = min(first + SHEET_COLUMNS, len(days))
        if last < len(days):
            ends = (end for end in range(last, first, -1) if days[end] != days[end - 1])
            last = next(ends, last)
        found.append((first, last))
        first = last
    return found


def _counts(story: Story, graph: Graph, layout: Layout) -> str:
    days = len(set(layout.days))
    parts = [f"{len(story.lots)} lots and {len(story.steps)} records on {days} days"]
    if len(graph.lanes) < len(story.lots):
        parts.append("the lots of one kind of record and day joined in one lane")
    return f"Time runs left to right: {', '.join(parts)}."


def _wrap(story: Story, frame: Frame, name: str, words: str) -> str:
    role = "group" if frame.url else "img"
    return (
        f'<svg class="chain" xmlns="http://www.w3.org/2000/svg" role="{role}" '
        f'viewBox="0 0 {frame.width} {frame.height}" width="{frame.width}" '
        f'height="{frame.height}" aria-labelledby="{name}-title {name}-desc">'
        f'<title id="{name}-title">The chain of {escape(story.lot.code)}</title>'
        f'<desc id="{name}-desc">{escape(words)}</desc>{body(frame, name)}</svg>'
    )


def _frame(
    graph: Graph, layout: Layout, first: int, last: int, url: Url | None, waiting: bool = True
) -> Frame:
    """Return where each column and row of a piece of the grid stands, in pixels."""
    longest = max(lettering.width(lane.code, 12.5, True) for lane in graph.lanes.values())
    pitch = max(PITCH, int(longest) + 40)
    x, left = {}, 12 if first == 0 else pitch
    for column in range(first, last):
        if column == first or layout.days[column] != layout.days[column - 1]:
            left += DAY_GAP
        x[column] = left
        left += pitch
    shown = {key for key in graph.lanes if waiting or _moves(graph, layout, key, first, last)}
    shown |= {key for key in graph.breaks if first <= layout.column[key] < last}
    rows = {layout.row[key] for key in shown}
    words: dict[int, int] = {}
    for key, bar in graph.bars.items():
        if first <= layout.column.get(key, -1) < last:
            row = layout.span[key][0]
            words[row] = max(words.get(row, 0), 2 if bar.note else 1)
    bands, top, y, row = [], {}, float(HEAD), 0
    for band in layout.bands:
        within = [number for number in range(row, row + band.rows) if number in rows]
        row += band.rows
        if not within:
            continue
        bands.append((band.name, y))
        y += BAND_HEAD
        for number in within:
            top[number] = y + words.get(number, 0) * WORD + 4
            y = top[number] + LANE + 6
    width, height = left + 12, int(y) + 8
    return Frame(
        graph, layout, first, last, frozenset(shown), pitch, x, top, bands, width, height, url
    )


def _moves(graph: Graph, layout: Layout, key: str, first: int, last: int) -> bool:
    """Whether a lane begins or is drawn within some columns."""
    lane = graph.lanes[key]
    columns = [layout.column[lane.maker], *(layout.column[use.bar] for use in lane.uses)]
    return any(first <= column < last for column in columns)

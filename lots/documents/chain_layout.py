"""Where everything of a picture stands: columns in time, rows of lanes, no two in one cell.

A column holds a bar, and the cell to its right what begins there; so no bar ever crosses a label.
Rows are packed within a band, which is a vessel or a kind of goods.
"""

from collections import defaultdict
from dataclasses import dataclass, field
from datetime import date

from .chain_graph import Bar, Break, Graph, Lane

REST = 0.5  # how far a lane reaches that nothing draws: to the end of its own cell


@dataclass
class Band:
    """The rows of one vessel or kind of goods."""

    name: str
    rank: float
    rows: int = 0


@dataclass
class Layout:
    """The grid: each key's column, each lane's and break's row, each bar's rows."""

    column: dict[str, int] = field(default_factory=dict)
    row: dict[str, int] = field(default_factory=dict)
    span: dict[str, tuple[int, int]] = field(default_factory=dict)
    bands: list[Band] = field(default_factory=list)
    days: list[date] = field(default_factory=list)  # of each column

    def band_at(self) -> list[Band]:
        """Return the band of each row."""
        return [band for band in self.bands for _ in range(band.rows)]


def lay_out(graph: Graph) -> Layout:
    """Return the grid of a graph."""
    layout = Layout()
    at = {key: number for number, key in enumerate(graph.order)}
    _rows(graph, layout, at)
    _spans(graph, layout)
    _columns(graph, layout)
    return layout


def _reach(lane: Lane, at: dict[str, int]) -> tuple[float, float]:
    start = at[lane.maker]
    ends = [at[use.bar] for use in lane.uses if at[use.bar] > start]
    return start, max(ends, default=start + REST)


def _rows(graph: Graph, layout: Layout, at: dict[str, int]) -> None:
    """Give each lane and break the first row of its band that is free while it lasts."""
    placed: list[tuple[float, float, str, Lane | Break]] = []
    for lane in graph.lanes.values():
        placed.append((*_reach(lane, at), lane.key, lane))
    for one in graph.breaks.values():
        placed.append((at[one.key], at[one.key] + REST, one.key, one))
    members: dict[str, list[tuple[float, float, str]]] = defaultdict(list)
    ranks: dict[str, list[float]] = defaultdict(list)
    for start, end, key, thing in sorted(placed, key=lambda one: one[:3]):
        members[thing.band].append((start, end, key))
        ranks[thing.band].append(thing.rank)
    layout.bands = [Band(name, sum(found) / len(found)) for name, found in ranks.items()]
    layout.bands.sort(key=lambda band: (band.rank, band.name))
    first = 0
    for band in layout.bands:
        ends: list[float] = []
        for start, end, key in members[band.name]:
            free = (row for row, taken in enumerate(ends) if taken <= start)
            row = next(free, len(ends))
            ends[row : row + 1] = [end]
            layout.row[key] = first + row
        band.rows = len(ends)
        first += band.rows


def _spans(graph: Graph, layout: Layout) -> None:
    """Return from which row to which each bar reaches, and each break: over its whole band."""
    touched: dict[str, list[int]] = defaultdict(list)
    for lane in graph.lanes.values():
        for bar in (lane.maker, *(use.bar for use in lane.uses)):
            touched[bar].append(layout.row[lane.key])
    layout.span = {bar: (min(rows), max(rows)) for bar, rows in touched.items()}
    first = 0
    for band in layout.bands:
        for one in graph.breaks.values():
            if one.band == band.name:
                layout.span[one.key] = (first, first + band.rows - 1)
        first += band.rows


def _columns(graph: Graph, layout: Layout) -> None:
    """Give each bar and break a column: its day's last where that is free, else a new one."""
    makers: dict[str, set[str]] = defaultdict(set)
    for lane in graph.lanes.values():
        for use in lane.uses:
            makers[use.bar].add(lane.maker)
    inside: list[str] = []
    for key in graph.order:
        if key not in layout.span:
            continue
        thing: Bar | Break = graph.bars[key] if key in graph.bars else graph.breaks[key]
        fits = (
            layout.days
            and layout.days[-1] == thing.day
            and not makers[key] & set(inside)
            and all(_apart(layout.span[key], layout.span[other]) for other in inside)
        )
        if not fits:
            layout.days.append(thing.day)
            inside = []
        inside.append(key)
        layout.column[key] = len(layout.days) - 1


def _apart(one: tuple[int, int], other: tuple[int, int]) -> bool:
    return one[1] < other[0] or other[1] < one[0]

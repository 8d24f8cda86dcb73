"""The picture of a chain: a server-made SVG, left to right in time, lots and steps on a grid.

Each box has its own cell, so no two boxes or labels can overlap. Beyond 300 lots those of one
kind of step and day join in one box that says how many they are.
"""

from collections import defaultdict
from dataclasses import dataclass
from html import escape

from lots.models import DrawRole, Lot, Step
from lots.tracing.story import Story

MOST_LOTS = 300
CELL_WIDTH, CELL_HEIGHT = 218, 66
BOX_WIDTH, BOX_HEIGHT = 168, 46
LETTERS = 19  # what fits a box at 13 px
DASHES = {
    DrawRole.CARRY_OVER: "7 5",
    DrawRole.AID: "2 4",
    DrawRole.PACKAGING: "2 4",
    DrawRole.CLEANING: "2 4",
    DrawRole.RESIDUE: "1 7",
}


@dataclass(frozen=True)
class Box:
    """One lot, step or group with its two lines of text."""

    key: str
    first: str
    second: str
    kind: str
    asked: bool = False
    held: bool = False


def _cut(text: str) -> str:
    return text if len(text) <= LETTERS else text[: LETTERS - 1] + "…"


def _lot_box(lot: Lot, grouped: bool, asked: int) -> Box:
    if grouped and lot.pk != asked:
        day = f"{lot.made_at:%Y-%m-%d}"
        key = f"group {lot.made_by.kind} {day}"
        return Box(key, lot.made_by.get_kind_display(), day, "group")
    return Box(f"lot {lot.pk}", lot.code, lot.item.name, "lot", lot.pk == asked)


def _step_box(step: Step, grouped: bool) -> Box:
    day = f"{step.started_at:%Y-%m-%d}"
    if grouped:
        return Box(f"steps {step.kind} {day}", step.get_kind_display(), day, "step")
    name = f"{day} {step.partner}" if step.partner else day
    return Box(f"step {step.pk}", step.get_kind_display(), name, "step")


@dataclass
class Graph:
    """The boxes, how many lots each stands for, and the lines between them."""

    boxes: dict[str, Box]
    members: dict[str, set[int]]
    edges: set[tuple[str, str, str]]


def graph_of(story: Story) -> Graph:
    """Return what is drawn of a story: the lots drawn, what each was made by, and into what."""
    links = [*story.back.links, *story.forward.links]
    grouped = len({link.lot for link in links}) > MOST_LOTS
    graph = Graph({}, defaultdict(set), set())

    def add(box: Box, member: int = 0) -> str:
        graph.boxes.setdefault(box.key, box)
        if member:
            graph.members[box.key].add(member)
        return box.key

    asked = story.lot
    here = add(_lot_box(asked, grouped, asked.pk), asked.pk)
    graph.edges.add((add(_step_box(asked.made_by, grouped)), here, ""))
    for link in links:
        lot = story.lots[link.lot]
        box = add(_lot_box(lot, grouped, asked.pk), lot.pk)
        graph.edges.add((add(_step_box(lot.made_by, grouped)), box, ""))
        graph.edges.add((box, add(_step_box(story.steps[link.step], grouped)), link.role))
    return graph


def layers(graph: Graph) -> dict[str, int]:
    """Return each box's column: one more than the furthest box before it; cycles are cut."""
    before: dict[str, set[str]] = defaultdict(set)
    after: dict[str, set[str]] = defaultdict(set)
    for start, end, _ in graph.edges:
        if start != end:
            before[end].add(start)
            after[start].add(end)
    waiting = {key: len(before[key]) for key in graph.boxes}
    column = dict.fromkeys(graph.boxes, 0)
    ready = sorted(key for key, count in waiting.items() if count == 0)
    while ready:
        key = ready.pop(0)
        for nxt in sorted(after[key]):
            column[nxt] = max(column[nxt], column[key] + 1)
            waiting[nxt] -= 1
            if waiting[nxt] == 0:
                ready.append(nxt)
    return column


def svg(story: Story) -> str:
    """Return the picture as SVG text, with a title and description for who cannot see it."""
    graph = graph_of(story)
    column = layers(graph)
    rows: dict[int, int] = defaultdict(int)
    place: dict[str, tuple[int, int]] = {}
    for key in sorted(graph.boxes, key=lambda key: (column[key], graph.boxes[key].second, key)):
        number = column[key]
        place[key] = (24 + number * CELL_WIDTH, 24 + rows[number] * CELL_HEIGHT)
        rows[number] += 1
    width = 24 + (max(column.values()) + 1) * CELL_WIDTH
    height = 24 + max(rows.values()) * CELL_HEIGHT
    lines = [_line(place, edge) for edge in sorted(graph.edges)]
    boxes = [
        _box(graph.boxes[key], place[key], len(graph.members.get(key, ()))) for key in sorted(place)
    ]
    name = escape(story.lot.code)
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {width} {height}" '
        f'width="{width}" height="{height}" role="img" aria-labelledby="chain-title chain-desc" '
        f'font-family="monospace" font-size="13">'
        f'<title id="chain-title">The chain of {name}</title>'
        f'<desc id="chain-desc">Time runs left to right. The tables below say the same.</desc>'
        f"{''.join(lines)}{''.join(boxes)}</svg>"
    )


def _line(place: dict[str, tuple[int, int]], edge: tuple[str, str, str]) -> str:
    start, end, role = edge
    x1, y1 = place[start][0] + BOX_WIDTH, place[start][1] + BOX_HEIGHT // 2
    x2, y2 = place[end][0], place[end][1] + BOX_HEIGHT // 2
    middle = (x1 + x2) // 2
    dash = f' stroke-dasharray="{DASHES[DrawRole(role)]}"' if role in DASHES else ""
    return (
        f'<path d="M{x1} {y1}C{middle} {y1} {middle} {y2} {x2} {y2}" fill="none" '
        f'stroke="#4A5650" stroke-width="1.5"{dash}/>'
    )


def _box(box: Box, at: tuple[int, int], members: int) -> str:
    x, y = at
    fill = "#E4F1EA" if box.kind == "step" else "#FBFAF6"
    twice = (
        f'<rect x="{x - 5}" y="{y - 5}" width="{BOX_WIDTH + 10}" height="{BOX_HEIGHT + 10}" '
        f'fill="none" stroke="#1B2A24" stroke-width="1.5"/>'
        if box.asked
        else ""
    )
    first = f"{members} lots: {box.first}" if box.kind == "group" else box.first
    return (
        f'{twice}<rect class="box" x="{x}" y="{y}" width="{BOX_WIDTH}" height="{BOX_HEIGHT}" '
        f'fill="{fill}" stroke="#1B2A24"/>'
        f'<text x="{x + 8}" y="{y + 19}" fill="#1B2A24">{escape(_cut(first))}</text>'
        f'<text x="{x + 8}" y="{y + 37}" fill="#1B2A24">{escape(_cut(box.second))}</text>'
    )

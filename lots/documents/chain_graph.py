"""What a picture of a chain shows: bars for steps, lanes for lots, breaks for cleanings.

Beyond 300 lots the lanes of one kind of step and day join in one that says how many they are.
"""

from collections import defaultdict
from dataclasses import dataclass, field
from datetime import date, datetime
from heapq import heapify, heappop, heappush
from zoneinfo import ZoneInfo

from lots.models import DrawRole, ItemKind, Lot, LotState, PlaceKind, Step, StepKind
from lots.tracing.cone import Link
from lots.tracing.story import Story

MOST_LOTS = 300
WORDS = {
    StepKind.OPENING_STOCK: "Opening",
    StepKind.RECEIVING: "Received",
    StepKind.COLLECTION: "Sap in",
    StepKind.CONCENTRATION: "Concentrate",
    StepKind.FILTRATION: "Filter",
    StepKind.CONTAINER_FILL: "Fill",
    StepKind.SALE: "Sale",
    StepKind.CUSTOMER_RETURN: "Return",
    StepKind.SUPPLIER_RETURN: "Sent back",
    StepKind.ADJUSTMENT: "Count",
    StepKind.GRADE_READING: "Grade",
}
# From top to bottom as the work goes, with the materials beside the step that uses them.
_ITEMS = {
    ItemKind.SAP: (0, "Sap"),
    ItemKind.CONCENTRATE: (10, "Concentrate"),
    ItemKind.DEFOAMER: (19, "Defoamer"),
    ItemKind.CONTENTS: (20, "Pan contents"),
    ItemKind.SYRUP: (45, "Syrup"),
    ItemKind.FILTER_AID: (35, "Filter aids"),
    ItemKind.FILTER_PAPER: (35, "Filter aids"),
    ItemKind.CONTAINER: (70, "Packaging"),
    ItemKind.CLOSURE: (70, "Packaging"),
    ItemKind.LABEL: (70, "Packaging"),
    ItemKind.PACKED: (80, "Packed goods"),
    ItemKind.CLEANER: (90, "Cleaning agents"),
}
_SYRUP = {
    StepKind.BOIL: 30,
    StepKind.FILTRATION: 40,
    StepKind.DRUM_FILL: 50,
    StepKind.RECEIVING: 50,
    StepKind.OPENING_STOCK: 50,
    StepKind.REHEAT: 60,
}
_LIQUID = (ItemKind.SAP, ItemKind.CONCENTRATE, ItemKind.CONTENTS, ItemKind.SYRUP)
_VESSELS = {
    PlaceKind.TANK: 0,
    PlaceKind.RO: 9,
    PlaceKind.EVAPORATOR: 20,
    PlaceKind.BATCH_TANK: 30,
    PlaceKind.PRESS: 35,
    PlaceKind.CANNER: 60,
}
_PORTABLE = (PlaceKind.DRUM, PlaceKind.TOTE)


@dataclass
class Bar:
    """A step, or the steps of one kind, day and turn."""

    key: str
    word: str
    note: str
    day: date
    clock: str
    count: int = 0


@dataclass(frozen=True)
class Use:
    """What one bar draws from a lane, in one role."""

    bar: str
    role: str
    quantity: int


@dataclass
class Lane:
    """A lot between its maker and what drew it, or the lots that joined."""

    key: str
    maker: str
    code: str
    note: str
    band: str
    rank: float
    lot: Lot
    asked: bool = False
    mark: str = ""
    marked: int = 0
    count: int = 0
    made: int = 0
    uses: list[Use] = field(default_factory=list)

    @property
    def words(self) -> str:
        """Return what the lane is of, after what stands in its way: held or rejected."""
        if not self.mark:
            return self.note
        mark = self.mark if self.count == 1 else f"{self.marked} {self.mark}"
        return f"{mark}, {self.note}"


@dataclass(frozen=True)
class Break:
    """A clean break of one vessel: its kind and time."""

    key: str
    words: str
    band: str
    rank: float
    day: date
    at: datetime
    clock: str


@dataclass
class Graph:
    """Everything drawn, bars and breaks in the order of time."""

    bars: dict[str, Bar]
    lanes: dict[str, Lane]
    breaks: dict[str, Break]
    order: list[str]


def graph_of(story: Story) -> Graph:
    """Return what is drawn of a story: its lots, what made each, and what drew it."""
    zone = ZoneInfo(story.lot.facility.zone)
    grouped = len(story.lots) > MOST_LOTS
    steps, day, turn = _in_order(story, zone)
    key = {
        pk: f"steps {story.steps[pk].kind} {day[pk]} {turn[pk]}" if grouped else f"step {pk}"
        for pk in steps
    }
    graph = Graph({}, {}, {}, list(dict.fromkeys(key[pk] for pk in steps)))
    for pk in steps:
        _add_bar(graph, key[pk], story.steps[pk], day[pk], zone)
    for lot in sorted(story.lots.values(), key=lambda lot: (lot.made_at, lot.pk)):
        _add_lane(graph, story, lot, key, grouped)
    _add_uses(graph, story, key, grouped)
    if grouped:
        graph.order.sort(key=lambda bar: (graph.bars[bar].day, int(bar.rsplit(" ", 1)[1])))
    _add_breaks(graph, story, zone, grouped)
    return graph


def _links(story: Story) -> tuple[Link, ...]:
    return story.back.links + story.forward.links


def _in_order(story: Story, zone: ZoneInfo) -> tuple[list[int], dict[int, date], dict[int, int]]:
    """Return the steps by time, none before what made its lots; each one's day and turn in it."""
    after: dict[int, set[int]] = defaultdict(set)
    for link in _links(story):
        if link.from_step in story.steps and link.from_step != link.step:
            after[link.from_step].add(link.step)
    waiting = dict.fromkeys(story.steps, 0)
    for steps in after.values():
        for step in steps:
            waiting[step] += 1
    day = {pk: step.started_at.astimezone(zone).date() for pk, step in story.steps.items()}
    turn = dict.fromkeys(story.steps, 0)
    ready = [(story.steps[pk].started_at, pk) for pk, count in waiting.items() if not count]
    heapify(ready)
    order = []
    while ready:
        _, pk = heappop(ready)
        order.append(pk)
        for later in after[pk]:
            if day[pk] > day[later]:
                day[later], turn[later] = day[pk], 0
            if day[pk] == day[later]:
                turn[later] = max(turn[later], turn[pk] + 1)
            waiting[later] -= 1
            if not waiting[later]:
                heappush(ready, (story.steps[later].started_at, later))
    return sorted(order, key=lambda pk: day[pk]), day, turn


def _add_bar(graph: Graph, key: str, step: Step, day: date, zone: ZoneInfo) -> None:
    word = WORDS.get(StepKind(step.kind), step.get_kind_display())
    clock = f"{step.started_at.astimezone(zone):%H:%M}"
    note = str(step.partner) if step.partner else ""
    bar = graph.bars.setdefault(key, Bar(key, word, note, day, clock))
    bar.count += 1
    if bar.count > 1 and bar.note != note:
        bar.note = ""


def _band(lot: Lot, grouped: bool) -> tuple[str, float]:
    kind = ItemKind(lot.item.kind)
    rank, name = _ITEMS[kind]
    if kind == ItemKind.SYRUP:
        rank = _SYRUP.get(StepKind(lot.made_by.kind), rank)
    place = lot.put_in
    if kind in _LIQUID and not grouped and place is not None:
        name = "Drums, totes" if place.kind in _PORTABLE else place.name
    return name, rank


def _mark(story: Story, lot: Lot) -> str:
    if lot.pk in story.held:
        return "held"
    return "rejected" if lot.state == LotState.REJECTED else ""


def _lane_key(story: Story, lot: Lot, maker: str, grouped: bool) -> str:
    if grouped and lot.pk != story.lot.pk:
        return f"lots of {maker} {lot.item.kind}"
    return f"lot {lot.pk}"


def _add_lane(graph: Graph, story: Story, lot: Lot, bars: dict[int, str], grouped: bool) -> None:
    if lot.made_by_id not in bars:
        return
    maker = bars[lot.made_by_id]
    key = _lane_key(story, lot, maker, grouped)
    if key not in graph.lanes:
        band, rank = _band(lot, grouped)
        graph.lanes[key] = Lane(key, maker, lot.code, lot.item.name, band, rank, lot)
    lane = graph.lanes[key]
    lane.count += 1
    lane.made += lot.made or 0
    lane.asked = lane.asked or lot.pk == story.lot.pk
    mark = _mark(story, lot)
    lane.mark = lane.mark or mark
    lane.marked += mark == lane.mark and bool(mark)
    if lane.count > 1:
        lane.code = f"{lane.count} lots"


def _add_uses(graph: Graph, story: Story, bars: dict[int, str], grouped: bool) -> None:
    total: dict[tuple[str, str, str], int] = defaultdict(int)
    for link in _links(story):
        maker, user = bars.get(link.from_step), bars.get(link.step)
        if maker and user and maker != user:
            lane = _lane_key(story, story.lots[link.lot], maker, grouped)
            total[lane, user, link.role] += link.quantity or 0
    for (lane, bar, role), quantity in total.items():
        graph.lanes[lane].uses.append(Use(bar, role, quantity))


def _add_breaks(graph: Graph, story: Story, zone: ZoneInfo, grouped: bool) -> None:
    """Put each clean break after the last step that began before it on its day."""
    ranks: dict[str, list[float]] = defaultdict(list)
    for lane in graph.lanes.values():
        ranks[lane.band].append(lane.rank)
    for step in story.bounded.breaks:
        place = step.place
        if place is None:
            continue
        band = "Drums, totes" if place.kind in _PORTABLE and not grouped else place.name
        known = ranks.get(band)
        rank = sum(known) / len(known) if known else _VESSELS.get(PlaceKind(place.kind), 50)
        there = step.started_at.astimezone(zone)
        key = f"break {step.pk}"
        words = str(step.detail.get("break", "cleaned"))
        clock = f"{there:%H:%M}"
        graph.breaks[key] = Break(key, words, band, rank, there.date(), there, clock)
        graph.order.insert(_place_of(graph, graph.breaks[key]), key)


def _place_of(graph: Graph, one: Break) -> int:
    for number in range(len(graph.order), 0, -1):
        other = graph.bars.get(graph.order[number - 1]) or graph.breaks[graph.order[number - 1]]
        if (other.day, other.clock) <= (one.day, one.clock):
            return number
    return 0


def matter(role: str) -> bool:
    """Whether a role carries the food itself, not an aid, what was left, or packaging."""
    return role in (
        DrawRole.INGREDIENT, DrawRole.SHIPPED, DrawRole.REMOVED, DrawRole.RETURNED,
        DrawRole.BETWEEN,
    )  # fmt: skip

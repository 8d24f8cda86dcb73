"""A lot's story: what is behind it, where it went, and how much is accounted for."""

from collections.abc import Iterable
from dataclasses import dataclass, field
from datetime import datetime
from typing import Any

from lots.models import (
    DrawRole,
    Hold,
    Lot,
    LotState,
    Reading,
    Step,
    StepKind,
    Stock,
)

from .cone import Cone, Link, back, forward


@dataclass(frozen=True)
class Accounting:
    """Where every piece or milligram of one lot is."""

    made: int | None
    adjusted: int
    in_stock: dict[str, int]
    shipped: int
    returned: int
    removed: int
    used: int

    @property
    def stock_total(self) -> int:
        """Return what stands anywhere."""
        return sum(self.in_stock.values())

    @property
    def unexplained(self) -> int | None:
        """Return what no record explains; ``None`` while the lot's quantity is pending."""
        if self.made is None:
            return None
        known = self.stock_total + self.shipped + self.removed + self.used
        return self.made + self.adjusted - known


@dataclass(frozen=True)
class Story:
    """Everything a trace page, command or packet says of one lot, as plain rows."""

    lot: Lot
    back: Cone
    forward: Cone
    steps: dict[int, Step]
    lots: dict[int, Lot]
    accounting: Accounting
    customers: list[tuple[str, int, str]]
    suppliers: list[str]
    woods: list[str]
    people: list[str]
    instruments: list[str]
    bounds: list[Step] = field(default_factory=list)
    breaks: list[Step] = field(default_factory=list)
    held: frozenset[int] = frozenset()


def tell(lot: Lot, follow: str = "all") -> Story:
    """Trace one lot both ways; a constant number of statements whatever the size."""
    behind = back(lot.made_by_id, follow)
    ahead = forward(lot.pk, follow)
    step_ids = behind.steps | ahead.steps
    steps = {
        step.pk: step
        for step in Step.objects.filter(pk__in=step_ids).select_related(
            "place", "partner", "recorded_by"
        )
    }
    lots = {
        one.pk: one
        for one in Lot.objects.filter(pk__in=behind.lots | ahead.lots | {lot.pk}).select_related(
            "item", "made_by__partner", "printed_code", "put_in"
        )
    }
    made_ahead = Lot.objects.filter(made_by__in=ahead.steps).select_related(
        "item", "made_by__partner", "printed_code", "put_in"
    )
    lots |= {one.pk: one for one in made_ahead}
    back_steps = [steps[pk] for pk in behind.steps if pk in steps]
    return Story(
        lot=lot,
        back=behind,
        forward=ahead,
        steps=steps,
        lots=lots,
        accounting=account(lot),
        customers=_customers(ahead, steps, lots),
        suppliers=_names(step.partner for step in back_steps if step.kind == StepKind.RECEIVING),
        woods=_names(step.place for step in back_steps if step.kind == StepKind.COLLECTION),
        people=_names(step.recorded_by for step in back_steps),
        instruments=_instruments(behind),
        bounds=(bounds := _bounds(back_steps)),
        breaks=_breaks(steps, behind.links + ahead.links, lots, bounds),
        held=frozenset(
            Hold.objects.filter(lot__in=lots, ended_at=None).values_list("lot", flat=True)
        ),
    )


def _breaks(
    steps: dict[int, Step], links: Iterable[Link], lots: dict[int, Lot], bounds: list[Step]
) -> list[Step]:
    """Return the clean breaks that bound a chain: before, between and next after a vessel's use."""
    used: dict[int, list[datetime]] = {}
    for step in steps.values():
        if step.place_id:
            used.setdefault(step.place_id, []).append(step.started_at)
    for link in links:
        vessel = lots[link.lot].put_in_id
        if vessel:
            times = (steps[pk].started_at for pk in (link.from_step, link.step) if pk in steps)
            used.setdefault(vessel, []).extend(times)
    rows = Step.objects.filter(kind=StepKind.CLEANING, place__in=used, voided_at=None)
    found = {step.pk: step for step in bounds}
    ended: set[int] = set()
    for step in rows.order_by("started_at", "pk").select_related("place"):
        times = used.get(step.place_id or 0)
        if times and step.started_at >= min(times) and step.place_id not in ended:
            found[step.pk] = step
            if step.started_at > max(times):
                ended.add(step.place_id or 0)
    return sorted(found.values(), key=lambda step: (step.started_at, step.pk))


def _names(things: Any) -> list[str]:
    return sorted({str(thing) for thing in things if thing is not None})


def _instruments(cone: Cone) -> list[str]:
    rows = Reading.objects.filter(step__in=cone.steps, instrument__isnull=False)
    return sorted(set(rows.values_list("instrument__tag", flat=True)))


def _customers(
    cone: Cone, steps: dict[int, Step], lots: dict[int, Lot]
) -> list[tuple[str, int, str]]:
    rows: dict[tuple[str, str], int] = {}
    for link in cone.links:
        if link.role == DrawRole.SHIPPED and link.step in steps:
            name = str(steps[link.step].partner or "over the counter")
            key = (name, lots[link.lot].code)
            rows[key] = rows.get(key, 0) + (link.quantity or 0)
    return sorted((name, quantity, code) for (name, code), quantity in rows.items())


def _bounds(steps: list[Step]) -> list[Step]:
    """Return for each vessel behind a lot its last clean break before the earliest step there."""
    first: dict[int, datetime] = {}
    for step in steps:
        if step.place_id:
            known = first.get(step.place_id, step.started_at)
            first[step.place_id] = min(known, step.started_at)
    broken = Step.objects.filter(kind=StepKind.CLEANING, place__in=first, voided_at=None)
    last: dict[int, Step] = {}
    for step in broken.order_by("started_at", "pk").select_related("place"):
        if step.place_id and step.started_at < first[step.place_id]:
            last[step.place_id] = step
    return sorted(last.values(), key=lambda step: (step.started_at, step.pk))


def account(lot: Lot) -> Accounting:
    """Return where all of one lot is, from its live draws and its stock rows."""
    rows = lot.draws.filter(ended_at=None).values_list("role", "quantity")
    totals: dict[str, int] = {}
    for role, quantity in rows:
        totals[role] = totals.get(role, 0) + (quantity or 0)
    stock: dict[str, int] = {}
    for name, quantity in Stock.objects.filter(lot=lot, quantity__gt=0).values_list(
        "place__name", "quantity"
    ):
        stock[name] = stock.get(name, 0) + quantity
    out = (DrawRole.SHIPPED, DrawRole.REMOVED, DrawRole.RETURNED)
    return Accounting(
        made=lot.made if lot.state != LotState.VOID else 0,
        adjusted=lot.adjusted,
        in_stock=stock,
        shipped=totals.get(DrawRole.SHIPPED, 0),
        returned=totals.get(DrawRole.RETURNED, 0),
        removed=totals.get(DrawRole.REMOVED, 0),
        used=sum(amount for role, amount in totals.items() if role not in out),
    )

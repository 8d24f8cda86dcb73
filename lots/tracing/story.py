"""A lot's story: what is behind it, where it went, and how much is accounted for."""

from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass, field
from typing import Any

from django.db.models import Count, Max

from lots.models import (
    DrawRole,
    Hold,
    Lot,
    LotState,
    Reading,
    Step,
    StepKind,
    Stock,
    UnpostedEntry,
)

from . import bounds
from .cone import Cone, back, forward

COUNTER = "over the counter"
DIRECTIONS = ("both", "back", "forward")


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
    def known(self) -> int:
        """Return what records explain; what came back stays shipped here: it is a lot anew."""
        return self.stock_total + self.shipped + self.removed + self.used

    @property
    def unexplained(self) -> int | None:
        """Return what no record explains; ``None`` while the lot's quantity is pending."""
        if self.made is None:
            return None
        return self.made + self.adjusted - self.known


@dataclass(frozen=True)
class Shipment:
    """One line of a sale: what of which lot went out, or came back, and by which record."""

    step: Step
    lot: Lot
    quantity: int | None
    returned: bool = False

    @property
    def customer(self) -> str:
        """Return who got it."""
        return str(self.step.partner or COUNTER)


@dataclass(frozen=True)
class Instrument:
    """An instrument that read something behind a lot: how often, and when last."""

    tag: str
    readings: int
    last: Any


@dataclass(frozen=True)
class Story:
    """Everything a trace page, command or packet says of one lot, as plain rows."""

    lot: Lot
    back: Cone
    forward: Cone
    steps: dict[int, Step]
    lots: dict[int, Lot]
    accounting: Accounting
    shipments: list[Shipment] = field(default_factory=list)
    instruments_used: list[Instrument] = field(default_factory=list)
    bounded: bounds.Bounds = field(default_factory=bounds.Bounds)
    held: frozenset[int] = frozenset()
    unposted: list[UnpostedEntry] = field(default_factory=list)
    follow: str = "all"
    direction: str = "both"

    @property
    def back_steps(self) -> list[Step]:
        """Return the records behind the lot, its own among them, by time."""
        found = [self.steps[pk] for pk in self.back.steps if pk in self.steps]
        return sorted(found, key=lambda step: (step.started_at, step.pk))

    def of_kind(self, kind: StepKind) -> list[Step]:
        """Return the records of one kind behind the lot."""
        return [step for step in self.back_steps if step.kind == kind]

    @property
    def customers(self) -> list[tuple[str, int, str]]:
        """Return who got how much of which lot."""
        rows: dict[tuple[str, str], int] = {}
        for one in self.shipments:
            if not one.returned:
                key = (one.customer, one.lot.code)
                rows[key] = rows.get(key, 0) + (one.quantity or 0)
        return sorted((name, quantity, code) for (name, code), quantity in rows.items())

    @property
    def suppliers(self) -> list[str]:
        """Return who supplied anything behind the lot."""
        return _names(step.partner for step in self.of_kind(StepKind.RECEIVING))

    @property
    def woods(self) -> list[str]:
        """Return the woods sections the sap came from."""
        return _names(step.place for step in self.of_kind(StepKind.COLLECTION))

    @property
    def people(self) -> list[str]:
        """Return who recorded what is behind the lot."""
        return _names(step.recorded_by for step in self.back_steps)

    @property
    def instruments(self) -> list[str]:
        """Return the tags of the instruments that read what is behind the lot."""
        return [one.tag for one in self.instruments_used]

    @property
    def bounds(self) -> list[Step]:
        """Return the clean break before each vessel's first use."""
        return self.bounded.before

    def records_of(self) -> list[tuple[str, int]]:
        """Return who recorded how many of the records behind the lot."""
        return sorted(Counter(str(step.recorded_by) for step in self.back_steps).items())


def tell(lot: Lot, follow: str = "all", direction: str = "both") -> Story:
    """Trace one lot back, forward or both; a constant number of statements whatever the size."""
    nothing = Cone(frozenset(), ())
    behind = back(lot.made_by_id, follow)
    if direction == "forward":
        behind = Cone(frozenset({lot.made_by_id}), ())
    ahead = nothing if direction == "back" else forward(lot.pk, follow)
    steps = {
        step.pk: step
        for step in Step.objects.filter(pk__in=behind.steps | ahead.steps).select_related(
            "place", "partner", "recorded_by"
        )
    }
    lots = _lots(lot, behind, ahead)
    return Story(
        lot=lot,
        back=behind,
        forward=ahead,
        steps=steps,
        lots=lots,
        accounting=account(lot),
        shipments=_shipments(ahead, steps, lots),
        instruments_used=_instruments(behind),
        bounded=bounds.of(behind, ahead, steps, lots, follow),
        held=frozenset(
            Hold.objects.filter(lot__in=lots, ended_at=None).values_list("lot", flat=True)
        ),
        unposted=list(
            UnpostedEntry.objects.filter(lots__in=lots, settled_at=None)
            .distinct()
            .order_by("happened_at", "pk")
        ),
        follow=follow,
        direction=direction,
    )


def _lots(lot: Lot, behind: Cone, ahead: Cone) -> dict[int, Lot]:
    """Return the lots of a chain, all of them at the one facility that is already known."""
    rows = Lot.objects.select_related("item", "made_by__partner", "printed_code", "put_in")
    found = {one.pk: one for one in rows.filter(pk__in=behind.lots | ahead.lots | {lot.pk})}
    found |= {one.pk: one for one in rows.filter(made_by__in=ahead.steps)}
    for one in found.values():
        if one.facility_id == lot.facility_id:
            one.facility = lot.facility
    return found


def _names(things: Iterable[Any]) -> list[str]:
    return sorted({str(thing) for thing in things if thing is not None})


def _instruments(cone: Cone) -> list[Instrument]:
    rows = Reading.objects.filter(step__in=cone.steps, instrument__isnull=False)
    counted = rows.values("instrument__tag").annotate(readings=Count("pk"), last=Max("at"))
    return [
        Instrument(row["instrument__tag"], row["readings"], row["last"])
        for row in counted.order_by("instrument__tag")
    ]


def _shipments(cone: Cone, steps: dict[int, Step], lots: dict[int, Lot]) -> list[Shipment]:
    roles = (DrawRole.SHIPPED, DrawRole.RETURNED)
    found = [
        Shipment(steps[link.step], lots[link.lot], link.quantity, link.role == DrawRole.RETURNED)
        for link in cone.links
        if link.role in roles and link.step in steps
    ]
    return sorted(found, key=lambda one: (one.customer, one.step.started_at, one.lot.code))


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

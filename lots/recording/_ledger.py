"""Lots made, drawn and placed: the only code that builds lots and draws.

Quantities are whole milligrams (liquids, materials by weight) or whole pieces.
"""

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import datetime
from typing import Any

from django.db.models import F

from lots.models import (
    Adjustment,
    Draw,
    DrawRole,
    GoodsKind,
    Item,
    Lot,
    LotState,
    Place,
    Step,
    Stock,
    VesselTake,
)
from lots.quantities import rounding
from lots.tracing.cone import reaches

from . import _codes, _judge
from ._door import Writer
from .errors import CodeTaken, NotEnough, OnHold, WouldLoop, WrongTime

# Where a held lot may still go (design: quarantine, sample, return, rework, destroy).
HELD_MAY = frozenset({DrawRole.REMOVED, DrawRole.RETURNED})
SHARES = frozenset({DrawRole.INGREDIENT, DrawRole.CARRY_OVER})


@dataclass(frozen=True)
class Taken:
    """What was really drawn from a vessel or lot: milligrams (or pieces) and solids."""

    quantity: int | None
    solids: int | None


def make(
    writer: Writer,
    step: Step,
    item: Item,
    *,
    place: Place | None,
    quantity: int | None,
    solids: int | None = None,
    at: datetime | None = None,
    **fields: Any,
) -> Lot:
    """Make one lot and put it where it stands; ``quantity`` ``None`` is pending."""
    moment = at or step.started_at
    writer.own(item, place)
    if place is not None and place.is_vessel and item.is_liquid:
        writer.before_arrival(place, moment)
    code = fields.pop("code", "") or _codes.internal_code(writer, item, moment)
    if Lot.objects.filter(facility=writer.facility, code=code).exists():
        raise CodeTaken(f"{code} is already a lot here.", field="code")
    lot = Lot.objects.create(
        facility=writer.facility,
        item=item,
        code=code,
        made_by=step,
        made_at=moment,
        made=quantity,
        solids_made=solids,
        put_in=place,
        goods_kind=fields.pop("goods_kind", GoodsKind.OTHER),
        **fields,
    )
    writer.touch(lot)
    if place is not None:
        Stock.objects.create(lot=lot, place=place, quantity=quantity or 0)
        if place.is_vessel and item.is_liquid:
            _tell_later_steps(writer, lot, place, moment)
    drawn = step.draws.filter(ended_at=None, role__in=SHARES).exclude(quantity=0)
    for draw in drawn.select_related("lot"):
        _inherit(writer, draw.lot, [lot])
    return lot


def _inherit(writer: Writer, source: Lot, made: Iterable[Lot]) -> None:
    """Hold what was made from a held lot: an act that happened is recorded, not waved through."""
    hold = source.holds.filter(ended_at=None).first()
    if hold is None:
        return
    for lot in made:
        reason = f"Made from {source.code}, which is on hold: {hold.reason}"
        if not lot.holds.filter(ended_at=None, reason=reason[:400]).exists():
            _judge.hold(writer, lot, reason)


def _tell_later_steps(writer: Writer, lot: Lot, vessel: Place, at: datetime) -> None:
    """Keep a late lot inside every trace: later steps that drew there carry it over."""
    if writer.redividing:
        return
    later = (
        Draw.objects.filter(from_place=vessel, ended_at=None, step__started_at__gt=at)
        .exclude(step=lot.made_by)
        .values_list("step", flat=True)
        .distinct()
    )
    for step in Step.objects.filter(pk__in=list(later)):
        if not reaches(step.pk, lot.made_by_id):
            _draw(writer, step, lot, 0, 0, DrawRole.CARRY_OVER, vessel)


def _draw(
    writer: Writer,
    step: Step,
    lot: Lot,
    quantity: int | None,
    solids: int | None,
    role: DrawRole,
    place: Place | None,
    **fields: Any,
) -> Draw:
    if lot.made_by_id == step.pk or reaches(step.pk, lot.made_by_id):
        raise WouldLoop(f"{lot.code} was made from this step; put it back as a new segment.")
    draw = Draw.objects.create(
        facility=writer.facility,
        lot=lot,
        from_step_id=lot.made_by_id,
        step=step,
        role=role,
        quantity=quantity,
        solids=solids,
        from_place=place,
        recorded_at=writer.now,
        **fields,
    )
    return writer.touch(draw)


def _solids_share(lot: Lot, quantity: int | None) -> int | None:
    """Return the lot's solids that go with a quantity; the draw that empties takes the rest."""
    if quantity is None or lot.solids_remaining is None or lot.remaining is None:
        return None
    if quantity >= lot.remaining:
        return int(lot.solids_remaining)
    return int(lot.solids_remaining) * quantity // int(lot.remaining)


def take(
    writer: Writer,
    step: Step,
    lot: Lot,
    quantity: int | None,
    role: DrawRole,
    *,
    place: Place | None = None,
    rework: bool = False,
    asked: VesselTake | None = None,
    lingers: bool = False,
) -> Taken:
    """Draw from one lot, where it stands; ``quantity`` ``None`` is "not measured".

    Refuses a held lot (unless reworked), more than the book holds, a lot of another facility, and
    a lot made after the act. Goods in several places are drawn place by place. A lot that
    ``lingers`` keeps its place at nought: the vessel was not emptied, so later draws carry it over.
    """
    lot = Lot.objects.select_related("item", "made_by__place").get(pk=lot.pk)
    writer.own(lot, place)
    if quantity != 0:
        _refuse(writer, step, lot, role, rework)
    amount = quantity or 0
    if lot.remaining is not None and amount > lot.remaining:
        if role not in (DrawRole.AID, DrawRole.PACKAGING, DrawRole.CLEANING):
            raise NotEnough(
                f"{lot.code} holds {_words(lot, lot.remaining)} by the book; "
                f"you entered {_words(lot, amount)}.",
                field="quantity",
            )
        adjust(writer, step, lot, amount - lot.remaining, place)
        lot.refresh_from_db()
    total: int | None = 0
    for where, part in _places_of(lot, amount, place):
        given = None if quantity is None else part
        solids = _take_part(writer, step, lot, given, role, where, asked, lingers)
        total = None if total is None or solids is None else total + solids
        lot.refresh_from_db()
    if role in SHARES and quantity != 0:
        _inherit(writer, lot, step.made_lots.all())
    return Taken(quantity, total)


def _take_part(
    writer: Writer,
    step: Step,
    lot: Lot,
    quantity: int | None,
    role: DrawRole,
    place: Place | None,
    asked: VesselTake | None,
    lingers: bool,
) -> int | None:
    solids = _solids_share(lot, quantity)
    changes: dict[str, Any] = {"drawn": F("drawn") + (quantity or 0)}
    if solids:
        changes["solids_drawn"] = F("solids_drawn") + solids
    if role == DrawRole.SHIPPED:
        changes["shipped"] = F("shipped") + (quantity or 0)
    Lot.objects.filter(pk=lot.pk).update(**changes)
    row = Stock.objects.filter(lot=lot, place=place).first() if place else None
    if row is not None and (row.quantity != quantity or lot.made is None or lingers):
        Stock.objects.filter(pk=row.pk).update(quantity=F("quantity") - (quantity or 0))
    elif row is not None:
        row.delete()
    writer.touch(lot)
    _draw(writer, step, lot, quantity, solids, role, place, asked=asked)
    return solids


def _places_of(lot: Lot, amount: int, place: Place | None) -> list[tuple[Place | None, int]]:
    """Return where an amount is drawn from, the first place first."""
    rows = Stock.objects.filter(lot=lot).select_related("place").order_by("pk")
    standing = [row for row in rows if place is None or row.place_id == place.pk]
    if not amount:
        return [(standing[0].place if standing else place, 0)]
    parts, left = [], amount
    for row in standing:
        part = min(left, row.quantity)
        if part:
            parts.append((row.place, part))
            left -= part
    if lot.made is None and left:
        return [(standing[0].place if standing else place, amount)]
    if left:
        raise NotEnough(
            f"{lot.code} does not stand there in that quantity; check the place.", field="place"
        )
    return parts


def _refuse(writer: Writer, step: Step, lot: Lot, role: DrawRole, rework: bool) -> None:
    if not rework:
        _refuse_held(writer, lot, role, step.started_at)
    ended = lot.state in (LotState.REJECTED, LotState.VOID)
    if lot.state == LotState.VOID or (ended and role not in HELD_MAY):
        raise OnHold(f"{lot.code} is {lot.get_state_display()}; it may not be used.", field="lots")
    if step.ended_at is not None and lot.made_at > step.ended_at:
        raise WrongTime(
            f"{lot.code} was made only after that time; check the hour of this record.", field="at"
        )


def _words(lot: Lot, quantity: int) -> str:
    if lot.item.unit == "piece":
        return f"{quantity} pieces"
    return f"{rounding.fixed(quantity / 1_000_000, 2)} kg"


def _refuse_held(writer: Writer, lot: Lot, role: DrawRole, at: datetime) -> None:
    if role in HELD_MAY or not writer.is_live(at):
        return
    hold = lot.holds.filter(ended_at=None).first()
    if hold:
        raise OnHold(f"{lot.code} is on hold: {hold.reason}", field="lots")


def adjust(
    writer: Writer, step: Step, lot: Lot, difference: int, place: Place | None
) -> Adjustment:
    """Book a difference a step found; solids follow the mass. A void of the step takes it back.

    Raises OnHold for a void lot.
    """
    lot = Lot.objects.select_related("made_by__place").get(pk=lot.pk)
    if lot.state == LotState.VOID:
        raise OnHold(f"{lot.code} is void; it has no stock.", field="lots")
    row = Stock.objects.filter(lot=lot, **({"place": place} if place else {})).first()
    where = place or (row.place if row else lot.made_by.place)
    if where is None:
        raise NotEnough(f"{lot.code} stands nowhere by the book; say where.", field="place")
    solids = 0
    if lot.remaining and lot.solids_remaining is not None:
        solids = int(lot.solids_remaining) * difference // int(lot.remaining)
    booked = Adjustment.objects.create(
        step=step, lot=lot, place=where, quantity=difference, solids=solids
    )
    book_adjustment(writer, booked)
    return booked


def book_adjustment(writer: Writer, booked: Adjustment, *, back: bool = False) -> None:
    """Change the book by an adjustment, or back again when its step is voided."""
    sign = -1 if back else 1
    Lot.objects.filter(pk=booked.lot_id).update(
        adjusted=F("adjusted") + sign * booked.quantity,
        solids_adjusted=F("solids_adjusted") + sign * booked.solids,
    )
    change_stock(booked.lot, booked.place, sign * booked.quantity)
    writer.touch(booked)
    writer.touch(booked.lot)


def change_stock(lot: Lot, place: Place, difference: int) -> None:
    """Add to what stands in a place; raises NotEnough where less stands there."""
    row, _ = Stock.objects.get_or_create(lot=lot, place=place, defaults={"quantity": 0})
    if row.quantity + difference < 0:
        raise NotEnough(f"Less of {lot.code} stands in {place.name}.", field="place")
    Stock.objects.filter(pk=row.pk).update(quantity=F("quantity") + difference)
    if row.quantity + difference == 0 and lot.made is not None:
        Stock.objects.filter(pk=row.pk).delete()


def take_back_adjustment(writer: Writer, booked: Adjustment) -> None:
    """End an adjustment and take its difference off the book."""
    Adjustment.objects.filter(pk=booked.pk).update(ended_at=writer.now, ended_by=writer.by)
    book_adjustment(writer, booked, back=True)


def give_back(writer: Writer, draw: Draw) -> None:
    """End a draw: what it took stands again where it was drawn."""
    Draw.objects.filter(pk=draw.pk).update(ended_at=writer.now, ended_by=writer.by)
    writer.touch(draw)
    amount, solids = draw.quantity or 0, draw.solids or 0
    if draw.role == DrawRole.RETURNED:
        Lot.objects.filter(pk=draw.lot_id).update(returned=F("returned") - amount)
        writer.touch(draw.lot)
        return
    shipped = amount if draw.role == DrawRole.SHIPPED else 0
    Lot.objects.filter(pk=draw.lot_id).update(
        shipped=F("shipped") - shipped,
        drawn=F("drawn") - amount,
        solids_drawn=F("solids_drawn") - solids,
    )
    if draw.from_place is not None:
        change_stock(draw.lot, draw.from_place, amount)
    writer.touch(draw.lot)

"""Lots made, drawn and placed: the only code that builds lots and draws.

Quantities are whole milligrams (liquids, materials by weight) or whole pieces.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime
from typing import Any

from django.db.models import F, Q

from lots.identification import lot_code
from lots.models import (
    Draw,
    DrawRole,
    GoodsKind,
    Item,
    Lot,
    LotState,
    Place,
    PrintedCode,
    Step,
    Stock,
)
from lots.quantities import rounding
from lots.tracing.cone import reaches

from ._door import Writer
from .errors import CodeTaken, NotEnough, OnHold, WouldLoop

# Where a held lot may still go (design: quarantine, sample, return, rework, destroy).
HELD_MAY = frozenset({DrawRole.REMOVED, DrawRole.RETURNED})
SHARES = frozenset({DrawRole.INGREDIENT, DrawRole.CARRY_OVER})


@dataclass(frozen=True)
class Taken:
    """What was really drawn from a vessel or lot: milligrams (or pieces) and solids."""

    quantity: int | None
    solids: int | None


def internal_code(writer: Writer, item: Item, at: datetime) -> str:
    """Return a fresh internal code: kind letter, year, day of year, running number."""
    day = at.astimezone(_zone(writer)).date()
    prefix = f"{item.kind[:1].upper()}{day:%y%j}"
    return f"{prefix}-{writer.next_number('lot:' + prefix) + 1}"


def _zone(writer: Writer) -> Any:
    from zoneinfo import ZoneInfo

    return ZoneInfo(writer.facility.zone)


def reserve_code(writer: Writer, item: Item, at: datetime, text: str = "") -> PrintedCode:
    """Take the printed code of a run: the one given, or the next of the facility's pattern."""
    if text:
        clean = lot_code.normalise(text)
        if not lot_code.is_valid(clean):
            raise CodeTaken(
                f"{text} cannot be printed: use up to 10 of A–Z without O and I, 0–9, hyphen.",
                field="printed_code",
            )
        if PrintedCode.objects.filter(item=item, text=clean).exists():
            raise CodeTaken(f"{clean} is already on {item.name}.", field="printed_code")
        return writer.touch(
            PrintedCode.objects.create(facility=writer.facility, item=item, text=clean)
        )
    day = at.astimezone(_zone(writer)).date()
    while True:
        serial = writer.next_number(f"printed:{day:%y%j}")
        clean = lot_code.render(writer.facility.code_pattern, day, serial)
        if not PrintedCode.objects.filter(item=item, text=clean).exists():
            return writer.touch(
                PrintedCode.objects.create(facility=writer.facility, item=item, text=clean)
            )


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
    code = fields.pop("code", "") or internal_code(writer, item, moment)
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
        goods_kind=fields.pop("goods_kind", GoodsKind.OTHER),
        **fields,
    )
    writer.touch(lot)
    if place is not None:
        Stock.objects.create(lot=lot, place=place, quantity=quantity or 0)
        if place.is_vessel and item.is_liquid:
            _tell_later_steps(writer, lot, place, moment)
    return lot


def _tell_later_steps(writer: Writer, lot: Lot, vessel: Place, at: datetime) -> None:
    """Keep a late lot inside every trace: later steps that drew there carry it over."""
    later = (
        Draw.objects.filter(from_place=vessel, ended_at=None, step__started_at__gt=at)
        .exclude(step=lot.made_by)
        .values_list("step", flat=True)
        .distinct()
    )
    for step in Step.objects.filter(pk__in=list(later)):
        if not reaches(step.pk, lot.made_by_id):
            _draw(writer, step, lot, 0, 0, DrawRole.CARRY_OVER, vessel)


def contents(vessel: Place) -> list[Stock]:
    """Return what a vessel holds now, oldest first, lots of unknown quantity included."""
    return list(
        Stock.objects.filter(place=vessel)
        .filter(Q(quantity__gt=0) | Q(lot__made=None))
        .exclude(lot__state=LotState.VOID)
        .select_related("lot__item", "place")
        .order_by("lot__made_at", "lot_id")
    )


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
    **fields: Any,
) -> Draw:
    """Draw from one lot; refuses a held lot (unless reworked) and more than the book holds.

    ``quantity`` ``None`` is "not measured" for a pending lot.
    """
    lot = Lot.objects.get(pk=lot.pk)
    if not rework:
        _refuse_held(writer, lot, role, step.started_at)
    ended = lot.state in (LotState.REJECTED, LotState.VOID)
    if ended and role not in HELD_MAY:
        raise OnHold(f"{lot.code} is {lot.get_state_display()}; it may not be used.", field="lots")
    amount = quantity or 0
    if lot.remaining is not None and amount > lot.remaining:
        if role in (DrawRole.AID, DrawRole.PACKAGING, DrawRole.CLEANING):
            adjust(writer, lot, amount - lot.remaining, place)
            lot.refresh_from_db()
        else:
            raise NotEnough(
                f"{lot.code} holds {_words(lot, lot.remaining)} by the book; "
                f"you entered {_words(lot, amount)}.",
                field="quantity",
            )
    solids = _solids_share(lot, quantity)
    changes: dict[str, Any] = {"drawn": F("drawn") + amount}
    if solids:
        changes["solids_drawn"] = F("solids_drawn") + solids
    if role == DrawRole.SHIPPED:
        changes["shipped"] = F("shipped") + amount
    Lot.objects.filter(pk=lot.pk).update(**changes)
    _lower_stock(lot, amount, place)
    writer.touch(lot)
    return _draw(writer, step, lot, quantity, solids, role, place, **fields)


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


def _lower_stock(lot: Lot, amount: int, place: Place | None) -> None:
    rows = Stock.objects.filter(lot=lot).order_by("pk")
    if place is not None:
        rows = rows.filter(place=place)
    left = amount
    for row in rows:
        part = min(left, row.quantity)
        left -= part
        if row.quantity - part or lot.made is None:
            Stock.objects.filter(pk=row.pk).update(quantity=F("quantity") - part)
        else:
            row.delete()
    if left:
        raise NotEnough(
            f"{lot.code} does not stand there in that quantity; check the place.", field="place"
        )


def adjust(writer: Writer, lot: Lot, difference: int, place: Place | None) -> None:
    """Book a counted difference: the journal keeps who and why; solids follow the mass."""
    lot = Lot.objects.get(pk=lot.pk)
    solids = 0
    if lot.remaining and lot.solids_remaining is not None:
        solids = int(lot.solids_remaining) * difference // int(lot.remaining)
    Lot.objects.filter(pk=lot.pk).update(
        adjusted=F("adjusted") + difference, solids_adjusted=F("solids_adjusted") + solids
    )
    row = Stock.objects.filter(lot=lot, **({"place": place} if place else {})).first()
    place = place or lot.made_by.place
    if row is not None:
        Stock.objects.filter(pk=row.pk).update(quantity=F("quantity") + difference)
    elif place is not None:
        Stock.objects.create(lot=lot, place=place, quantity=max(difference, 0))
    writer.touch(lot)


def take_from_vessel(
    writer: Writer,
    step: Step,
    vessel: Place,
    mass: int | None,
    *,
    emptied: bool = False,
    accept_difference: bool = False,
    role: DrawRole = DrawRole.INGREDIENT,
) -> Taken:
    """Draw every lot of a vessel in proportion (well mixed); ``mass`` in milligrams.

    ``mass`` ``None`` takes all. ``emptied`` takes each lot to exactly zero and books the
    difference to what was measured. Raises NotEnough above the book unless the difference lies
    within the gauge tolerance and was accepted.
    """
    held = contents(vessel)
    if not held:
        raise NotEnough(f"{vessel.name} is empty by the book.", field="vessel")
    known = [row for row in held if row.lot.made is not None]
    book = sum(row.quantity for row in known)
    if mass is not None and abs(mass - book) * 1000 <= book:
        mass = None  # the same volume typed twice differs by its rounding alone: it is all of it
    wanted = book if mass is None else mass
    if mass is not None and (emptied or wanted > book) and known:
        _book_difference(writer, vessel, known, wanted - book, emptied or accept_difference)
        known = [row for row in contents(vessel) if row.lot.made is not None]
        book = sum(row.quantity for row in known)
    parts = rounding.share_out(wanted, [row.quantity for row in known]) if known else []
    total, solids, unknown = 0, 0, len(known) != len(held)
    for row, part in zip(known, parts, strict=True):
        draw_role = role if part else DrawRole.CARRY_OVER
        draw = take(writer, step, row.lot, part, draw_role, place=vessel)
        total += part
        unknown = unknown or draw.solids is None
        solids += draw.solids or 0
    for row in held:
        if row.lot.made is None:
            take(writer, step, row.lot, None, role, place=vessel)
            if mass is None or emptied:
                Stock.objects.filter(pk=row.pk).delete()
    pending = any(row.lot.made is None for row in held)
    return Taken(None if pending else total, None if unknown else solids)


def _book_difference(
    writer: Writer, vessel: Place, known: Sequence[Stock], difference: int, accepted: bool
) -> None:
    book = sum(row.quantity for row in known)
    tolerance = book * writer.facility.gauge_tolerance_percent // 100
    if difference > 0 and (not accepted or difference > tolerance):
        kilograms = rounding.fixed(book / 1_000_000, 1)
        entered = rounding.fixed((book + difference) / 1_000_000, 1)
        raise NotEnough(
            f"{vessel.name} holds {kilograms} kg by the book; you entered {entered} kg. "
            "Check the gauge, or tick “record the difference” if it lies within "
            f"{writer.facility.gauge_tolerance_percent} %.",
            field="quantity",
        )
    if difference > 0 or accepted:
        parts = rounding.share_out(abs(difference), [row.quantity for row in known])
        for row, part in zip(known, parts, strict=True):
            if part:
                adjust(writer, row.lot, part if difference > 0 else -part, vessel)

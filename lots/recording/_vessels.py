"""What a vessel holds at a time, and drawing from it in proportion, to the milligram."""

from collections.abc import Iterable, Sequence
from datetime import datetime
from decimal import Decimal

from django.db.models import QuerySet

from lots.models import DrawRole, LotState, Place, Stock, VesselTake
from lots.quantities import rounding

from . import _ledger
from ._door import Writer
from .errors import GaugeDifference, NotEnough
from .measures import Typed, liquid_mass


def contents(vessel: Place, at: datetime | None = None) -> list[Stock]:
    """Return what a vessel holds, oldest first, lots of unknown quantity included.

    A lot whose share rounded to nought stays among them until the vessel is emptied: rounding
    never ends a trace. With a time, lots made only after it are left out.
    """
    rows = Stock.objects.filter(place=vessel).exclude(lot__state=LotState.VOID)
    if at is not None:
        rows = rows.filter(lot__made_at__lte=at)
    return list(rows.select_related("lot__item", "place").order_by("lot__made_at", "lot_id"))


def mixture_brix(held: Sequence[Stock]) -> float | None:
    """Return the true °Brix of some contents, or ``None`` where a share is unknown."""
    mass = sum(row.quantity for row in held)
    if not mass or any(row.lot.solids_remaining is None for row in held):
        return None
    return 100 * sum(int(row.lot.solids_remaining) for row in held) / mass


def answer(writer: Writer, asked: VesselTake, *, again: bool = False) -> _ledger.Taken:
    """Draw what a take asks of its vessel as it stood then.

    ``again`` is a re-division: then nothing is refused, and what was drawn above the book is
    booked as a difference.
    """
    held = contents(asked.vessel, asked.at)
    if not again and not any(row.quantity or row.lot.made is None for row in held):
        raise NotEnough(f"{asked.vessel.name} is empty by the book.", field="vessel")
    known = [row for row in held if row.lot.made is not None]
    book = sum(row.quantity for row in known)
    value = Decimal(asked.typed_value) if asked.typed_value else None
    mass = liquid_mass(Typed(value, asked.typed_unit), mixture_brix(held))
    if mass is not None and abs(mass - book) * 1000 <= book:
        mass = None  # the same volume typed twice differs by its rounding alone: it is all of it
    if mass is not None and (asked.emptied or mass > book) and known:
        accepted = asked.emptied or asked.accept_difference or again
        _book_difference(writer, asked, known, mass - book, accepted, again)
        known = [row for row in contents(asked.vessel, asked.at) if row.lot.made is not None]
        book = sum(row.quantity for row in known)
    pending = [row for row in held if row.lot.made is None]
    return _draw(writer, asked, known, pending, book if mass is None else min(mass, book))


def _draw(
    writer: Writer,
    asked: VesselTake,
    known: Sequence[Stock],
    pending: Sequence[Stock],
    wanted: int,
) -> _ledger.Taken:
    parts = rounding.share_out(wanted, [row.quantity for row in known]) if known else []
    total, solids, unknown = 0, 0, bool(pending)
    for row, part in zip(known, parts, strict=True):
        role = DrawRole.INGREDIENT if part else DrawRole.CARRY_OVER
        drawn = _ledger.take(
            writer,
            asked.step,
            row.lot,
            part,
            role,
            place=asked.vessel,
            asked=asked,
            lingers=wanted < sum(one.quantity for one in known),
        )
        total += part
        unknown = unknown or drawn.solids is None
        solids += drawn.solids or 0
    for row in pending:
        _ledger.take(
            writer, asked.step, row.lot, None, DrawRole.INGREDIENT, place=asked.vessel, asked=asked
        )
        if not asked.typed_value or asked.emptied:
            Stock.objects.filter(pk=row.pk).delete()
    return _ledger.Taken(None if pending else total, None if unknown else solids)


def _book_difference(
    writer: Writer,
    asked: VesselTake,
    known: Sequence[Stock],
    difference: int,
    accepted: bool,
    again: bool,
) -> None:
    book = sum(row.quantity for row in known)
    tolerance = book * writer.facility.gauge_tolerance_percent // 100
    if difference > 0 and not again and (not accepted or difference > tolerance):
        kilograms = rounding.fixed(book / 1_000_000, 1)
        entered = rounding.fixed((book + difference) / 1_000_000, 1)
        percent = writer.facility.gauge_tolerance_percent
        words = f"{asked.vessel.name} holds {kilograms} kg by the book; you entered {entered} kg. "
        if difference <= tolerance:
            raise GaugeDifference(
                words + f"That is within the {percent} % of its gauge: confirm to take all and "
                "record the difference.",
                field="quantity",
            )
        raise NotEnough(
            words + f"That is more than the {percent} % of its gauge; check the number.",
            field="quantity",
        )
    if difference > 0 or accepted:
        parts = rounding.share_out(abs(difference), [row.quantity for row in known])
        for row, part in zip(known, parts, strict=True):
            if part:
                signed = part if difference > 0 else -part
                _ledger.adjust(writer, asked.step, row.lot, signed, asked.vessel)


def later_takes(vessel: Place, at: datetime) -> QuerySet[VesselTake]:
    """Return what live records asked of a vessel after a time, in the order of the acts."""
    return (
        VesselTake.objects.filter(vessel=vessel, at__gt=at, step__voided_at=None)
        .select_related("step", "vessel")
        .order_by("at", "pk")
    )


def later_words(takes: Iterable[VesselTake], zone: str) -> str:
    """Return which later records a re-division would change, in a sentence."""
    names = sorted({f"{take.step.in_words(zone)} ({take.vessel})" for take in takes})
    return (
        f"Later records drew from there: {'; '.join(names)}. Recording this divides them anew; "
        "confirm it, or keep this entry for a lead."
    )

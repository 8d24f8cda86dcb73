"""What goes out and what comes back: sales, returns, removals."""

from collections.abc import Sequence
from datetime import datetime

from django.db.models import F, Sum

from lots.models import Draw, DrawRole, Lot, LotState, Partner, Place, Step, StepKind

from . import _judge, _ledger, _sources
from ._door import Writer
from .context import Context
from .errors import NotReleased, OnHold, RecordingError
from .measures import NOT_MEASURED, Typed

REMOVALS = (
    "laboratory sample",
    "retained sample",
    "tasting",
    "own use",
    "gift",
    "breakage",
    "spill",
    "heel left",
    "destruction",
)


def record_sale(
    context: Context,
    *,
    at: datetime,
    sold: Sequence[_sources.FromLot],
    customer: Partner | None = None,
    carrier: Partner | None = None,
    document: str = "",
    address: str = "",
    note: str = "",
) -> Step:
    """Record goods sold to a customer, or over the counter where ``customer`` is ``None``.

    Raises NotReleased for goods that are not released; a sale is never partly written.
    """
    if not sold:
        raise RecordingError("Enter what was sold.", field="lots")
    with context.open("sale") as writer:
        step = writer.step(
            StepKind.SALE,
            at,
            ended_at=at,
            partner=customer,
            document=document,
            note=note,
            detail={"address": address, "carrier": carrier.name if carrier else ""},
        )
        for line in sold:
            lot = Lot.objects.get(pk=line.lot.pk)
            writer.own(lot)
            hold = lot.holds.filter(ended_at=None).first()
            if hold is not None:
                raise OnHold(f"{lot.code} is on hold: {hold.reason}", field="lots")
            if lot.state != LotState.RELEASED:
                raise NotReleased(
                    f"{lot.code} is {lot.get_state_display()}; a sale needs it released.",
                    field="lots",
                )
            quantity = _sources.pieces_or_milligrams(lot, line.amount)
            if not quantity:
                raise RecordingError(f"Enter how much of {lot.code} was sold.", field="quantity")
            _judge.judge_bulk_sale(writer, lot, step)
            _ledger.take(writer, step, lot, quantity, DrawRole.SHIPPED, place=line.place)
        return step


def record_customer_return(
    context: Context,
    *,
    at: datetime,
    sale: Step,
    lot: Lot,
    amount: Typed,
    into: Place,
    reason: str,
) -> Step:
    """Take goods back: a new lot on hold with the same printed code, never more than was sold."""
    with context.open("customer return") as writer:
        writer.own(lot, into)
        line, quantity = _returned_line(writer, sale, lot, amount)
        step = writer.step(
            StepKind.CUSTOMER_RETURN,
            at,
            ended_at=at,
            partner=sale.partner,
            place=into,
            detail={"reason": reason},
        )
        Lot.objects.filter(pk=lot.pk).update(returned=F("returned") + quantity)
        writer.touch(lot)
        solids = None if lot.piece_solids_mg is None else 0
        _ledger._draw(writer, step, lot, quantity, solids, DrawRole.RETURNED, None, returns=line)
        back = _ledger.make(
            writer,
            step,
            lot.item,
            place=into,
            quantity=quantity,
            printed_code=lot.printed_code,
            piece_mg=lot.piece_mg,
            piece_solids_mg=lot.piece_solids_mg,
            goods_kind=lot.goods_kind,
            best_before_date=lot.best_before_date,
        )
        _judge.hold(writer, back, f"Returned by the customer: {reason}")
        return step


def _returned_line(writer: Writer, sale: Step, lot: Lot, amount: Typed) -> tuple[Draw, int]:
    """Return the sale line goods come back from and how many; never more than went out."""
    lines = Draw.objects.filter(
        step=sale, lot=lot, role=DrawRole.SHIPPED, ended_at=None, facility=writer.facility
    ).order_by("pk")
    if not lines:
        raise RecordingError(f"{lot.code} was not on that sale.", field="lot")
    quantity = _sources.pieces_or_milligrams(lot, amount) or 0
    sold = back = 0
    for line in lines:
        came = Draw.objects.filter(returns=line, ended_at=None).aggregate(all=Sum("quantity"))
        sold, back = sold + (line.quantity or 0), back + (came["all"] or 0)
        if 0 < quantity <= (line.quantity or 0) - (came["all"] or 0):
            return line, quantity
    raise RecordingError(
        f"{sold} of {lot.code} went out on that sale; {back} came back already.", field="quantity"
    )


def record_removal(
    context: Context,
    *,
    at: datetime,
    lot: Lot,
    reason: str,
    amount: Typed = NOT_MEASURED,
    place: Place | None = None,
    note: str = "",
) -> Step:
    """Remove goods that are not sold: samples, tasting, breakage, spill, destruction and so on."""
    if reason not in REMOVALS:
        raise RecordingError("Choose one of the reasons.", field="reason")
    with context.open("removal") as writer:
        step = writer.step(StepKind.REMOVAL, at, ended_at=at, detail={"reason": reason}, note=note)
        quantity = _sources.pieces_or_milligrams(lot, amount)
        _ledger.take(writer, step, lot, quantity, DrawRole.REMOVED, place=place)
        return step

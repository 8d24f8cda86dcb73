"""What comes in: deliveries of materials, sap and syrup, and the stock already in the cellar."""

from datetime import date, datetime

from lots.models import (
    DrawRole,
    GoodsKind,
    Item,
    ItemKind,
    Lot,
    LotState,
    Partner,
    Place,
    Step,
    StepKind,
)
from lots.rules.verdict import Stage

from . import _judge, _ledger
from ._door import Writer
from .context import Context
from .errors import RecordingError
from .measures import NOT_MEASURED, DensityReading, Liquid, Typed

DECISIONS = ("accept", "hold", "reject")


def record_receiving(
    context: Context,
    *,
    at: datetime,
    supplier: Partner,
    item: Item,
    amount: Typed,
    place: Place,
    supplier_code: str = "",
    decision: str = "accept",
    decision_reason: str = "",
    carrier: Partner | None = None,
    document: str = "",
    packages: str = "",
    condition: str = "",
    statement: str = "",
    brix: DensityReading | None = None,
    temperature: Typed = NOT_MEASURED,
) -> Step:
    """Record one delivered lot and the decision on it (accept, hold or reject)."""
    if decision not in DECISIONS:
        raise RecordingError("Choose accept, hold or reject.", field="decision")
    if decision != "accept" and not decision_reason:
        raise RecordingError("Say why it is not accepted.", field="decision_reason")
    with context.open("receiving") as writer:
        step = writer.step(
            StepKind.RECEIVING,
            at,
            ended_at=at,
            place=place,
            partner=supplier,
            document=document,
            detail={
                "carrier": carrier.name if carrier else "",
                "condition": condition,
                "decision": decision,
                "packages": packages,
                "statement": statement,
            },
        )
        lot = _incoming(writer, step, item, amount, place, brix, temperature, supplier_code)
        if decision == "hold":
            _judge.hold(writer, lot, decision_reason)
        elif decision == "reject":
            Lot.objects.filter(pk=lot.pk).update(state=LotState.REJECTED)
        else:
            _settle_delivery(writer, lot)
        return step


def _incoming(
    writer: Writer,
    step: Step,
    item: Item,
    amount: Typed,
    place: Place,
    brix: DensityReading | None,
    temperature: Typed,
    supplier_code: str,
    goods_kind: GoodsKind = GoodsKind.OTHER,
    code: str = "",
    best_before: date | None = None,
) -> Lot:
    quantity, solids = in_ledger_units(item, amount, brix, temperature)
    if item.kind == ItemKind.SYRUP and goods_kind == GoodsKind.OTHER:
        goods_kind = GoodsKind.RECEIVED_SYRUP
    lot = _ledger.make(
        writer,
        step,
        item,
        place=place,
        quantity=quantity,
        solids=solids,
        code=code,
        goods_kind=goods_kind,
        supplier_code=supplier_code,
        typed_value=amount.text,
        typed_unit=amount.unit,
        best_before_date=best_before,
    )
    if brix is not None:
        reading = _judge.note_density(writer, step, lot, brix)
        if item.kind == ItemKind.SYRUP:
            _judge.judge(writer, lot, Stage.BULK_KEPT, [reading])
    return lot


def in_ledger_units(
    item: Item, amount: Typed, brix: DensityReading | None, temperature: Typed = NOT_MEASURED
) -> tuple[int | None, int | None]:
    """Return (quantity, solids) in whole pieces or milligrams."""
    if item.unit == "piece":
        if amount.value is None:
            return None, None
        if amount.value != int(amount.value) or amount.value < 0:
            raise RecordingError("Count whole pieces.", field="amount")
        return int(amount.value), None
    liquid = Liquid(amount, brix.true_brix() if brix else None, temperature)
    return liquid.milligrams(), liquid.solids() if item.is_liquid else None


def _settle_delivery(writer: Writer, lot: Lot) -> None:
    if lot.goods_kind == GoodsKind.RECEIVED_SYRUP:
        _judge.settle(writer, lot)
    else:
        Lot.objects.filter(pk=lot.pk).update(state=LotState.RELEASED)


def record_opening_stock(
    context: Context,
    *,
    at: datetime,
    item: Item,
    amount: Typed,
    place: Place,
    document: str,
    code: str = "",
    brix: DensityReading | None = None,
) -> Step:
    """Record stock on hand when the book begins; it waits for a lead's release."""
    with context.open("opening stock") as writer:
        step = writer.step(StepKind.OPENING_STOCK, at, ended_at=at, place=place, document=document)
        _incoming(
            writer,
            step,
            item,
            amount,
            place,
            brix,
            NOT_MEASURED,
            "",
            goods_kind=GoodsKind.OPENING_STOCK,
            code=code,
        )
        return step


def record_supplier_return(
    context: Context, *, at: datetime, lot: Lot, amount: Typed, document: str = "", reason: str
) -> Step:
    """Send goods back to their supplier; a held or rejected lot may go this way."""
    from ._sources import pieces_or_milligrams

    with context.open("return to supplier") as writer:
        step = writer.step(
            StepKind.SUPPLIER_RETURN,
            at,
            ended_at=at,
            partner=lot.made_by.partner,
            document=document,
            detail={"reason": reason},
        )
        quantity = pieces_or_milligrams(lot, amount)
        _ledger.take(writer, step, lot, quantity, DrawRole.REMOVED)
        return step

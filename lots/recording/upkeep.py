"""Moves, splits, rework, counts and cleaning."""

from datetime import datetime

from lots.models import DrawRole, Item, Lot, LotState, Place, Step, StepKind, Stock
from lots.rules.roles import Action

from . import _judge, _ledger, _sources
from .context import Context
from .errors import NotEnough, RecordingError
from .measures import NOT_MEASURED, Typed

BREAKS = ("emptied", "rinsed", "washed", "washed and verified")


def record_move(
    context: Context, *, at: datetime, lot: Lot, come_from: Place, to: Place, amount: Typed
) -> Step:
    """Move goods between places: only where they stand changes."""
    with context.open("move") as writer:
        writer.own(lot, come_from, to)
        step = writer.step(
            StepKind.MOVE,
            at,
            ended_at=at,
            place=to,
            detail={"amount": amount.text, "from": come_from.name, "lot": lot.code},
        )
        row = Stock.objects.filter(lot=lot, place=come_from).first()
        if row is None:
            raise NotEnough(f"{lot.code} does not stand in {come_from.name}.", field="come_from")
        asked = _sources.pieces_or_milligrams(lot, amount)
        quantity = row.quantity if amount.value is None or asked is None else asked
        if quantity > row.quantity:
            raise NotEnough(
                f"Only {_ledger._words(lot, row.quantity)} of {lot.code} stand there.",
                field="amount",
            )
        _ledger.change_stock(lot, come_from, -quantity)
        _ledger.change_stock(lot, to, quantity)
        step.detail |= {
            "quantity": quantity,
            "lot_uuid": str(lot.uuid),
            "from_uuid": str(come_from.uuid),
        }
        step.save(update_fields=["detail"])
        writer.touch(lot)
        return step


def record_split(
    context: Context, *, at: datetime, lot: Lot, amount: Typed, reason: str, held: bool = False
) -> Step:
    """Split part of a packed lot into a sub-lot that keeps the printed code, held if asked."""
    with context.open("split") as writer:
        writer.own(lot)
        lot = Lot.objects.select_related("item").get(pk=lot.pk)
        row = Stock.objects.filter(lot=lot, quantity__gt=0).select_related("place").first()
        step = writer.step(
            StepKind.SPLIT,
            at,
            ended_at=at,
            place=row.place if row else None,
            detail={"reason": reason},
        )
        quantity = _sources.pieces_or_milligrams(lot, amount)
        drawn = _ledger.take(
            writer, step, lot, quantity, DrawRole.INGREDIENT, place=row.place if row else None
        )
        part = _ledger.make(
            writer,
            step,
            lot.item,
            place=row.place if row else None,
            quantity=quantity,
            solids=drawn.solids,
            printed_code=lot.printed_code,
            piece_mg=lot.piece_mg,
            piece_solids_mg=lot.piece_solids_mg,
            goods_kind=lot.goods_kind,
            best_before_date=lot.best_before_date,
            state=lot.state,
        )
        if held:
            _judge.hold(writer, part, reason)
        return step


def record_rework(
    context: Context, *, at: datetime, lot: Lot, amount: Typed, into: Place, item: Item
) -> Step:
    """Open packed goods back to bulk: pieces × mass and solids a piece; a held lot may go."""
    with context.open("rework") as writer:
        writer.own(lot)
        step = writer.step(StepKind.REWORK, at, ended_at=at, place=into)
        pieces = _sources.pieces_or_milligrams(lot, amount) or 0
        if lot.piece_mg is None:
            raise RecordingError(f"What one piece of {lot.code} weighs is not recorded.")
        _ledger.take(writer, step, lot, pieces, DrawRole.INGREDIENT, rework=True)
        solids = None if lot.piece_solids_mg is None else lot.piece_solids_mg * pieces
        _ledger.make(
            writer,
            step,
            item,
            place=into,
            quantity=lot.piece_mg * pieces,
            solids=solids,
            goods_kind=lot.goods_kind,
        )
        return step


def record_count(
    context: Context, *, at: datetime, lot: Lot, place: Place, counted: Typed, reason: str
) -> Step:
    """Set the book to a count; beyond the gauge tolerance a lead makes it."""
    with context.open("count adjustment") as writer:
        writer.own(lot, place)
        quantity = _sources.pieces_or_milligrams(lot, counted, may_be_none=True)
        if counted.value is None or quantity is None:
            raise RecordingError("Enter what was counted.", field="counted")
        stock = Stock.objects.filter(lot=lot, place=place).first()
        book = stock.quantity if stock else 0
        if abs(quantity - book) > book * writer.facility.gauge_tolerance_percent // 100:
            writer.require(Action.ADJUST_BEYOND_TOLERANCE)
        step = writer.step(
            StepKind.ADJUSTMENT,
            at,
            ended_at=at,
            place=place,
            detail={"book": book, "counted": quantity, "lot": lot.code, "reason": reason},
        )
        _ledger.adjust(writer, step, lot, quantity - book, place)
        return step


def record_cleaning(
    context: Context,
    *,
    at: datetime,
    vessel: Place,
    break_kind: str,
    agent: Lot | None = None,
    amount: Typed = NOT_MEASURED,
    strength: str = "",
    verified_by: str = "",
    note: str = "",
) -> Step:
    """Record a clean break of a vessel by kind; a wash may draw its agent's lot."""
    if break_kind not in BREAKS:
        raise RecordingError("Choose the kind of cleaning.", field="break_kind")
    with context.open("cleaning") as writer:
        step = writer.step(
            StepKind.CLEANING,
            at,
            ended_at=at,
            place=vessel,
            note=note,
            detail={"break": break_kind, "strength": strength, "verified_by": verified_by},
        )
        if agent is not None:
            quantity = _sources.pieces_or_milligrams(agent, amount) if amount.value else 0
            _ledger.take(writer, step, agent, quantity, DrawRole.CLEANING)
        return step


def released(lot: Lot) -> bool:
    """Whether a lot may be sold."""
    return lot.state == LotState.RELEASED

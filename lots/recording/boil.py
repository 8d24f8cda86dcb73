"""The boil: opened, fed, drawn off, put back, and closed with what stays in the pans.

One step is one mixture: every draw-off lot of a boil shares all the boil drew. There is one lot
for each receiving vessel; a draw-off is an event that raises what that lot has made.
"""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import datetime

from django.db.models import F

from lots.models import (
    DrawRole,
    GoodsKind,
    Item,
    Lot,
    LotState,
    Place,
    ReadingKind,
    Step,
    StepEvent,
    StepKind,
    Stock,
)
from lots.rules.verdict import Stage

from . import _judge, _ledger, _residue, _sources, _vessels
from ._door import Writer
from .context import Context
from .errors import NotEnough, RecordingError
from .measures import NOT_MEASURED, DensityReading, Liquid, Observation, Typed, celsius


@dataclass(frozen=True)
class DrawOff:
    """Syrup let out of the pan into a vessel."""

    at: datetime
    into: Place
    amount: Typed
    brix: DensityReading | None = None
    temperature: Typed = NOT_MEASURED


def open_boil(
    context: Context,
    *,
    at: datetime,
    evaporator: Place,
    water_boiling: Typed = NOT_MEASURED,
    since_last_run: str = "",
    people: str = "",
) -> Step:
    """Light the fire: what the pans still hold from the last boil is drawn whole as carry-over."""
    with context.open("boil opened") as writer:
        if Step.objects.filter(place=evaporator, kind=StepKind.BOIL, ended_at=None).exists():
            raise RecordingError(
                f"A boil is already running on {evaporator.name}; close it first.",
                field="evaporator",
            )
        step = writer.step(
            StepKind.BOIL,
            at,
            place=evaporator,
            people=people,
            detail={"since_last_run": since_last_run},
        )
        if water_boiling.value is not None:
            degrees = celsius(water_boiling, name="water_boiling")
            _judge.note(
                writer,
                step,
                None,
                [
                    Observation(
                        ReadingKind.WATER_BOILING,
                        water_boiling.text,
                        water_boiling.unit,
                        f"{degrees:.4f}",
                        "°C",
                    )
                ],
            )
        held = _vessels.contents(evaporator, at)
        _residue.of_vessel(writer, step, evaporator)
        for row in held:
            quantity = None if row.lot.made is None else row.quantity
            _ledger.take(writer, step, row.lot, quantity, DrawRole.CARRY_OVER, place=evaporator)
            Stock.objects.filter(pk=row.pk).delete()
        return step


def feed_boil(
    context: Context, *, boil: Step, at: datetime, sources: Sequence[_sources.Source]
) -> Step:
    """Feed sap or concentrate into a running boil, or add defoamer."""
    with context.open("boil feed") as writer:
        boil = _running(writer, boil)
        taken = _sources.draw(writer, boil, sources, at)
        _event(writer, boil, "feed", at, {"milligrams": taken.quantity or 0})
        return boil


def draw_off(context: Context, *, boil: Step, item: Item, draw: DrawOff) -> Lot:
    """Record syrup let out of the pan: raises the lot of the vessel that receives it."""
    with context.open("draw-off") as writer:
        boil = _running(writer, boil)
        return _draw_off(writer, boil, item, draw)


def put_back(context: Context, *, boil: Step, lot: Lot, at: datetime, amount: Typed) -> StepEvent:
    """Put syrup of this boil that nothing else has drawn back into the pan: an event, not a lot."""
    with context.open("put-back") as writer:
        boil = _running(writer, boil)
        lot = Lot.objects.get(pk=lot.pk)
        if lot.made_by_id != boil.pk:
            raise RecordingError("Only this boil's own syrup goes back as an event.", field="lot")
        if lot.draws.filter(ended_at=None).exists():
            raise RecordingError(
                f"{lot.code} was already drawn by another step: close this boil and open the next.",
                field="lot",
            )
        mass, solids = _share_put_back(writer, lot, amount)
        _raise_made(writer, lot, -mass, -solids)
        return _event(
            writer,
            boil,
            "put-back",
            at,
            {"amount": amount.text, "unit": amount.unit, "lot": lot.code},
        )


def close_boil(
    context: Context,
    *,
    boil: Step,
    at: datetime,
    contents: Item,
    stays: Typed = NOT_MEASURED,
    brix: DensityReading | None = None,
    emptied: bool = False,
) -> Step:
    """Let the fire out: what stays in the pans becomes a lot that the next boil carries over."""
    with context.open("boil closed") as writer:
        boil = _running(writer, boil)
        return _close(writer, boil, at, contents, stays, brix, emptied)


def record_boil(
    context: Context,
    *,
    at: datetime,
    ended_at: datetime,
    evaporator: Place,
    sources: Sequence[_sources.Source],
    draw_offs: Sequence[DrawOff],
    syrup: Item,
    contents: Item,
    stays: Typed = NOT_MEASURED,
    stays_brix: DensityReading | None = None,
    emptied: bool = False,
    water_boiling: Typed = NOT_MEASURED,
    since_last_run: str = "",
    people: str = "",
) -> Step:
    """Record a whole boil afterwards: all of it in one transaction, or none."""
    from django.db import transaction

    with transaction.atomic():
        boil = open_boil(
            context,
            at=at,
            evaporator=evaporator,
            water_boiling=water_boiling,
            since_last_run=since_last_run,
            people=people,
        )
        rest = replace(context, client=None)
        feed_boil(rest, boil=boil, at=at, sources=sources)
        for draw in draw_offs:
            draw_off(rest, boil=boil, item=syrup, draw=draw)
        return close_boil(
            rest,
            boil=boil,
            at=ended_at,
            contents=contents,
            stays=stays,
            brix=stays_brix,
            emptied=emptied,
        )


def _share_put_back(writer: Writer, lot: Lot, amount: Typed) -> tuple[int, int]:
    """Return the mass and solids that go back; a gauge difference above the book takes all."""
    book, solids = int(lot.remaining or 0), int(lot.solids_remaining or 0)
    brix = 100 * solids / book if book else None
    mass = Liquid(amount, brix).milligrams()
    if mass is None:
        return book, solids
    if mass > book * (100 + writer.facility.gauge_tolerance_percent) // 100:
        raise NotEnough(f"{lot.code} holds less than that by the book.", field="amount")
    mass = min(mass, book)
    return mass, solids * mass // max(book, 1)


def _running(writer: Writer, boil: Step) -> Step:
    boil = Step.objects.get(pk=boil.pk, facility=writer.facility)
    if boil.ended_at is not None or boil.voided_at is not None:
        raise RecordingError("This boil is closed; open a new one.")
    return boil


def _event(writer: Writer, step: Step, kind: str, at: datetime, detail: dict) -> StepEvent:
    writer.check_time(at)
    if at < step.started_at:
        raise RecordingError("That is before the boil began.", field="at")
    if writer.answer is None:
        writer.answer = step
    writer.label = f"{kind} in {step.in_words(writer.facility.zone)}"
    return writer.touch(
        StepEvent.objects.create(
            step=step,
            kind=kind,
            at=at,
            detail=detail,
            recorded_at=writer.now,
            recorded_by=writer.by,
        )
    )


def _draw_off(writer: Writer, boil: Step, item: Item, draw: DrawOff) -> Lot:
    liquid = Liquid(draw.amount, draw.brix.true_brix() if draw.brix else None, draw.temperature)
    mass, solids = liquid.milligrams(), liquid.solids()
    lot = Lot.objects.filter(made_by=boil, item=item, stock__place=draw.into).first()
    if lot is None:
        _residue.of_vessel(writer, boil, draw.into)
        lot = _ledger.make(
            writer,
            boil,
            item,
            place=draw.into,
            quantity=mass,
            solids=solids,
            at=draw.at,
            goods_kind=GoodsKind.OWN_SYRUP,
            state=LotState.OPEN,
            typed_value=draw.amount.text,
            typed_unit=draw.amount.unit,
        )
    elif mass is not None and lot.made is not None:
        _raise_made(writer, lot, mass, solids or 0)
    _event(
        writer,
        boil,
        "draw-off",
        draw.at,
        {
            "amount": draw.amount.text,
            "into": draw.into.name,
            "lot": lot.code,
            "temperature": draw.temperature.text,
            "temperature_unit": draw.temperature.unit,
            "unit": draw.amount.unit,
        },
    )
    if draw.brix is not None:
        reading = _judge.note_density(writer, boil, lot, draw.brix)
        _judge.judge(writer, lot, Stage.IN_PROCESS, [reading])
    return lot


def _raise_made(writer: Writer, lot: Lot, mass: int, solids: int) -> None:
    Lot.objects.filter(pk=lot.pk).update(made=F("made") + mass)
    if lot.solids_made is not None:
        Lot.objects.filter(pk=lot.pk).update(solids_made=F("solids_made") + solids)
    row = Stock.objects.filter(lot=lot).first()
    if row is not None:
        Stock.objects.filter(pk=row.pk).update(quantity=F("quantity") + mass)
    writer.touch(lot)


def _close(
    writer: Writer,
    boil: Step,
    at: datetime,
    contents: Item,
    stays: Typed,
    brix: DensityReading | None,
    emptied: bool,
) -> Step:
    _event(writer, boil, "close", at, {"stays": stays.text, "unit": stays.unit})
    Step.objects.filter(pk=boil.pk).update(ended_at=at)
    boil.refresh_from_db()
    writer.touch(boil)
    if not emptied:
        liquid = Liquid(stays, brix.true_brix() if brix else None)
        _ledger.make(
            writer,
            boil,
            contents,
            place=boil.place,
            quantity=liquid.milligrams(),
            solids=liquid.solids(),
            at=at,
            estimated=True,
            typed_value=stays.text,
            typed_unit=stays.unit,
        )
    _judge.judge_loss(writer, boil)
    for lot in boil.made_lots.filter(state=LotState.OPEN):
        Lot.objects.filter(pk=lot.pk).update(state=LotState.WAITING)
        writer.touch(lot)
    return boil

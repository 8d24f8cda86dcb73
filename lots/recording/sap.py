"""Sap in and sap concentrated: collection rounds and the RO."""

from collections.abc import Sequence
from datetime import datetime

from lots.models import Item, ItemKind, Place, Step, StepKind

from . import _judge, _ledger, _residue, _sources
from ._door import Writer
from .context import Context
from .errors import RecordingError
from .measures import NOT_MEASURED, DensityReading, Liquid, Typed, celsius


def record_collection(
    context: Context,
    *,
    at: datetime,
    woods: Place,
    tank: Place,
    item: Item,
    amount: Typed = NOT_MEASURED,
    not_measured_reason: str = "",
    brix: DensityReading | None = None,
    temperature: Typed = NOT_MEASURED,
    ended_at: datetime | None = None,
    note: str = "",
    people: str = "",
) -> Step:
    """Record one round of sap: from a woods section into a tank, or its amount not measured."""
    if amount.value is None and not not_measured_reason:
        raise RecordingError(
            "Enter how much came in, or say why it was not measured.", field="amount"
        )
    celsius(temperature)
    with context.open("sap collection") as writer:
        step = writer.step(
            StepKind.COLLECTION,
            at,
            ended_at=ended_at or at,
            place=woods,
            note=note,
            people=people,
            detail={
                "not_measured": not_measured_reason,
                "temperature": temperature.text,
                "temperature_unit": temperature.unit,
            },
        )
        _residue.of_vessel(writer, step, tank)
        liquid = Liquid(amount, brix.true_brix() if brix else None, temperature)
        lot = _ledger.make(
            writer,
            step,
            item,
            place=tank,
            quantity=liquid.milligrams(),
            solids=liquid.solids(),
            typed_value=amount.text,
            typed_unit=amount.unit,
        )
        if brix is not None:
            _judge.note_density(writer, step, lot, brix)
        return step


def record_concentration(
    context: Context,
    *,
    at: datetime,
    ended_at: datetime,
    machine: Place,
    sources: Sequence[_sources.Source],
    into: Place,
    item: Item,
    amount: Typed = NOT_MEASURED,
    brix: DensityReading | None = None,
    permeate: Typed = NOT_MEASURED,
    pressure: Typed = NOT_MEASURED,
    note: str = "",
) -> Step:
    """Record an RO run: the sap it drew and the concentrate it left in a tank.

    With no amount measured the mass follows from the solids, which the membrane keeps.
    """
    if item.kind != ItemKind.CONCENTRATE:
        raise RecordingError("An RO run makes concentrate.", field="item")
    detail = {
        "permeate": permeate.text,
        "permeate_unit": permeate.unit,
        "pressure": pressure.text,
        "pressure_unit": pressure.unit,
    }
    with context.open("concentration") as writer:
        step = writer.step(
            StepKind.CONCENTRATION, at, ended_at=ended_at, place=machine, note=note, detail=detail
        )
        taken = _sources.draw(writer, step, sources)
        _residue.of_vessel(writer, step, into)
        _residue.of_machine(writer, step, machine)
        _concentrate(writer, step, item, into, taken, amount, brix)
        _judge.judge_loss(writer, step)
        return step


def _concentrate(
    writer: Writer,
    step: Step,
    item: Item,
    into: Place,
    taken: _ledger.Taken,
    amount: Typed,
    brix: DensityReading | None,
) -> None:
    """Make the concentrate's lot: measured, or its mass from the solids that came in."""
    true = brix.true_brix() if brix else None
    liquid = Liquid(amount, true)
    quantity, solids = liquid.milligrams(), liquid.solids()
    estimated = quantity is None and bool(true) and taken.solids is not None
    if estimated and true and taken.solids is not None:
        quantity, solids = round(taken.solids * 100 / true), taken.solids
    lot = _ledger.make(
        writer,
        step,
        item,
        place=into,
        quantity=quantity,
        solids=solids if solids is not None else taken.solids,
        at=step.ended_at,
        estimated=estimated,
        derived=estimated,
        typed_value=amount.text,
        typed_unit=amount.unit,
    )
    if brix is not None:
        _judge.note_density(writer, step, lot, brix)

"""Filling retail containers: the run's code, its sources, stock used, temperatures and count."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date, datetime
from decimal import Decimal
from uuid import uuid4

from lots.models import DrawRole, Item, Lot, Place, PrintedCode, Step, StepKind
from lots.quantities import rounding
from lots.rules.verdict import Stage

from . import _codes, _judge, _ledger, _sources
from ._door import Writer
from .context import Context
from .errors import RecordingError
from .measures import NOT_MEASURED, DensityReading, Typed
from .syrup import _goods_kind, colour_reading, fill_temperatures


@dataclass(frozen=True)
class Packaging:
    """Containers, closures or labels used: nothing typed is the count of containers filled."""

    lot: Lot
    amount: Typed = NOT_MEASURED


@dataclass(frozen=True)
class Run:
    """What a container-fill form says of one product's run."""

    product: Item
    made: int
    into: Place
    rejected: int = 0
    printed_code: str = ""
    best_before: date | None = None
    fill_temperatures: Sequence[Typed] = ()
    brix: DensityReading | None = None
    transmittance: Typed = NOT_MEASURED
    packaging: Sequence[Packaging] = ()
    net_sample: str = ""


def open_container_fill(
    context: Context,
    *,
    at: datetime,
    product: Item,
    printed_code: str = "",
    since_last_run: str = "",
    people: str = "",
) -> tuple[Step, PrintedCode]:
    """Open a run and reserve its code, so that the coder can be set before the first jar."""
    with context.open("container fill opened") as writer:
        code = _codes.reserve_code(writer, product, at, printed_code)
        step = writer.step(
            StepKind.CONTAINER_FILL,
            at,
            people=people,
            detail={"printed_code": str(code.uuid), "since_last_run": since_last_run},
        )
        return step, code


def close_container_fill(
    context: Context,
    *,
    step: Step,
    ended_at: datetime,
    sources: Sequence[_sources.Source],
    run: Run,
) -> Lot:
    """Close a running fill: what it drew, used and made."""
    with context.open("container fill") as writer:
        step = Step.objects.get(pk=step.pk, facility=writer.facility)
        if step.ended_at is not None:
            raise RecordingError("This run is closed.")
        writer.check_time(step.started_at, ended_at)
        said = {"net_sample": run.net_sample, "rejected": run.rejected}
        Step.objects.filter(pk=step.pk).update(ended_at=ended_at, detail=step.detail | said)
        step.refresh_from_db()
        writer.answer = writer.touch(step)
        writer.label = step.in_words(writer.facility.zone)
        code = PrintedCode.objects.get(uuid=step.detail["printed_code"])
        return _fill(writer, step, sources, run, code)


def record_container_fill(
    context: Context,
    *,
    at: datetime,
    sources: Sequence[_sources.Source],
    run: Run,
    ended_at: datetime | None = None,
    note: str = "",
    people: str = "",
) -> Step:
    """Record a whole run of one product in one go."""
    (step,) = record_container_fills(
        context, at=at, runs=[(sources, run)], ended_at=ended_at, note=note, people=people
    )
    return step


def record_container_fills(
    context: Context,
    *,
    at: datetime,
    runs: Sequence[tuple[Sequence[_sources.Source], Run]],
    ended_at: datetime | None = None,
    note: str = "",
    people: str = "",
) -> list[Step]:
    """Record the products of one run, each its own step with its own sources: all, or none.

    Several steps share the UUID of their entry group. Sources are drawn in the order of the runs.
    """
    if not runs:
        raise RecordingError("Enter at least one product.", field="product")
    group = uuid4() if len(runs) > 1 else None
    with context.open("container fill") as writer:
        steps = []
        for sources, run in runs:
            step = writer.step(
                StepKind.CONTAINER_FILL,
                at,
                ended_at=ended_at or at,
                group=group,
                place=run.into,
                note=note,
                people=people,
                detail={"net_sample": run.net_sample, "rejected": run.rejected},
            )
            code = _codes.reserve_code(writer, run.product, at, run.printed_code)
            _fill(writer, step, sources, run, code)
            steps.append(step)
        return steps


def _fill(
    writer: Writer, step: Step, sources: Sequence[_sources.Source], run: Run, code: PrintedCode
) -> Lot:
    if run.made < 0 or run.rejected < 0:
        raise RecordingError("Count what was filled; it cannot be below zero.", field="made")
    taken = _sources.draw(writer, step, sources)
    true = run.brix.true_brix() if run.brix else _sources.brix_of(taken)
    piece_mg, piece_solids = piece_content(run.product, true)
    for used in run.packaging:
        count = run.made + run.rejected if used.amount.value is None else used.amount.value
        quantity = _sources.pieces_or_milligrams(used.lot, Typed(Decimal(count)))
        _ledger.take(writer, step, used.lot, quantity, DrawRole.PACKAGING)
    lot = _ledger.make(
        writer,
        step,
        run.product,
        place=run.into,
        quantity=run.made,
        printed_code=code,
        piece_mg=piece_mg,
        piece_solids_mg=piece_solids,
        goods_kind=_goods_kind(step),
        best_before_date=run.best_before,
        typed_value=str(run.made),
        typed_unit="pieces",
    )
    readings = [_judge.note_density(writer, step, lot, run.brix)] if run.brix else []
    readings += _judge.note(writer, step, lot, fill_temperatures(run.fill_temperatures))
    readings += _judge.note(writer, step, lot, colour_reading(run.transmittance))
    _judge.judge(writer, lot, Stage.PACKED, readings)
    _judge.judge_container_size(writer, lot, step)
    _judge.settle(writer, lot)
    return lot


def piece_content(product: Item, brix: float | None) -> tuple[int | None, int | None]:
    """Return milligrams and solids of one container at 20 °C, from its declared size."""
    if not product.size_value:
        return None, None
    mass = rounding.liquid_milligrams(
        Decimal(product.size_value), product.size_unit, brix if brix is not None else 66.9
    )
    if brix is None:
        return mass, None
    return mass, rounding.solids_milligrams(mass, Decimal(f"{brix:.4f}"))

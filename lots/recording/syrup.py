"""Syrup between the pan and the jar: filtered, blended, transferred, re-heated, drummed, graded."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime

from lots.models import GoodsKind, Item, Lot, LotState, Place, ReadingKind, Step, StepKind
from lots.physics import colour
from lots.rules.verdict import Stage

from . import _judge, _ledger, _residue, _sources
from ._door import Writer
from .context import Context
from .errors import RecordingError
from .measures import NOT_MEASURED, DensityReading, Liquid, Observation, Typed, celsius

MIXTURES = {
    StepKind.FILTRATION: "filtration",
    StepKind.BLEND: "blend",
    StepKind.TRANSFER: "transfer",
    StepKind.REHEAT: "re-heat",
}


def record_mixture(
    context: Context,
    *,
    kind: StepKind,
    at: datetime,
    sources: Sequence[_sources.Source],
    into: Place,
    item: Item,
    ended_at: datetime | None = None,
    machine: Place | None = None,
    amount: Typed = NOT_MEASURED,
    brix: DensityReading | None = None,
    seen: Sequence[Observation] = (),
    detail: dict[str, str] | None = None,
    note: str = "",
) -> Step:
    """Record a filtration, blend, transfer or re-heat: several sources, one lot in one vessel.

    Without a measured amount the new lot is what was drawn.
    """
    if kind not in MIXTURES:
        raise RecordingError("That is not a step that mixes syrup.")
    with context.open(MIXTURES[kind]) as writer:
        step = writer.step(
            kind, at, ended_at=ended_at or at, place=machine or into, note=note, detail=detail or {}
        )
        taken = _sources.draw(writer, step, sources)
        _residue.of_vessel(writer, step, into)
        if machine is not None:
            _residue.of_machine(writer, step, machine)
        lot = _make_mixture(writer, step, item, into, taken, amount, brix)
        _judge.note(writer, step, lot, seen)
        _judge.judge_loss(writer, step)
        return step


def _make_mixture(
    writer: Writer,
    step: Step,
    item: Item,
    into: Place,
    taken: _ledger.Taken,
    amount: Typed,
    brix: DensityReading | None,
) -> Lot:
    """Make the mixture's lot: as measured, or what was drawn."""
    measured = Liquid(amount, brix.true_brix() if brix else _sources.brix_of(taken))
    mass = measured.milligrams()
    lot = _ledger.make(
        writer,
        step,
        item,
        place=into,
        quantity=taken.quantity if mass is None else mass,
        solids=taken.solids if mass is None else measured.solids(),
        goods_kind=_goods_kind(step),
        derived=mass is None and taken.quantity is not None,
        typed_value=amount.text,
        typed_unit=amount.unit,
    )
    if brix is not None:
        reading = _judge.note_density(writer, step, lot, brix)
        _judge.judge(writer, lot, Stage.IN_PROCESS, [reading])
    return lot


def _goods_kind(step: Step) -> GoodsKind:
    """Return own syrup unless something received went in; opening stock alone stays that."""
    kinds = set(
        step.draws.filter(ended_at=None, lot__item__kind__in=["syrup"]).values_list(
            "lot__goods_kind", flat=True
        )
    )
    for kind in (GoodsKind.RECEIVED_SYRUP, GoodsKind.OPENING_STOCK):
        if kind in kinds:
            return kind
    return GoodsKind.OWN_SYRUP


@dataclass(frozen=True)
class Drum:
    """One drum filled: weighed or measured, with its temperature and seal."""

    vessel: Place
    amount: Typed
    fill_temperature: Typed
    seal: str = ""


def record_drum_fill(
    context: Context,
    *,
    at: datetime,
    sources: Sequence[_sources.Source],
    drums: Sequence[Drum],
    item: Item,
    brix: DensityReading | None = None,
    transmittance: Typed = NOT_MEASURED,
    note: str = "",
) -> Step:
    """Record several drums of one filling: one lot a drum, each judged as bulk kept."""
    if not drums:
        raise RecordingError("Enter at least one drum.", field="drums")
    with context.open("drum fill") as writer:
        step = writer.step(
            StepKind.DRUM_FILL,
            at,
            ended_at=at,
            note=note,
            detail={"seals": {drum.vessel.name: drum.seal for drum in drums}},
        )
        taken = _sources.draw(writer, step, sources)
        true = brix.true_brix() if brix else _sources.brix_of(taken)
        for drum in drums:
            _fill_drum(writer, step, item, drum, true, brix, transmittance)
        return step


def _fill_drum(
    writer: Writer,
    step: Step,
    item: Item,
    drum: Drum,
    true: float | None,
    brix: DensityReading | None,
    transmittance: Typed,
) -> Lot:
    _residue.of_vessel(writer, step, drum.vessel)
    liquid = Liquid(drum.amount, true)
    lot = _ledger.make(
        writer,
        step,
        item,
        place=drum.vessel,
        quantity=liquid.milligrams(),
        solids=liquid.solids(),
        goods_kind=_goods_kind(step),
        typed_value=drum.amount.text,
        typed_unit=drum.amount.unit,
    )
    readings = [_judge.note_density(writer, step, lot, brix)] if brix else []
    readings += _judge.note(writer, step, lot, fill_temperatures([drum.fill_temperature]))
    readings += _judge.note(writer, step, lot, colour_reading(transmittance))
    _judge.judge(writer, lot, Stage.BULK_KEPT, readings)
    _judge.settle(writer, lot)
    return lot


def fill_temperatures(typed: Sequence[Typed]) -> list[Observation]:
    """Return fill-temperature readings in °C beside what was typed."""
    seen = []
    for one in typed:
        degrees = celsius(one, name="fill_temperature")
        if degrees is not None:
            if degrees > 110.0:
                raise RecordingError(
                    f"{one.text} {one.unit} is hotter than syrup boils; check the number.",
                    field="fill_temperature",
                )
            seen.append(
                Observation(
                    ReadingKind.FILL_TEMPERATURE, one.text, one.unit, f"{degrees:.4f}", "°C"
                )
            )
    return seen


def colour_reading(typed: Typed) -> list[Observation]:
    """Return a colour reading with its class; %Tc at 560 nm against glycerol, 0 to 100."""
    if typed.value is None:
        return []
    try:
        found = colour.grade_class(float(typed.value))
    except ValueError as error:
        raise RecordingError(str(error), field="transmittance") from error
    return [Observation(ReadingKind.TRANSMITTANCE, typed.text, "%Tc", found, "class")]


def record_grade_reading(
    context: Context,
    *,
    at: datetime,
    lot: Lot,
    transmittance: Typed = NOT_MEASURED,
    brix: DensityReading | None = None,
    flavour: str = "",
    clarity: str = "",
    defects: Sequence[tuple[str, str]] = (),
    grader: str = "",
) -> Step:
    """Record a grading of one lot: colour, density, flavour, clarity, defects with intensity."""
    with context.open("grade reading") as writer:
        writer.own(lot)
        step = writer.step(
            StepKind.GRADE_READING,
            at,
            ended_at=at,
            people=grader,
            detail={"defects": [list(defect) for defect in defects]},
        )
        seen = colour_reading(transmittance)
        if flavour:
            seen.append(Observation(ReadingKind.FLAVOUR, flavour))
        if clarity:
            seen.append(Observation(ReadingKind.CLARITY, clarity))
        readings = _judge.note(writer, step, lot, seen)
        if brix is not None:
            readings.append(_judge.note_density(writer, step, lot, brix))
        stage = Stage.PACKED if lot.item.kind == "packed" else Stage.BULK_KEPT
        _judge.judge(writer, lot, stage, readings)
        if defects or clarity:
            _judge.judge_defects(writer, lot, step, stage, defects)
        if lot.state == LotState.WAITING:
            _judge.settle(writer, lot)
        return step

"""Dividing later draws anew when an act is typed late.

Contents are replayed by the time of the act, not of typing: the later takes of a vessel are taken
back in reverse, the late act is recorded, and the same questions are asked again in order. Draws
are ended and succeeded, never changed; a lot whose quantity follows from its draws is made anew,
and the vessels that it went to follow.
"""

from datetime import datetime

from django.db.models import F, Q

from lots.models import (
    Adjustment,
    Draw,
    DrawRole,
    Lot,
    Place,
    ReadingKind,
    Step,
    StepKind,
    VesselTake,
)

from . import _ledger, _vessels
from ._door import Writer
from .errors import RecordingError, WouldRedivide
from .measures import Typed


def take(
    writer: Writer,
    step: Step,
    vessel: Place,
    amount: Typed,
    *,
    at: datetime,
    emptied: bool = False,
    accept_difference: bool = False,
) -> _ledger.Taken:
    """Draw every lot of a vessel in proportion; no amount takes all.

    ``emptied`` takes each lot to exactly zero and books the difference to what was measured.
    Raises NotEnough above the book unless the difference lies within the gauge tolerance and was
    accepted, and WouldRedivide where later records drew from the vessel already.
    """
    writer.own(vessel)
    later = _vessels.later_takes(vessel, at).exclude(step=step)
    if not writer.redividing and later.exists():
        raise WouldRedivide(_vessels.later_words(later, writer.facility.zone))
    if writer.redividing:
        rewind(writer, vessel, at, but=step)
    asked = VesselTake.objects.create(
        step=step,
        vessel=vessel,
        at=at,
        typed_value=amount.text,
        typed_unit=amount.unit if amount.text else "",
        emptied=emptied,
        accept_difference=accept_difference or writer.accepts_differences,
    )
    return _vessels.answer(writer, writer.touch(asked))


def rewind(writer: Writer, vessel: Place, at: datetime, *, but: Step | None = None) -> None:
    """Take back every later take of a vessel, and of the vessels that depend on it."""
    found: dict[int, VesselTake] = {}
    waiting: list[tuple[Place, datetime]] = [(vessel, at)]
    while waiting:
        place, since = waiting.pop()
        for take in _vessels.later_takes(place, since):
            if take.pk in found or take.pk in writer.rewound or take.step == but:
                continue
            found[take.pk] = take
            for lot in take.step.made_lots.filter(derived=True).select_related("put_in"):
                if lot.put_in is not None and lot.put_in.is_vessel:
                    waiting.append((lot.put_in, lot.made_at))
    for take in sorted(found.values(), key=lambda take: (take.at, take.pk), reverse=True):
        _take_back(writer, take)
        writer.rewound[take.pk] = take


def _take_back(writer: Writer, take: VesselTake) -> None:
    step, vessel = take.step, take.vessel
    for lot in step.made_lots.filter(derived=True, made__gt=0).select_related("put_in"):
        _unmake(writer, lot)
    live = Draw.objects.filter(step=step, ended_at=None)
    late = Q(asked=None, from_place=vessel, role=DrawRole.CARRY_OVER, quantity=0)
    for draw in live.filter(Q(asked=take) | late).select_related("lot", "from_place"):
        _ledger.give_back(writer, draw)
    for booked in Adjustment.objects.filter(step=step, place=vessel, ended_at=None).select_related(
        "lot", "place"
    ):
        _ledger.take_back_adjustment(writer, booked)


def _unmake(writer: Writer, lot: Lot) -> None:
    if lot.draws.filter(ended_at=None, quantity__gt=0).exists() or lot.put_in is None:
        raise RecordingError(
            f"{lot.code} was drawn by its own code since; void that record first, then enter this."
        )
    _ledger.change_stock(lot, lot.put_in, -int(lot.made or 0))
    Lot.objects.filter(pk=lot.pk).update(made=0, solids_made=F("solids_made") * 0)
    writer.touch(lot)


def forward(writer: Writer) -> None:
    """Ask everything that was taken back again, in the order of the acts."""
    takes = sorted(writer.rewound.values(), key=lambda take: (take.at, take.pk))
    for number, take in enumerate(takes):
        _vessels.answer(writer, take, again=True)
        if all(later.step_id != take.step_id for later in takes[number + 1 :]):
            _make_again(writer, take.step)


def _make_again(writer: Writer, step: Step) -> None:
    draws = list(step.draws.filter(ended_at=None, role__in=_ledger.SHARES))
    mass = sum(draw.quantity or 0 for draw in draws)
    solids = [draw.solids for draw in draws]
    for lot in step.made_lots.filter(derived=True).select_related("put_in"):
        known = None if None in solids else sum(one or 0 for one in solids)
        made = mass
        reading = lot.readings.filter(kind=ReadingKind.BRIX).order_by("pk").first()
        if step.kind == StepKind.CONCENTRATION and reading and known is not None:
            made = round(known * 100 / float(reading.corrected))  # the membrane keeps the solids
        Lot.objects.filter(pk=lot.pk).update(made=made, solids_made=known)
        if lot.put_in is not None:
            _ledger.change_stock(lot, lot.put_in, made)
        writer.touch(lot)

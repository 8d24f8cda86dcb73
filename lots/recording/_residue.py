"""What an emptied or rinsed vessel hands on: its last contents, at quantity nought.

Composition leaves residue out; chemical, allergen and microbial questions follow it, until a
washed break.
"""

from datetime import datetime

from lots.models import Draw, DrawRole, Lot, Place, Step, StepKind
from lots.tracing.cone import reaches

from . import _ledger, _vessels
from ._door import Writer

WASHED = ("washed", "washed and verified")


def _washed_between(place: Place, after: datetime, before: datetime) -> bool:
    return Step.objects.filter(
        kind=StepKind.CLEANING,
        place=place,
        detail__break__in=WASHED,
        started_at__gte=after,
        started_at__lte=before,
        voided_at=None,
    ).exists()


def of_vessel(writer: Writer, step: Step, vessel: Place) -> None:
    """Draw what an empty vessel last held, unless it was washed since."""
    writer.own(vessel)
    if any(row.quantity or row.lot.made is None for row in _vessels.contents(vessel)):
        return
    last = (
        Draw.objects.filter(from_place=vessel, ended_at=None, step__started_at__lte=step.started_at)
        .exclude(step=step)
        .exclude(role=DrawRole.RESIDUE)
        .order_by("-step__started_at", "-pk")
        .select_related("step")
        .first()
    )
    if last is None or _washed_between(vessel, last.step.started_at, step.started_at):
        return
    held = Lot.objects.filter(
        draws__step=last.step, draws__from_place=vessel, draws__ended_at=None
    ).distinct()
    _hand_on(writer, step, list(held), vessel)


def of_machine(writer: Writer, step: Step, machine: Place) -> None:
    """Draw what the last run of a press or RO left on it, unless it was washed since."""
    writer.own(machine)
    last = (
        Step.objects.filter(
            place=machine, kind=step.kind, started_at__lte=step.started_at, voided_at=None
        )
        .exclude(pk=step.pk)
        .order_by("-started_at", "-pk")
        .first()
    )
    if last is None or _washed_between(machine, last.started_at, step.started_at):
        return
    _hand_on(writer, step, list(last.made_lots.all()), machine)


def _hand_on(writer: Writer, step: Step, lots: list[Lot], place: Place) -> None:
    drawn = set(step.draws.filter(ended_at=None).values_list("lot", flat=True))
    for lot in lots:
        if lot.pk not in drawn and not reaches(step.pk, lot.made_by_id):
            _ledger._draw(writer, step, lot, 0, 0, DrawRole.RESIDUE, place)

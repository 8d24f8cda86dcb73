"""Holds and the signed decisions that end them; voids and what depends on them."""

import hashlib
from datetime import datetime, timedelta

from django.db.models import F
from django.utils import timezone

from lots.models import (
    CorrectiveAction,
    Draw,
    DrawRole,
    Hold,
    Lot,
    LotState,
    Step,
    Stock,
    UnpostedEntry,
)
from lots.rules.roles import Action
from lots.tracing.cone import forward

from . import _judge
from ._door import Writer
from .context import Context
from .errors import RecordingError, StillNeeded

UNDO_WINDOW = timedelta(minutes=2)


def place_hold(
    context: Context,
    *,
    lot: Lot,
    reason: str,
    descendants: bool = True,
    official: bool = False,
) -> list[Hold]:
    """Hold a lot and, unless declined, everything made from it that is still in stock."""
    if not reason.strip():
        raise RecordingError("Say why the lot is held.", field="reason")
    with context.open("hold", Action.HOLD) as writer:
        writer.label = f"Hold {lot.code}"
        held = [_judge.hold(writer, lot, reason, official=official)]
        if descendants:
            for other in descendants_in_stock(lot):
                held.append(_judge.hold(writer, other, f"Made from {lot.code}: {reason}"))
        return held


def descendants_in_stock(lot: Lot) -> list[Lot]:
    """Return the lots made from a lot of which something remains."""
    cone = forward(lot.pk, "composition")
    found = Lot.objects.filter(made_by__in=cone.steps, remaining__gt=0).exclude(pk=lot.pk)
    return list(found.order_by("made_at", "pk"))


def shown_hash(lot: Lot) -> str:
    """Return the hash of what a decision screen shows of a lot: readings, checks, holds."""
    lines = [lot.code, lot.state, str(lot.remaining)]
    lines += [f"{check.rule}|{check.outcome}|{check.sentence}" for check in lot.checks.all()]
    lines += [f"{hold.uuid}|{hold.reason}|{hold.decision}" for hold in lot.holds.all()]
    return hashlib.sha256("\n".join(lines).encode()).hexdigest()


def complete_action(
    context: Context,
    *,
    action: CorrectiveAction,
    cause: str,
    correction: str,
    prevention: str,
    evaluation: str,
) -> CorrectiveAction:
    """Complete a corrective action: all four parts are needed."""
    if not all(part.strip() for part in (cause, correction, prevention, evaluation)):
        raise RecordingError("Fill in cause, correction, prevention and evaluation of the food.")
    with context.open("corrective action", Action.RELEASE) as writer:
        CorrectiveAction.objects.filter(pk=action.pk).update(
            cause=cause,
            correction=correction,
            prevention=prevention,
            evaluation=evaluation,
            completed_at=writer.now,
            completed_by=writer.by,
        )
        writer.label = f"Corrective action {action.hold.lot.code}"
        return writer.touch(action)


def decide_hold(context: Context, *, hold: Hold, decision: str, reason: str, shown: str) -> Lot:
    """End a hold by a signed decision: release or reject; ``shown`` is the hash of the screen."""
    if decision not in ("release", "reject"):
        raise RecordingError("Choose release or reject.", field="decision")
    if not reason.strip():
        raise RecordingError("Give the reason for the decision.", field="reason")
    with context.open(f"hold {decision}", Action.RELEASE) as writer:
        hold = Hold.objects.select_related("lot").get(pk=hold.pk)
        _refuse_decision(hold, decision, shown)
        writer.label = f"{decision.capitalize()} {hold.lot.code}"
        Hold.objects.filter(pk=hold.pk).update(
            ended_at=writer.now,
            ended_by=writer.by,
            decision=decision,
            decision_reason=reason[:400],
            shown_hash=shown,
        )
        writer.touch(hold)
        lot = hold.lot
        if decision == "reject":
            Lot.objects.filter(pk=lot.pk).update(state=LotState.REJECTED)
        elif not lot.holds.filter(ended_at=None).exists():
            Lot.objects.filter(pk=lot.pk).update(state=LotState.RELEASED)
        return writer.touch(Lot.objects.get(pk=lot.pk))


def _refuse_decision(hold: Hold, decision: str, shown: str) -> None:
    if hold.ended_at is not None:
        raise RecordingError("This hold was decided already.")
    if hold.official and decision == "release":
        raise RecordingError("An official detention ends only by a recorded official release.")
    if shown != shown_hash(hold.lot):
        raise RecordingError("The record changed since this page was shown; read it again.")
    if decision == "release" and hold.actions.filter(completed_at=None).exists():
        raise RecordingError("Complete the corrective action first.")


def release_lot(context: Context, *, lot: Lot, reason: str, shown: str) -> Lot:
    """Release a waiting lot by a lead's signed decision."""
    with context.open("release", Action.RELEASE) as writer:
        lot = Lot.objects.get(pk=lot.pk)
        if lot.holds.filter(ended_at=None).exists():
            raise RecordingError("Decide the hold first.")
        if lot.state != LotState.WAITING:
            raise RecordingError(f"{lot.code} is {lot.get_state_display()}, not waiting.")
        if shown != shown_hash(lot):
            raise RecordingError("The record changed since this page was shown; read it again.")
        if not reason.strip():
            raise RecordingError("Give the reason for the decision.", field="reason")
        Lot.objects.filter(pk=lot.pk).update(state=LotState.RELEASED)
        writer.label = f"Release {lot.code}"
        writer.reason = reason
        return writer.touch(lot)


def void_step(context: Context, *, step: Step, reason: str) -> Step:
    """Void a record: its draws end, what they took goes back, its lots leave the stock.

    A lead voids; a recorder may void an own record within two minutes. Raises StillNeeded naming
    the lots that later records drew.
    """
    if not reason.strip():
        raise RecordingError("Say why the record is voided.", field="reason")
    now = context.now or timezone.now()
    own = step.recorded_by_id == context.by.pk and now - step.recorded_at <= UNDO_WINDOW
    with context.open("void", Action.RECORD if own else Action.VOID) as writer:
        step = Step.objects.get(pk=step.pk, facility=writer.facility)
        if step.voided_at is not None:
            raise RecordingError("This record is void already.")
        used = [
            lot.code for lot in step.made_lots.filter(draws__ended_at=None, draws__isnull=False)
        ]
        if used:
            raise StillNeeded(
                f"Later records drew {', '.join(sorted(set(used)))}; void those first."
            )
        for draw in step.draws.filter(ended_at=None).select_related("lot"):
            _give_back(writer, draw)
        for lot in step.made_lots.all():
            Stock.objects.filter(lot=lot).delete()
            Lot.objects.filter(pk=lot.pk).update(state=LotState.VOID)
            writer.touch(lot)
        Step.objects.filter(pk=step.pk).update(
            voided_at=writer.now, ended_at=step.ended_at or writer.now
        )
        writer.label = f"Void {step}"
        writer.reason = reason
        writer.answer = step
        step.refresh_from_db()
        return writer.touch(step)


def _give_back(writer: Writer, draw: Draw) -> None:
    Draw.objects.filter(pk=draw.pk).update(ended_at=writer.now, ended_by=writer.by)
    writer.touch(draw)
    amount, solids = draw.quantity or 0, draw.solids or 0
    if draw.role == DrawRole.RETURNED:
        Lot.objects.filter(pk=draw.lot_id).update(returned=F("returned") - amount)
        return
    shipped = amount if draw.role == DrawRole.SHIPPED else 0
    Lot.objects.filter(pk=draw.lot_id).update(
        shipped=F("shipped") - shipped,
        drawn=F("drawn") - amount,
        solids_drawn=F("solids_drawn") - solids,
    )
    place = draw.from_place or draw.lot.made_by.place
    if place is not None:
        row, _ = Stock.objects.get_or_create(
            lot_id=draw.lot_id, place=place, defaults={"quantity": 0}
        )
        Stock.objects.filter(pk=row.pk).update(quantity=F("quantity") + amount)
    writer.touch(draw.lot)


def keep_unposted(
    context: Context,
    *,
    kind: str,
    happened_at: datetime,
    typed: dict[str, str],
    reason: str,
    lots: list[Lot],
) -> UnpostedEntry:
    """Keep an act that happened but cannot stand in the ledger, until a lead settles it."""
    with context.open("unposted entry") as writer:
        entry = UnpostedEntry.objects.create(
            facility=writer.facility,
            kind=kind,
            happened_at=happened_at,
            typed=typed,
            reason=reason[:400],
            recorded_at=writer.now,
            recorded_by=writer.by,
        )
        entry.lots.set(lots)
        writer.label = f"Kept, not posted: {kind}"
        return writer.touch(entry)


def settle_unposted(
    context: Context, *, entry: UnpostedEntry, settled_as: str, reason: str
) -> UnpostedEntry:
    """End an unposted entry: posted by another record, corrected, or voided, with a reason."""
    if settled_as not in ("posted", "corrected", "voided"):
        raise RecordingError("Choose posted, corrected or voided.", field="settled_as")
    if not reason.strip():
        raise RecordingError("Give the reason.", field="reason")
    with context.open("unposted entry settled", Action.AMEND) as writer:
        UnpostedEntry.objects.filter(pk=entry.pk, settled_at=None).update(
            settled_at=writer.now,
            settled_by=writer.by,
            settled_as=settled_as,
            settled_reason=reason[:400],
        )
        return writer.touch(entry)

"""Holds and the signed decisions that end them; voids and what depends on them."""

import hashlib
from datetime import datetime, timedelta

from django.utils import timezone

from lots.models import (
    CorrectiveAction,
    Draw,
    Hold,
    ItemKind,
    Lot,
    LotState,
    Place,
    Step,
    StepKind,
    Stock,
    UnpostedEntry,
)
from lots.rules.roles import Action
from lots.tracing.cone import back, forward

from . import _judge, _ledger
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
        writer.own(lot)
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
        writer.own(action.hold.lot)
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


def decide_hold(
    context: Context,
    *,
    hold: Hold,
    decision: str,
    reason: str,
    shown: str,
    official_release: str = "",
) -> Lot:
    """End a hold by a signed decision: release or reject; ``shown`` is the hash of the screen.

    An official detention ends only with the reference of the authority's own release.
    """
    if decision not in ("release", "reject"):
        raise RecordingError("Choose release or reject.", field="decision")
    if not reason.strip():
        raise RecordingError("Give the reason for the decision.", field="reason")
    with context.open(f"hold {decision}", Action.RELEASE) as writer:
        hold = Hold.objects.select_related("lot__item", "lot__made_by").get(pk=hold.pk)
        writer.own(hold.lot)
        if decision == "release":
            _refuse_running(hold.lot)
        _refuse_decision(hold, decision, shown, official_release)
        if official_release:
            reason = f"Official release {official_release}. {reason}"
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
        ended = lot.state in (LotState.REJECTED, LotState.VOID)
        if decision == "reject" and not ended:
            Lot.objects.filter(pk=lot.pk).update(state=LotState.REJECTED)
        elif not ended and not lot.holds.filter(ended_at=None).exists():
            Lot.objects.filter(pk=lot.pk).update(state=LotState.RELEASED)
        return writer.touch(Lot.objects.get(pk=lot.pk))


def _refuse_decision(hold: Hold, decision: str, shown: str, official_release: str) -> None:
    if hold.ended_at is not None:
        raise RecordingError("This hold was decided already.")
    if hold.official and decision == "release" and not official_release.strip():
        raise RecordingError(
            "An official detention ends only by a recorded official release: enter its reference."
        )
    if shown != shown_hash(hold.lot):
        raise RecordingError("The record changed since this page was shown; read it again.")
    if decision == "release" and hold.actions.filter(completed_at=None).exists():
        raise RecordingError("Complete the corrective action first.")


def _refuse_running(lot: Lot) -> None:
    """Refuse to release packed goods while a step behind them is open."""
    if lot.item.kind != ItemKind.PACKED:
        return
    behind = back(lot.made_by_id).steps
    running = Step.objects.filter(pk__in=behind, ended_at=None, voided_at=None).first()
    if running is not None:
        name = running.in_words(lot.facility.zone)
        raise RecordingError(f"{name} behind {lot.code} is still open; close it first.")


def release_lot(context: Context, *, lot: Lot, reason: str, shown: str) -> Lot:
    """Release a waiting lot by a lead's signed decision."""
    with context.open("release", Action.RELEASE) as writer:
        lot = Lot.objects.select_related("item").get(pk=lot.pk)
        writer.own(lot)
        _refuse_running(lot)
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
        _refuse_needed(step)
        for draw in step.draws.filter(ended_at=None).select_related("lot__made_by", "from_place"):
            _ledger.give_back(writer, draw)
        for booked in step.adjustments.filter(ended_at=None).select_related("lot", "place"):
            _ledger.take_back_adjustment(writer, booked)
        if step.kind == StepKind.MOVE:
            _move_back(writer, step)
        for lot in step.made_lots.all():
            Stock.objects.filter(lot=lot).delete()
            Lot.objects.filter(pk=lot.pk).update(state=LotState.VOID)
            writer.touch(lot)
        Step.objects.filter(pk=step.pk).update(
            voided_at=writer.now, ended_at=step.ended_at or writer.now
        )
        writer.label = f"Void {step.in_words(writer.facility.zone)}"
        writer.reason = reason
        writer.answer = step
        step.refresh_from_db()
        return writer.touch(step)


def _refuse_needed(step: Step) -> None:
    """Refuse a void that would leave later records without their source."""
    drawn = step.made_lots.filter(draws__ended_at=None, draws__isnull=False)
    if used := sorted({lot.code for lot in drawn}):
        raise StillNeeded(f"Later records drew {', '.join(used)}; void those first.")
    if Draw.objects.filter(returns__step=step, ended_at=None).exists():
        raise StillNeeded("Goods of this sale came back; void the return first.")


def _move_back(writer: Writer, step: Step) -> None:
    """Undo a move; raises NotEnough where the goods have gone on since."""
    lot = Lot.objects.get(uuid=step.detail["lot_uuid"])
    come_from = Place.objects.get(uuid=step.detail["from_uuid"])
    assert step.place is not None  # noqa: S101 - a move always has its place
    _ledger.change_stock(lot, step.place, -step.detail["quantity"])
    _ledger.change_stock(lot, come_from, step.detail["quantity"])
    writer.touch(lot)


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
        writer.own(*lots)
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
        writer.own(entry)
        entry = UnpostedEntry.objects.get(pk=entry.pk)
        if entry.settled_at is not None:
            raise RecordingError("This entry was settled already.")
        UnpostedEntry.objects.filter(pk=entry.pk).update(
            settled_at=writer.now,
            settled_by=writer.by,
            settled_as=settled_as,
            settled_reason=reason[:400],
        )
        return writer.touch(entry)

"""Corrections of recorded facts: the old value stays, with who, when and why."""

from dataclasses import replace

from lots.models import Amendment, Lot, LotState, ReadingKind, Step, VesselTake
from lots.rules.roles import Action

from . import _ledger, _redivide, _vessels
from .context import Context
from .errors import NotEnough, RecordingError
from .measures import Liquid, Typed

# Facts that change no quantity. A wrong quantity is voided and recorded anew.
FIELDS = ("note", "document", "people")


def amend_step(context: Context, *, step: Step, field: str, new: str, reason: str) -> Amendment:
    """Correct a note, document number or the people of a record; the journal keeps both."""
    if field not in FIELDS:
        raise RecordingError("Void the record and enter it anew to change this.", field="field")
    if not reason.strip():
        raise RecordingError("Say why it is corrected.", field="reason")
    with context.open("correction", Action.AMEND) as writer:
        step = Step.objects.get(pk=step.pk, facility=writer.facility)
        longest = Step._meta.get_field(field).max_length
        if longest and len(new) > longest:
            raise RecordingError(f"At most {longest} characters fit here.", field="new")
        old = getattr(step, field)
        if old == new:
            raise RecordingError("That is what stands there already.", field="new")
        Step.objects.filter(pk=step.pk).update(**{field: new})
        writer.label = f"Correction of {step.in_words(writer.facility.zone)}"
        writer.reason = reason
        writer.touch(step)
        return writer.touch(
            Amendment.objects.create(
                step=step,
                field=field,
                old=old,
                new=new,
                reason=reason[:400],
                at=writer.now,
                by=writer.by,
            )
        )


def amend_amount(context: Context, *, lot: Lot, amount: Typed, reason: str) -> Amendment:
    """Correct how much a record made; what drew on it by its vessel is divided anew.

    The density stays as it was read. Raises NotEnough where more was drawn than there then is.
    """
    if amount.value is None or amount.value < 0:
        raise RecordingError("Enter the right amount.", field="new")
    if not reason.strip():
        raise RecordingError("Say why it is corrected.", field="reason")
    with replace(context, redivide=True).open("correction", Action.AMEND) as writer:
        lot = Lot.objects.select_related("item", "put_in", "made_by").get(pk=lot.pk)
        writer.own(lot)
        _refuse_amount(lot)
        if lot.item.is_liquid and lot.put_in is not None:
            writer.before_arrival(lot.put_in, lot.made_at)
        lot.refresh_from_db()
        made, solids = _corrected(lot, amount)
        if made + lot.adjusted < lot.drawn:
            raise NotEnough(f"More than that was drawn from {lot.code} already.", field="new")
        _ledger.change_stock(lot, lot.put_in, made - int(lot.made or 0))
        Lot.objects.filter(pk=lot.pk).update(
            made=made, solids_made=solids, typed_value=amount.text, typed_unit=amount.unit
        )
        writer.label, writer.reason = f"Correction of {lot.code}", reason
        writer.touch(lot)
        return writer.touch(
            Amendment.objects.create(
                step=lot.made_by,
                field=f"amount of {lot.code}",
                old=f"{lot.typed_value} {lot.typed_unit}".strip(),
                new=f"{amount.text} {amount.unit}",
                reason=reason[:400],
                at=writer.now,
                by=writer.by,
            )
        )


def _refuse_amount(lot: Lot) -> None:
    if lot.derived:
        raise RecordingError("This amount follows from what was drawn; correct that instead.")
    if lot.state == LotState.VOID or lot.made is None or lot.put_in is None:
        raise RecordingError("Void the record and enter it anew to change this.", field="new")


def _corrected(lot: Lot, amount: Typed) -> tuple[int, int | None]:
    """Return (made, solids) of a corrected amount at the density the lot was made with."""
    if lot.item.unit == "piece":
        if amount.value is None or amount.value != int(amount.value):
            raise RecordingError("Count whole pieces.", field="new")
        return int(amount.value), None
    reading = lot.readings.filter(kind=ReadingKind.BRIX).order_by("at", "pk").first()
    brix = float(reading.corrected) if reading else None
    if brix is None and lot.made and lot.solids_made is not None:
        brix = 100 * int(lot.solids_made) / int(lot.made)
    liquid = Liquid(amount, brix)
    return liquid.milligrams() or 0, liquid.solids() if lot.item.is_liquid else None


def waiting_for_division(step: Step) -> list[VesselTake]:
    """Return the later takes that a late record's lots are only carried over into."""
    found: list[VesselTake] = []
    for lot in step.made_lots.select_related("put_in"):
        carried = lot.draws.filter(ended_at=None, role="carry-over", quantity=0, asked=None)
        steps = set(carried.values_list("step", flat=True))
        if lot.put_in is not None and steps:
            later = _vessels.later_takes(lot.put_in, lot.made_at)
            found += [take for take in later if take.step_id in steps]
    return found


def divide_anew(context: Context, *, step: Step) -> list[VesselTake]:
    """Divide the later draws of the vessels that a late record put something into anew."""
    with context.open("re-division", Action.RECORD) as writer:
        writer.own(step)
        takes = waiting_for_division(step)
        if not takes:
            raise RecordingError("No later record waits to be divided anew.")
        writer.redividing = True
        for lot in step.made_lots.select_related("put_in"):
            if lot.put_in is not None and lot.put_in.is_vessel:
                _redivide.rewind(writer, lot.put_in, lot.made_at)
        writer.label = f"Re-division after {step.in_words(writer.facility.zone)}"
        writer.answer = step
        return takes

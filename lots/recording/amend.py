"""Corrections of recorded facts: the old value stays, with who, when and why."""

from lots.models import Amendment, Step, VesselTake
from lots.rules.roles import Action

from . import _redivide, _vessels
from .context import Context
from .errors import RecordingError

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
        writer.label = f"Correction of {step}"
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
        writer.label = f"Re-division after {step}"
        writer.answer = step
        return takes

"""Corrections of recorded facts: the old value stays, with who, when and why."""

from lots.models import Amendment, Step
from lots.rules.roles import Action

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

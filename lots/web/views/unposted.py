"""Acts that happened but could not stand: kept as typed, and entered again from Today."""

from typing import Any
from uuid import UUID

from django.contrib import messages
from django.db import transaction
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from lots.models import Draw, Lot, Step, UnpostedEntry
from lots.recording import decisions
from lots.recording._door import AlreadyRecorded
from lots.recording.errors import RecordingError
from lots.rules.roles import Action

from ..access import allow, context_of, facility_of
from ..forms.base import RecordForm
from ..screens import FORMS, RUNNING

# What a form sends beside what was typed: its confirmations are asked anew.
NOT_TYPED = ("csrfmiddlewaretoken", "client_id", "happened", "redivide", "difference")
RUNNING_STEP = "running_step"


def keep(request: HttpRequest, kind: str, form: RecordForm, error: RecordingError) -> HttpResponse:
    """Keep a refused act that has already happened, until a lead settles it."""
    typed = {key: str(value) for key, value in request.POST.items() if key not in NOT_TYPED}
    if form.step is not None:
        typed[RUNNING_STEP] = str(form.step.uuid)
    decisions.keep_unposted(
        context_of(request, form.client()),
        kind=kind,
        happened_at=form.moment,
        typed=typed,
        reason=error.message,
        lots=_lots(form),
    )
    messages.success(request, "Kept on the server, not posted: a lead settles it from Today.")
    return redirect("today", facility_of(request).slug)


def _lots(form: RecordForm) -> list[Lot]:
    """Return the lots that a form names."""
    found = []
    for value in form.cleaned_data.values():
        lot = value.lot if isinstance(value, Draw) else value
        if isinstance(lot, Lot) and lot not in found:
            found.append(lot)
    return found


@allow(Action.AMEND)
def reopen(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Show an unposted entry's form as it was typed; recording it settles the entry as posted."""
    entry = get_object_or_404(UnpostedEntry, facility=facility_of(request), uuid=uuid)
    form = _form(request, entry)
    if entry.settled_at is not None or form is None:
        words = "This entry was settled already." if form else "Its form is gone; settle it here."
        messages.info(request, words)
        return redirect("today", slug)
    if request.method == "POST" and form.is_valid():
        try:
            step = _post(request, entry, form)
        except AlreadyRecorded:
            messages.info(request, "This form was recorded before.")
            return redirect("today", slug)
        except RecordingError as error:
            form.refuse(error)
        else:
            messages.success(request, "Recorded, and the unposted entry is settled.")
            return redirect("step", slug, step.uuid)
    context = {
        "form": form,
        "title": form.title,
        "entry": entry,
        "typed": _typed(form, entry.typed),
    }
    return render(request, "lots/record.html", context, status=422 if form.errors else 200)


def _form(request: HttpRequest, entry: UnpostedEntry) -> RecordForm | None:
    """Return the form that an entry came from, filled in, or ``None`` if there is none today."""
    facility, step, screens = facility_of(request), None, FORMS
    if RUNNING_STEP in entry.typed:
        step = Step.objects.filter(facility=facility, uuid=entry.typed[RUNNING_STEP]).first()
        screens = RUNNING.get(step.kind, {}) if step else {}
    if entry.kind not in screens:
        return None
    data = request.POST if request.method == "POST" else None
    form = screens[entry.kind](facility, data, step=step)
    form.fill_in(entry.typed)
    return form


def _post(request: HttpRequest, entry: UnpostedEntry, form: RecordForm) -> Step:
    """Record the act and settle its entry: both, or neither."""
    with transaction.atomic():
        step = form.write(context_of(request, form.client()))
        decisions.settle_unposted(
            context_of(request),
            entry=entry,
            settled_as="posted",
            reason=f"Recorded as {step.in_words(form.facility.zone)}",
        )
    return step


def _typed(form: RecordForm, typed: dict[str, str]) -> list[tuple[str, str]]:
    """Return everything that was typed, in the words of its form."""
    rows = []
    for name, field in form.fields.items():
        value = field.widget.value_from_datadict(typed, {}, name)
        if words := _words(field, value):
            rows.append((field.label or name.replace("_", " ").capitalize(), words))
    return rows


def _words(field: Any, value: Any) -> str:
    """Return one typed value in words: a choice by its name, an amount with its unit."""
    if isinstance(value, list):
        return " ".join(str(part) for part in value if part) if value[0] else ""
    if value is True:
        return "yes"
    if not value:
        return ""
    queryset = getattr(field, "queryset", None)
    if queryset is None:
        return str(dict(getattr(field, "choices", ())).get(value, value)).replace("T", " ", 1)
    chosen = queryset.model.objects.filter(pk=value).first() if str(value).isdigit() else None
    return field.label_from_instance(chosen) if chosen else str(value)

"""Recording: one form a step, and one an act inside a running step."""

from uuid import UUID

from django.contrib import messages
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import redirect, render

from lots.recording._door import AlreadyRecorded
from lots.recording.errors import RecordingError
from lots.rules.roles import Action

from ..access import allow, context_of, facility_of, get_step
from ..forms.base import RecordForm
from ..screens import FORMS, RUNNING
from . import unposted


@allow(Action.RECORD)
def record(request: HttpRequest, slug: str, kind: str) -> HttpResponse:
    """Show a step's form, or write its record."""
    if kind not in FORMS:
        raise Http404
    form = FORMS[kind](facility_of(request), request.POST if request.method == "POST" else None)
    if request.method == "POST" and form.is_valid():
        try:
            step = form.write(context_of(request, form.client()))
        except AlreadyRecorded as answer:
            messages.info(request, "This form was recorded before; here is its record.")
            if answer.step is None:
                return redirect("today", slug)
            return redirect("step", slug, answer.step.uuid)
        except RecordingError as error:
            if "happened" in request.POST:
                return unposted.keep(request, kind, form, error)
            form.refuse(error)
        else:
            messages.success(request, f"Recorded: {step.in_words(form.facility.zone)}.")
            return redirect("step", slug, step.uuid)
    return _show(request, form)


@allow(Action.RECORD)
def running(request: HttpRequest, slug: str, uuid: UUID, act: str) -> HttpResponse:
    """Record one act inside a running step."""
    step = get_step(request, uuid)
    acts = RUNNING.get(step.kind, {})
    if act not in acts:
        raise Http404
    typed = request.POST if request.method == "POST" else None
    form = acts[act](facility_of(request), typed, step=step)
    if request.method == "POST" and form.is_valid():
        try:
            form.write(context_of(request, form.client()))
        except AlreadyRecorded:
            messages.info(request, "This form was recorded before.")
            return redirect("step", slug, step.uuid)
        except RecordingError as error:
            if "happened" in request.POST:
                return unposted.keep(request, act, form, error)
            form.refuse(error)
        else:
            messages.success(request, f"Recorded: {form.title}.")
            return redirect("step", slug, step.uuid)
    return _show(request, form)


def _show(request: HttpRequest, form: RecordForm) -> HttpResponse:
    status = 422 if form.errors else 200
    refused = bool(form.errors) and form.is_bound and form.refused
    context = {"form": form, "title": form.title, "refused": refused}
    return render(request, "lots/record.html", context, status=status)

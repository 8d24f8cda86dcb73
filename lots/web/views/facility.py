"""The facility itself: its instruments and its settings."""

from django.contrib import messages
from django.core.exceptions import PermissionDenied
from django.db.models import Count, Max
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render

from lots.models import Instrument
from lots.recording import setup
from lots.recording.errors import RecordingError
from lots.rules.roles import Action, Role, may

from ..access import allow, context_of, facility_of
from ..forms.instruments import InstrumentForm
from ..forms.settings import SettingsForm


@allow(Action.VIEW)
def instruments(request: HttpRequest, slug: str) -> HttpResponse:
    """List the instruments with what was read by each, and register one."""
    may_add = may(Role(request.member.role), Action.RECORD)  # type: ignore[attr-defined]
    form = InstrumentForm(request.POST if request.method == "POST" else None)
    if request.method == "POST" and not may_add:
        raise PermissionDenied
    if request.method == "POST" and form.is_valid():
        try:
            row = form.record(context_of(request))
        except RecordingError as error:
            form.add_error(error.field if error.field in form.fields else None, error.message)
        else:
            messages.success(request, f"Registered: {row}.")
            return redirect("instruments", slug)
    rows = Instrument.objects.filter(facility=facility_of(request)).order_by("kind", "tag")
    rows = rows.annotate(readings=Count("reading"), last=Max("reading__at"))
    context = {"title": "Instruments", "form": form, "rows": rows, "may_add": may_add}
    return render(request, "lots/instruments.html", context, status=422 if form.errors else 200)


@allow(Action.MANAGE_SETTINGS)
def settings(request: HttpRequest, slug: str) -> HttpResponse:
    """Show the facility's settings, and change them."""
    form = SettingsForm(facility_of(request), request.POST if request.method == "POST" else None)
    if request.method == "POST" and form.is_valid():
        fields = form.changed()
        if fields:
            setup.change_facility(context_of(request), **fields)
            messages.success(request, "Settings changed; the journal keeps the old ones.")
        else:
            messages.info(request, "Nothing was different, so nothing changed.")
        return redirect("settings", slug)
    context = {"title": "Settings", "form": form}
    return render(request, "lots/settings.html", context, status=422 if form.errors else 200)

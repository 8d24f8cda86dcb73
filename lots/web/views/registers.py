"""Registers: places, items and partners, each listed with the form that adds one."""

from uuid import UUID

from django.contrib import messages
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from lots.models import Item, Partner, Place
from lots.recording import setup
from lots.recording.errors import RecordingError
from lots.rules.roles import Action
from lots.web.access import allow, context_of, facility_of
from lots.web.forms import registers as forms

REGISTERS = {
    "places": ("Places and vessels", forms.PlaceForm, Place),
    "materials": ("Materials and products", forms.ItemForm, Item),
    "partners": ("Partners", forms.PartnerForm, Partner),
}


@allow(Action.RECORD)
def change(request: HttpRequest, slug: str, name: str, uuid: UUID) -> HttpResponse:
    """Change one row of a register."""
    if name not in REGISTERS:
        raise Http404
    title, form_class, model = REGISTERS[name]
    row = get_object_or_404(model, facility=facility_of(request), uuid=uuid)
    posted = request.POST if request.method == "POST" else None
    form = form_class(posted, initial=form_class.initial_of(row), changing=True)
    if posted is not None and form.is_valid():
        try:
            row = setup.change_row(context_of(request), row, **form.values())
        except RecordingError as error:
            form.add_error(error.field if error.field in form.fields else None, error.message)
        else:
            messages.success(request, f"Changed: {row}.")
            return redirect("register", slug, name)
    context = {"title": f"{title}: {row}", "form": form, "register": name}
    return render(request, "lots/register_row.html", context, status=422 if form.errors else 200)


@allow(Action.RECORD)
def register(request: HttpRequest, slug: str, name: str) -> HttpResponse:
    """List a register, and add to it."""
    if name not in REGISTERS:
        raise Http404
    title, form_class, model = REGISTERS[name]
    form = form_class(request.POST if request.method == "POST" else None)
    if request.method == "POST" and form.is_valid():
        try:
            row = form.record(context_of(request))
        except RecordingError as error:
            form.add_error(error.field if error.field in form.fields else None, error.message)
        else:
            messages.success(request, f"Registered: {row}.")
            return redirect("register", slug, name)
    rows = model.objects.filter(facility=facility_of(request)).order_by("kind", "name")
    context = {"title": title, "form": form, "rows": rows, "register": name}
    return render(request, "lots/register.html", context, status=422 if form.errors else 200)

"""Registers: places, items and partners, each listed with the form that adds one."""

from django.contrib import messages
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import redirect, render

from lots.models import Item, Partner, Place
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
    context = {"title": title, "form": form, "rows": rows}
    return render(request, "lots/register.html", context, status=422 if form.errors else 200)

"""Tags for drums: printed after a drum fill; nothing is recorded."""

from decimal import Decimal
from typing import NamedTuple
from uuid import UUID

import segno
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import render
from django.urls import reverse
from django.utils.safestring import SafeString, mark_safe

from lots.models import Lot, StepKind
from lots.quantities import units
from lots.quantities.rounding import MILLIGRAMS_PER_KILOGRAM, fixed
from lots.rules.roles import Action

from ..access import allow, get_step


class Tag(NamedTuple):
    """What one drum carries on its outside."""

    lot: Lot
    weight: str
    seal: str
    code: SafeString


@allow(Action.PRINT_LABEL)
def tags(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Show a tag for each drum of a filling, ready to print."""
    step = get_step(request, uuid)
    if step.kind != StepKind.DRUM_FILL or step.voided_at is not None:
        raise Http404
    seals = step.detail.get("seals", {})
    lots = step.made_lots.select_related("item", "put_in", "facility").order_by("pk")
    found = [
        Tag(lot, weight(lot), seals.get(str(lot.put_in), ""), qr(request, lot)) for lot in lots
    ]
    return render(request, "lots/tags.html", {"title": "Drum tags", "tags": found, "step": step})


def weight(lot: Lot) -> str:
    """Return the net weight in the facility's unit and in kilograms; empty if not measured."""
    if lot.made is None:
        return ""
    kilograms = Decimal(lot.made) / MILLIGRAMS_PER_KILOGRAM
    text, unit = f"{fixed(kilograms, 1)} kg", lot.facility.mass_unit
    if unit == "kg":
        return text
    return f"{fixed(units.convert(kilograms, 'kg', unit), 1)} {unit} ({text})"


def qr(request: HttpRequest, lot: Lot) -> SafeString:
    """Return a QR code, as SVG, that leads to the lot's page."""
    address = request.build_absolute_uri(reverse("lot", args=[lot.facility.slug, lot.uuid]))
    drawn = segno.make(address, error="m").svg_inline(omitsize=True, dark="#000", light="#fff")
    return mark_safe(drawn)  # noqa: S308 - drawn from an address of this book alone

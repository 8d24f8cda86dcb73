"""What forms offer: places, items, lots in stock, and the cautions where the work is."""

from typing import Any

from django import forms

from lots.models import Facility, Item, ItemKind, Place, PlaceKind
from lots.recording.errors import RecordingError

from . import fields

TANKS = (PlaceKind.TANK, PlaceKind.BATCH_TANK, PlaceKind.CANNER, PlaceKind.TOTE, PlaceKind.DRUM)
STORES = (PlaceKind.ROOM,)
STOCKED = (ItemKind.PACKED, ItemKind.SYRUP)
AMOUNTS = ("pieces", "US gal", "imp gal", "qt", "pt", "L", "lb", "kg")
HOT_CAUTION = "Filtering and filling heat burns. Face the outlet, wear gloves and sleeves."


def places(facility: Facility, *kinds: str) -> Any:
    """Return the active places of some kinds."""
    return Place.objects.filter(facility=facility, kind__in=kinds, active=True).order_by("name")


def items(facility: Facility, kind: str) -> Any:
    """Return the items of one kind."""
    return Item.objects.filter(facility=facility, kind=kind, active=True).order_by("name")


def the_item(facility: Facility, kind: str) -> Item:
    """Return the facility's item of a kind."""
    found = items(facility, kind).first()
    if found is None:
        raise RecordingError(f"Register an item of the kind {kind} under Materials first.")
    return found


def standing(facility: Facility) -> forms.ModelChoiceField:
    """Return the choice of a place that goods can stand in."""
    rows = Place.objects.filter(facility=facility, active=True).exclude(kind=PlaceKind.WOODS)
    return forms.ModelChoiceField(rows.order_by("name"))


def any_lot(facility: Facility, *kinds: str) -> fields.LotChoice:
    """Return the choice of a lot in stock."""
    return fields.LotChoice(fields.lots_in_stock(facility, *(kinds or tuple(ItemKind))))

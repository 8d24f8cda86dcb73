"""Forms of the registers: places and vessels, items and products, partners."""

from typing import Any

from django import forms

from lots.identification.gs1 import valid_gtin
from lots.models import LIQUIDS, Item, ItemKind, Partner, PartnerKind, Place, PlaceKind, Unit
from lots.quantities.units import VOLUME
from lots.recording import setup
from lots.recording.context import Context


class PlaceForm(forms.Form):
    """A woods section, room or vessel."""

    name = forms.CharField(max_length=80)
    kind = forms.ChoiceField(choices=PlaceKind.choices)
    material = forms.CharField(max_length=80, required=False)
    food_grade_statement = forms.CharField(max_length=160, required=False)

    def record(self, context: Context) -> Place:
        """Register it."""
        return setup.add_place(context, **self.cleaned_data)


class ItemForm(forms.Form):
    """Something kept in lots; a packed product has a size and a label grade."""

    name = forms.CharField(max_length=120)
    kind = forms.ChoiceField(choices=ItemKind.choices)
    counted = forms.BooleanField(label="Counted in pieces", required=False)
    allergens = forms.CharField(max_length=160, required=False)
    size_value = forms.DecimalField(label="Size of a packed product", required=False, min_value=0)
    size_unit = forms.ChoiceField(
        choices=[("", ""), *((unit, unit) for unit in VOLUME)], required=False
    )
    label_grade = forms.CharField(label="Grade on the label", max_length=40, required=False)
    label_version = forms.CharField(max_length=40, required=False)
    gtin = forms.CharField(label="GTIN", max_length=14, required=False)

    def clean_gtin(self) -> str:
        """Refuse a GTIN whose check digit is wrong."""
        text: str = self.cleaned_data["gtin"]
        if text and not valid_gtin(text):
            raise forms.ValidationError("This GTIN's check digit is wrong; type it again.")
        return text

    def clean(self) -> dict[str, Any]:
        """Ask a packed product's size; liquids are always kept by weight."""
        data = super().clean() or {}
        packed = data.get("kind") == ItemKind.PACKED
        if packed and not (data.get("size_value") and data.get("size_unit")):
            self.add_error("size_value", "Enter the product's size and its unit.")
        return data

    def record(self, context: Context) -> Item:
        """Register it."""
        data = dict(self.cleaned_data)
        pieces = data.pop("counted") and data["kind"] not in LIQUIDS
        pieces = pieces or data["kind"] == ItemKind.PACKED
        size = data.pop("size_value")
        unit = Unit.PIECE if pieces else Unit.MILLIGRAM
        return setup.add_item(context, unit=unit, size_value=str(size or ""), **data)


class PartnerForm(forms.Form):
    """A supplier, customer, carrier or brand owner."""

    name = forms.CharField(max_length=120)
    kind = forms.ChoiceField(choices=PartnerKind.choices)
    address = forms.CharField(max_length=240, required=False)
    phone = forms.CharField(max_length=40, required=False)
    email = forms.EmailField(label="E-mail", max_length=120, required=False)

    def record(self, context: Context) -> Partner:
        """Register it."""
        return setup.add_partner(context, **self.cleaned_data)

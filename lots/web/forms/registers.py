"""Forms of the registers: places and vessels, items and products, partners."""

from typing import Any

from django import forms

from lots.identification.gs1 import valid_gtin
from lots.models import LIQUIDS, Item, ItemKind, Partner, PartnerKind, Place, PlaceKind, Unit
from lots.quantities.units import VOLUME
from lots.recording import setup
from lots.recording.context import Context


class RegisterForm(forms.Form):
    """A row of a register: added, or changed; only a row that stands can be put out of use."""

    def __init__(self, *args: Any, changing: bool = False, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        if not changing:
            self.fields.pop("active", None)

    def values(self) -> dict[str, Any]:
        """Return what is kept of the row."""
        return dict(self.cleaned_data)

    @classmethod
    def initial_of(cls, row: Any) -> dict[str, Any]:
        """Return what a row's form shows first."""
        return {name: getattr(row, name, None) for name in cls.base_fields}


class PlaceForm(RegisterForm):
    """A woods section, room or vessel."""

    name = forms.CharField(max_length=80)
    kind = forms.ChoiceField(choices=PlaceKind.choices)
    material = forms.CharField(max_length=80, required=False)
    food_grade_statement = forms.CharField(max_length=160, required=False)
    active = forms.BooleanField(label="In use", required=False, initial=True)

    def record(self, context: Context) -> Place:
        """Register it."""
        return setup.add_place(context, **self.values())


class ItemForm(RegisterForm):
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
    active = forms.BooleanField(label="In use", required=False, initial=True)

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

    def values(self) -> dict[str, Any]:
        """Return the item's fields: liquids by weight, products by the piece."""
        data = dict(self.cleaned_data)
        counted = data.pop("counted") and data["kind"] not in LIQUIDS
        pieces = counted or data["kind"] == ItemKind.PACKED
        data["unit"] = Unit.PIECE if pieces else Unit.MILLIGRAM
        data["size_value"] = str(data["size_value"] or "")
        return data

    @classmethod
    def initial_of(cls, row: Item) -> dict[str, Any]:
        """Return what an item's form shows first."""
        return {**super().initial_of(row), "counted": row.unit == Unit.PIECE}

    def record(self, context: Context) -> Item:
        """Register it."""
        return setup.add_item(context, **self.values())


class PartnerForm(RegisterForm):
    """A supplier, customer, carrier or brand owner."""

    name = forms.CharField(max_length=120)
    kind = forms.ChoiceField(choices=PartnerKind.choices)
    address = forms.CharField(max_length=240, required=False)
    phone = forms.CharField(max_length=40, required=False)
    email = forms.EmailField(label="E-mail", max_length=120, required=False)

    def record(self, context: Context) -> Partner:
        """Register it."""
        return setup.add_partner(context, **self.values())

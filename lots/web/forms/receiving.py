"""Forms of what comes in: deliveries, stock already in the cellar, and what goes back."""

from django import forms

from lots.models import (
    Facility,
    Item,
    ItemKind,
    Lot,
    Partner,
    PartnerKind,
    Place,
    PlaceKind,
    Step,
    StepKind,
)
from lots.recording import receiving
from lots.recording.context import Context
from lots.recording.errors import RecordingError
from lots.recording.measures import NOT_MEASURED

from . import fields, last
from .base import RecordForm
from .choices import AMOUNTS, items, standing


class ReceivingForm(fields.DensityFields, RecordForm):
    """A delivery of one lot."""

    title = "Receiving"
    kind = StepKind.RECEIVING
    same = {"place": last.put_in}
    rows = (("item", "amount"),)
    supplier_code = forms.CharField(label="Supplier's lot code", required=False, max_length=60)
    document = forms.CharField(label="Delivery slip", required=False, max_length=80)
    packages = forms.CharField(label="Packages", required=False, max_length=80)
    condition = forms.CharField(label="Condition", required=False, max_length=120)
    statement = forms.CharField(
        label="Allergen and food-grade statement", required=False, max_length=200
    )
    decision = forms.ChoiceField(choices=[(one, one) for one in receiving.DECISIONS])
    decision_reason = forms.CharField(label="If not accepted, why", required=False, max_length=200)
    folded = ("brix", "device", "sample_temperature", "carrier", "packages", "condition")

    def build(self, facility: Facility) -> None:
        """Offer suppliers, carriers, items and places."""
        partners = Partner.objects.filter(facility=facility).order_by("name")
        self.fields["supplier"] = forms.ModelChoiceField(partners.filter(kind=PartnerKind.SUPPLIER))
        self.fields["carrier"] = forms.ModelChoiceField(
            partners.filter(kind=PartnerKind.CARRIER),
            required=False,
            empty_label="The supplier brought it",
        )
        self.fields["item"] = forms.ModelChoiceField(
            Item.objects.filter(facility=facility, active=True)
            .exclude(kind__in=[ItemKind.PACKED, ItemKind.CONTENTS])
            .order_by("name")
        )
        units = ["pieces", *fields.ordered(fields.MASSES, facility.mass_unit), *fields.VOLUMES]
        self.fields["amount"] = fields.MeasureField(units, "Quantity", required=True)
        self.fields["place"] = forms.ModelChoiceField(
            Place.objects.filter(facility=facility, active=True)
            .exclude(kind=PlaceKind.WOODS)
            .order_by("name")
        )
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        self.order_fields(("at", "supplier", "item", "amount", "supplier_code", "place"))

    def record(self, context: Context) -> Step:
        """Record the delivery."""
        data = self.cleaned_data
        names = (
            "supplier", "carrier", "item", "amount", "place", "supplier_code", "decision",
            "decision_reason", "document", "packages", "condition", "statement",
        )  # fmt: skip
        return receiving.record_receiving(
            context, at=self.moment, brix=self.density(), **{name: data[name] for name in names}
        )


class OpeningStockForm(fields.DensityFields, RecordForm):
    """Stock on hand when the book begins."""

    title = "Opening stock"
    kind = StepKind.OPENING_STOCK
    same = {"item": last.product, "place": last.put_in}
    rows = (("item", "amount"),)
    document = forms.CharField(label="Paper reference", max_length=80)
    code = forms.CharField(label="Its code so far", required=False, max_length=20)
    folded = ("device", "sample_temperature")

    def build(self, facility: Facility) -> None:
        """Offer items and places."""
        self.fields["item"] = forms.ModelChoiceField(
            items(facility, ItemKind.SYRUP) | items(facility, ItemKind.PACKED)
        )
        self.fields["amount"] = fields.MeasureField(AMOUNTS, "Amount", required=True)
        self.fields["place"] = standing(facility)
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        self.order_fields(("at", "item", "amount", "place", "code", "document", "brix"))

    def record(self, context: Context) -> Step:
        """Record the stock."""
        data = self.cleaned_data
        if (data["amount"] or NOT_MEASURED).value is None:
            raise RecordingError("Enter how much there is.", field="amount")
        names = ("item", "amount", "place", "document", "code")
        return receiving.record_opening_stock(
            context, at=self.moment, brix=self.density(), **{name: data[name] for name in names}
        )


class SupplierReturnForm(RecordForm):
    """Goods back to their supplier; held and rejected goods may go."""

    title = "Return to supplier"
    rows = (("lot", "amount"),)
    amount = fields.MeasureField(AMOUNTS, "Amount (empty: all)")
    document = forms.CharField(required=False, max_length=80)
    reason = forms.CharField(max_length=200)

    def build(self, facility: Facility) -> None:
        """Offer received lots."""
        received = Lot.objects.filter(
            facility=facility, made_by__kind=StepKind.RECEIVING, remaining__gt=0
        )
        self.fields["lot"] = fields.LotChoice(received.select_related("item", "printed_code"))

    def record(self, context: Context) -> Step:
        """Record the return."""
        data = self.cleaned_data
        names = ("lot", "amount", "document", "reason")
        return receiving.record_supplier_return(
            context, at=self.moment, **{name: data[name] for name in names}
        )

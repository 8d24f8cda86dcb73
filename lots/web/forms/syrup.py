"""Forms between the pan and the sale: filter, drum, fill, sale, and what comes in."""

from typing import Any

from django import forms

from lots.models import Facility, ItemKind, Partner, PartnerKind, Place, PlaceKind, Step, StepKind
from lots.recording import goods_out, receiving, syrup, upkeep
from lots.recording._sources import FromLot, FromVessel, Source
from lots.recording.context import Context
from lots.recording.measures import NOT_MEASURED

from . import fields
from .base import RecordForm
from .sap import TANKS, items, places, the_item

HOT_CAUTION = "Filtering and filling heat burns. Face the outlet, wear gloves and sleeves."
STORES = (PlaceKind.ROOM,)
LINES = range(1, 7)  # lots of a sale, drums of a filling: more are a second record


class SourceFields(RecordForm):
    """Where the syrup comes from: one vessel, all of it or an amount."""

    emptied = forms.BooleanField(label="The source is empty", required=False)

    def build(self, facility: Facility) -> None:
        """Offer the vessels that hold something."""
        held = places(facility, *TANKS).filter(stock__isnull=False).distinct()
        self.fields["source"] = forms.ModelChoiceField(held, label="From vessel")
        self.fields["taken"] = fields.volume(facility, "Amount taken (empty: all)")

    def sources(self) -> list[Source]:
        """Return what was drawn."""
        data = self.cleaned_data
        return [FromVessel(data["source"], data["taken"], data["emptied"])]


class FiltrationForm(fields.DensityFields, SourceFields):
    """A press, flat or cone filter run."""

    title = "Filter"
    caution = HOT_CAUTION
    filter_kind = forms.ChoiceField(
        label="Filter", choices=[(one, one) for one in ("press", "flat", "cone", "not filtered")]
    )
    reason = forms.CharField(label="If not filtered, why", required=False, max_length=200)
    clarity = forms.ChoiceField(
        label="Clarity seen", choices=[(one, one) for one in ("clear", "hazy", "cloudy")]
    )
    folded = ("device", "reason")

    def build(self, facility: Facility) -> None:
        """Offer vessels and aids."""
        super().build(facility)
        self.fields["into"] = forms.ModelChoiceField(places(facility, *TANKS))
        self.fields["aid"] = fields.LotChoice(
            fields.lots_in_stock(facility, ItemKind.FILTER_AID), required=False, label="Filter aid"
        )
        self.fields["aid_amount"] = fields.MeasureField(fields.MASSES, "Filter aid used")
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        self.fields["pressure"] = fields.MeasureField(fields.PRESSURES, "Highest pressure")
        self.order_fields(("at", "source", "taken", "emptied", "filter_kind", "into", "aid"))

    def sources(self) -> list[Source]:
        """Return the syrup and the filter aid."""
        found = super().sources()
        if self.cleaned_data.get("aid"):
            amount = self.cleaned_data["aid_amount"]
            role = "aid"
            found.append(FromLot(self.cleaned_data["aid"], amount, role))  # type: ignore[arg-type]
        return found

    def clean(self) -> dict[str, Any]:
        """Ask why syrup was not filtered, and how much aid went in."""
        cleaned = super().clean()
        if cleaned.get("filter_kind") == "not filtered" and not cleaned.get("reason"):
            self.add_error("reason", "Say why it was not filtered.")
        amount = cleaned.get("aid_amount") or NOT_MEASURED
        if cleaned.get("aid") and amount.value is None:
            self.add_error("aid_amount", "Enter how much filter aid went in.")
        return cleaned

    def record(self, context: Context) -> Step:
        """Record the filtration."""
        data = self.cleaned_data
        return syrup.record_mixture(
            context,
            kind=StepKind.FILTRATION,
            at=self.moment,
            sources=self.sources(),
            into=data["into"],
            item=the_item(self.facility, ItemKind.SYRUP),
            brix=self.density(),
            detail={
                "clarity": data["clarity"],
                "filter": data["filter_kind"],
                "pressure": f"{data['pressure'].text} {data['pressure'].unit}".strip(),
                "reason": data["reason"],
            },
        )


class DrumFillForm(fields.DensityFields, SourceFields):
    """The drums of one filling."""

    title = "Drum fill"
    caution = HOT_CAUTION
    transmittance = fields.MeasureField(["%Tc"], "Colour at 560 nm")
    folded = (
        "device", "seal_1",
        *(
            f"{name}_{number}"
            for number in LINES[1:]
            for name in ("drum", "amount", "fill_temperature", "seal")
        ),
    )  # fmt: skip

    def build(self, facility: Facility) -> None:
        """Offer the drums, a line for each."""
        super().build(facility)
        drums = places(facility, PlaceKind.DRUM)
        for number in LINES:
            label = "" if number == 1 else f" {number}"
            self.fields[f"drum_{number}"] = forms.ModelChoiceField(
                drums, label=f"Drum{label}", required=number == 1
            )
            self.fields[f"amount_{number}"] = fields.volume(facility, f"In the drum{label}")
            self.fields[f"fill_temperature_{number}"] = fields.temperature(
                facility, f"Fill temperature{label}"
            )
            self.fields[f"seal_{number}"] = forms.CharField(
                label=f"Seal{label}", required=False, max_length=40
            )
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        first = ("drum_1", "amount_1", "fill_temperature_1")
        self.order_fields(("at", "source", "taken", "emptied", *first, "brix"))

    def record(self, context: Context) -> Step:
        """Record the drums: all of them, or none."""
        data = self.cleaned_data
        names = ("drum", "amount", "fill_temperature", "seal")
        lines = [number for number in LINES if data.get(f"drum_{number}")]
        return syrup.record_drum_fill(
            context,
            at=self.moment,
            sources=self.sources(),
            drums=[syrup.Drum(*(data[f"{name}_{n}"] for name in names)) for n in lines],
            item=the_item(self.facility, ItemKind.SYRUP),
            brix=self.density(),
            transmittance=data["transmittance"],
        )


class SaleForm(RecordForm):
    """Goods out."""

    title = "Sale"
    document = forms.CharField(label="Invoice or slip", required=False, max_length=80)
    address = forms.CharField(label="Delivered to", required=False, max_length=200)
    folded = (
        "address", "carrier",
        *(f"{name}_{number}" for number in LINES[1:] for name in ("lot", "quantity")),
    )  # fmt: skip

    def build(self, facility: Facility) -> None:
        """Offer released goods and customers, a line for each lot."""
        goods = fields.lots_in_stock(facility, ItemKind.PACKED, ItemKind.SYRUP, released=True)
        for number in LINES:
            label = "" if number == 1 else f" {number}"
            self.fields[f"lot_{number}"] = fields.LotChoice(
                goods, label=f"Lot{label}", required=number == 1
            )
            self.fields[f"quantity_{number}"] = fields.MeasureField(
                ["pieces", *fields.MASSES], f"Quantity{label}"
            )
        partners = Partner.objects.filter(facility=facility).order_by("name")
        self.fields["customer"] = forms.ModelChoiceField(
            partners.filter(kind=PartnerKind.CUSTOMER),
            required=False,
            empty_label="Over the counter",
        )
        self.fields["carrier"] = forms.ModelChoiceField(
            partners.filter(kind=PartnerKind.CARRIER), required=False
        )
        self.order_fields(("at", "lot_1", "quantity_1", "customer", "document"))

    def record(self, context: Context) -> Step:
        """Record the sale: all of its lines, or none."""
        data = self.cleaned_data
        return goods_out.record_sale(
            context,
            at=self.moment,
            sold=[
                FromLot(data[f"lot_{number}"], data[f"quantity_{number}"])
                for number in LINES
                if data.get(f"lot_{number}")
            ],
            customer=data["customer"],
            carrier=data["carrier"],
            document=data["document"],
            address=data["address"],
        )


class ReceivingForm(fields.DensityFields, RecordForm):
    """A delivery of one lot."""

    title = "Receiving"
    supplier_code = forms.CharField(label="Supplier's lot code", required=False, max_length=60)
    document = forms.CharField(label="Delivery slip", required=False, max_length=80)
    packages = forms.CharField(label="Packages", required=False, max_length=80)
    condition = forms.CharField(label="Condition", required=False, max_length=120)
    statement = forms.CharField(
        label="Allergen and food-grade statement", required=False, max_length=200
    )
    decision = forms.ChoiceField(choices=[(one, one) for one in receiving.DECISIONS])
    decision_reason = forms.CharField(label="If not accepted, why", required=False, max_length=200)
    folded = ("brix", "device", "sample_temperature", "packages", "condition")

    def build(self, facility: Facility) -> None:
        """Offer suppliers, items and places."""
        self.fields["supplier"] = forms.ModelChoiceField(
            Partner.objects.filter(facility=facility, kind=PartnerKind.SUPPLIER).order_by("name")
        )
        self.fields["item"] = forms.ModelChoiceField(
            items(facility, ItemKind.SYRUP)
            .model.objects.filter(facility=facility, active=True)
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
            "supplier", "item", "amount", "place", "supplier_code", "decision",
            "decision_reason", "document", "packages", "condition", "statement",
        )  # fmt: skip
        return receiving.record_receiving(
            context, at=self.moment, brix=self.density(), **{name: data[name] for name in names}
        )


class CleaningForm(RecordForm):
    """A clean break of a vessel."""

    title = "Cleaning"
    caution = (
        "Cleaning chemicals burn skin and lungs. Never mix them; follow the label; rinse until "
        "nothing of them is left."
    )
    break_kind = forms.ChoiceField(
        label="What was done", choices=[(one, one) for one in upkeep.BREAKS]
    )
    strength = forms.CharField(required=False, max_length=60)
    verified_by = forms.CharField(label="Verified by", required=False, max_length=80)

    def build(self, facility: Facility) -> None:
        """Offer vessels and agents."""
        kinds = [kind for kind in PlaceKind if kind not in (PlaceKind.WOODS, PlaceKind.ROOM)]
        self.fields["vessel"] = forms.ModelChoiceField(places(facility, *kinds))
        self.fields["agent"] = fields.LotChoice(
            fields.lots_in_stock(facility, ItemKind.CLEANER), required=False
        )
        self.order_fields(("at", "vessel", "break_kind", "agent", "strength"))

    def record(self, context: Context) -> Step:
        """Record the cleaning."""
        data = self.cleaned_data
        names = ("vessel", "break_kind", "agent", "strength", "verified_by")
        return upkeep.record_cleaning(
            context, at=self.moment, **{name: data[name] for name in names}
        )

"""Forms of the sap side: collection, concentration and the whole boil."""

from typing import Any

from django import forms

from lots.models import Facility, Item, ItemKind, Place, PlaceKind, Step
from lots.recording import boil, sap
from lots.recording._sources import FromVessel
from lots.recording.context import Context
from lots.recording.errors import RecordingError

from . import fields
from .base import LocalDateTimeInput, RecordForm

EVAPORATOR_CAUTION = (
    "Syrup at the draw-off burns at once and sticks. Gloves, sleeves, and nobody behind you."
)
PRESSURE_CAUTION = "RO pumps run at pressure that injects water under skin. Stop before opening."


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


TANKS = (PlaceKind.TANK, PlaceKind.BATCH_TANK, PlaceKind.CANNER, PlaceKind.TOTE, PlaceKind.DRUM)


class CollectionForm(fields.DensityFields, RecordForm):
    """One round of sap."""

    title = "Sap in"
    field_order = ("at", "woods", "tank", "amount", "brix", "device", "sample_temperature")
    not_measured_reason = forms.CharField(
        label="Not measured because", required=False, max_length=200
    )
    people = forms.CharField(label="People", required=False, max_length=200)
    note = forms.CharField(required=False, widget=forms.Textarea(attrs={"rows": 2}))
    folded = ("device", "not_measured_reason", "people", "note")

    def build(self, facility: Facility) -> None:
        """Offer this facility's woods sections and tanks."""
        self.fields["woods"] = forms.ModelChoiceField(places(facility, PlaceKind.WOODS))
        self.fields["tank"] = forms.ModelChoiceField(places(facility, PlaceKind.TANK))
        self.fields["amount"] = fields.volume(facility, "Sap")
        self.fields["sample_temperature"] = fields.temperature(facility, "Sap temperature")
        self.order_fields(self.field_order)

    def record(self, context: Context) -> Step:
        """Record the round."""
        data = self.cleaned_data
        return sap.record_collection(
            context,
            at=self.moment,
            woods=data["woods"],
            tank=data["tank"],
            item=the_item(self.facility, ItemKind.SAP),
            amount=data["amount"],
            not_measured_reason=data["not_measured_reason"],
            brix=self.density(),
            temperature=data["sample_temperature"],
            note=data["note"],
            people=data["people"],
        )


class ConcentrationForm(fields.DensityFields, RecordForm):
    """One RO run."""

    title = "Concentrate"
    caution = PRESSURE_CAUTION
    field_order = ("at", "ended_at", "machine", "source", "taken", "into", "amount", "brix")
    ended_at = forms.DateTimeField(label="Ended", widget=LocalDateTimeInput())
    emptied = forms.BooleanField(label="The source tank is empty", required=False)
    note = forms.CharField(required=False, widget=forms.Textarea(attrs={"rows": 2}))
    folded = ("device", "permeate", "pressure", "note")

    def build(self, facility: Facility) -> None:
        """Offer the machines and tanks."""
        self.fields["machine"] = forms.ModelChoiceField(places(facility, PlaceKind.RO))
        self.fields["source"] = forms.ModelChoiceField(
            places(facility, PlaceKind.TANK), label="From tank"
        )
        self.fields["taken"] = fields.volume(facility, "Sap taken (empty: all)")
        self.fields["into"] = forms.ModelChoiceField(
            places(facility, PlaceKind.TANK), label="Concentrate into"
        )
        self.fields["amount"] = fields.volume(facility, "Concentrate")
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        self.fields["permeate"] = fields.volume(facility, "Permeate")
        self.fields["pressure"] = fields.MeasureField(fields.PRESSURES, "Feed pressure")
        self.order_fields(self.field_order)

    def record(self, context: Context) -> Step:
        """Record the run."""
        data = self.cleaned_data
        source = FromVessel(data["source"], data["taken"], data["emptied"])
        return sap.record_concentration(
            context,
            at=self.moment,
            ended_at=data["ended_at"].replace(tzinfo=self.moment.tzinfo),
            machine=data["machine"],
            sources=[source],
            into=data["into"],
            item=the_item(self.facility, ItemKind.CONCENTRATE),
            amount=data["amount"],
            brix=self.density(),
            permeate=data["permeate"],
            pressure=data["pressure"],
            note=data["note"],
        )


class BoilForm(RecordForm):
    """Lighting the fire."""

    title = "Boil"
    verb = "Open the boil"
    caution = EVAPORATOR_CAUTION
    since_last_run = forms.ChoiceField(
        label="Since the last boil the pans were",
        choices=[
            ("left as they were", "left as they were"),
            ("emptied", "emptied"),
            ("rinsed", "rinsed"),
            ("washed", "washed"),
        ],
    )
    people = forms.CharField(label="People", required=False, max_length=200)

    def build(self, facility: Facility) -> None:
        """Offer the evaporators."""
        self.fields["evaporator"] = forms.ModelChoiceField(places(facility, PlaceKind.EVAPORATOR))
        self.fields["water_boiling"] = fields.temperature(facility, "Water boils at, this morning")
        self.order_fields(("at", "evaporator", "water_boiling", "since_last_run", "people"))

    def record(self, context: Context) -> Step:
        """Open the boil."""
        data = self.cleaned_data
        return boil.open_boil(
            context,
            at=self.moment,
            evaporator=data["evaporator"],
            water_boiling=data["water_boiling"],
            since_last_run=data["since_last_run"],
            people=data["people"],
        )


class FeedForm(RecordForm):
    """Feeding a running boil."""

    title = "Feed"
    verb = "Record feed"
    emptied = forms.BooleanField(label="The tank is empty", required=False)

    def build(self, facility: Facility) -> None:
        """Offer the tanks."""
        self.fields["source"] = forms.ModelChoiceField(
            places(facility, PlaceKind.TANK), label="From tank"
        )
        self.fields["taken"] = fields.volume(facility, "Amount (empty: all)")

    def record_on(self, context: Context, step: Step) -> Step:
        """Record the feed."""
        data = self.cleaned_data
        source = FromVessel(data["source"], data["taken"], data["emptied"])
        return boil.feed_boil(context, boil=step, at=self.moment, sources=[source])


class DrawOffForm(fields.DensityFields, RecordForm):
    """Letting syrup out of the pan."""

    title = "Draw-off"
    verb = "Record draw-off"
    caution = EVAPORATOR_CAUTION
    folded = ("device",)

    def build(self, facility: Facility) -> None:
        """Offer the receiving vessels."""
        self.fields["into"] = forms.ModelChoiceField(places(facility, *TANKS))
        self.fields["amount"] = fields.volume(facility, "Syrup")
        self.fields["temperature"] = fields.temperature(facility, "Pan temperature")
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        self.order_fields(("at", "amount", "brix", "sample_temperature", "into", "temperature"))

    def record_on(self, context: Context, step: Step) -> Step:
        """Record the draw-off."""
        data = self.cleaned_data
        draw = boil.DrawOff(
            self.moment, data["into"], data["amount"], self.density(), data["temperature"]
        )
        item = the_item(self.facility, ItemKind.SYRUP)
        boil.draw_off(context, boil=step, item=item, draw=draw)
        return step


class CloseBoilForm(fields.DensityFields, RecordForm):
    """Letting the fire out."""

    title = "Close the boil"
    verb = "Close the boil"
    emptied = forms.BooleanField(label="The pans were emptied", required=False)
    folded = ("device", "sample_temperature")

    def build(self, facility: Facility) -> None:
        """Ask what stays in the pans."""
        self.fields["stays"] = fields.volume(facility, "Stays in the pans (empty: not measured)")
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        self.order_fields(("at", "stays", "brix", "emptied"))

    def record_on(self, context: Context, step: Step) -> Step:
        """Close it."""
        data = self.cleaned_data
        return boil.close_boil(
            context,
            boil=step,
            at=self.moment,
            contents=the_item(self.facility, ItemKind.CONTENTS),
            stays=data["stays"],
            brix=self.density(),
            emptied=data["emptied"],
        )

"""Forms of the sap side: collection and concentration."""

from django import forms

from lots.models import Facility, ItemKind, PlaceKind, Step, StepKind
from lots.recording import sap
from lots.recording._sources import FromVessel
from lots.recording.context import Context

from . import fields, last
from .base import LocalDateTimeField, RecordForm
from .choices import places, the_item

PRESSURE_CAUTION = "RO pumps run at pressure that injects water under skin. Stop before opening."


class CollectionForm(fields.DensityFields, RecordForm):
    """One round of sap."""

    title = "Sap in"
    kind = StepKind.COLLECTION
    same = {"woods": last.place, "tank": last.put_in}
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
    kind = StepKind.CONCENTRATION
    same = {"machine": last.place, "source": last.vessel(), "into": last.put_in}
    caution = PRESSURE_CAUTION
    field_order = ("at", "ended_at", "machine", "source", "taken", "into", "amount", "brix")
    rows = (("source", "taken"),)
    ended_at = LocalDateTimeField(label="Ended")
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
            ended_at=self.moment_of("ended_at"),
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

"""Forms of a running boil: lit, fed, drawn off, put back, and let out."""

from typing import Any

from django import forms

from lots.models import Facility, ItemKind, Lot, LotState, PlaceKind, Step, StepKind
from lots.recording import boil
from lots.recording._sources import FromVessel, Source
from lots.recording.context import Context

from . import fields, last
from .aids import AidFields
from .base import RecordForm
from .choices import TANKS, places, the_item

EVAPORATOR_CAUTION = (
    "Syrup at the draw-off burns at once and sticks. Gloves, sleeves, and nobody behind you."
)
SINCE_LAST_BOIL = [(one, one) for one in ("left as they were", "emptied", "rinsed", "washed")]
DEFOAMER = ("defoamer", ItemKind.DEFOAMER, "Defoamer", ("mL", "fl oz", "g", "kg", "lb", "pieces"))


def pans_were() -> forms.ChoiceField:
    """Return the one tap that says what was done to the pans."""
    return forms.ChoiceField(label="Since the last boil the pans were", choices=SINCE_LAST_BOIL)


class BoilForm(RecordForm):
    """Lighting the fire."""

    title = "Boil"
    kind = StepKind.BOIL
    same = {"evaporator": last.place}
    verb = "Open the boil"
    caution = EVAPORATOR_CAUTION
    instead = ("whole-boil", "Record a whole boil afterwards")
    since_last_run = pans_were()
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


class FeedForm(AidFields):
    """Feeding a running boil, its defoamer included."""

    title = "Feed"
    kind = StepKind.BOIL
    same = {"source": last.fed_from}
    verb = "Record feed"
    aids = (DEFOAMER,)
    rows = (("source", "taken"), ("defoamer", "defoamer_amount"))
    groups = (("Defoamer", ("defoamer", "defoamer_amount"), True),)
    emptied = forms.BooleanField(label="The tank is empty", required=False)

    def build(self, facility: Facility) -> None:
        """Offer the tanks and the defoamer."""
        self.fields["source"] = forms.ModelChoiceField(
            places(facility, PlaceKind.TANK), label="From tank", required=False
        )
        self.fields["taken"] = fields.volume(facility, "Amount (empty: all)")
        self.add_aids(facility)
        self.order_fields(("at", "source", "taken", "emptied"))

    def clean(self) -> dict[str, Any]:
        """Ask what went in: sap, defoamer or both."""
        cleaned = super().clean()
        known = {"source", "defoamer"} - set(self.errors)
        if len(known) == 2 and not (cleaned.get("source") or cleaned.get("defoamer")):
            self.add_error("source", "Choose the tank, or under Defoamer the lot that went in.")
        return cleaned

    def record_on(self, context: Context, step: Step) -> Step:
        """Record the feed."""
        data = self.cleaned_data
        sources: list[Source] = []
        if data["source"]:
            sources.append(FromVessel(data["source"], data["taken"], data["emptied"]))
        sources += self.aid_sources()
        return boil.feed_boil(context, boil=step, at=self.moment, sources=sources)


class DrawOffForm(fields.DensityFields, RecordForm):
    """Letting syrup out of the pan."""

    title = "Draw-off"
    kind = StepKind.BOIL
    same = {"into": last.drawn_into}
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
        reading = fields.reading_of(data, at=self.moment)
        draw = boil.DrawOff(self.moment, data["into"], data["amount"], reading, data["temperature"])
        item = the_item(self.facility, ItemKind.SYRUP)
        boil.draw_off(context, boil=step, item=item, draw=draw)
        return step


class PutBackForm(RecordForm):
    """Putting this boil's own syrup back into the pan."""

    title = "Put back"
    verb = "Record put-back"
    caution = EVAPORATOR_CAUTION
    rows = (("lot", "amount"),)

    def build(self, facility: Facility) -> None:
        """Offer this boil's syrup that is still in its vessel."""
        own = Lot.objects.filter(facility=facility, made_by=self.step, item__kind=ItemKind.SYRUP)
        own = own.exclude(state=LotState.VOID).exclude(made=0)
        self.fields["lot"] = fields.LotChoice(
            own.select_related("item", "printed_code").order_by("made_at", "pk"),
            label="Syrup of this boil",
        )
        self.fields["amount"] = fields.volume(facility, "Amount (empty: all)")
        self.order_fields(("at", "lot", "amount"))

    def record_on(self, context: Context, step: Step) -> Step:
        """Record the put-back."""
        data = self.cleaned_data
        boil.put_back(context, boil=step, lot=data["lot"], at=self.moment, amount=data["amount"])
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

"""Forms of syrup between the pan and the jar: filtered, blended, moved, drummed, graded."""

from typing import Any

from django import forms

from lots.models import Facility, ItemKind, PlaceKind, ReadingKind, Step, StepKind
from lots.recording import syrup
from lots.recording._sources import FromVessel, Source
from lots.recording.context import Context
from lots.recording.measures import Observation, Typed, celsius

from . import fields, last
from .aids import AidFields
from .base import RecordForm
from .choices import HOT_CAUTION, STOCKED, TANKS, any_lot, places, the_item
from .sources import SourceFields

LINES = range(1, 7)  # drums of a filling: more are a second record


class FiltrationForm(fields.DensityFields, AidFields, SourceFields):
    """A press, flat or cone filter run."""

    title = "Filter"
    kind = StepKind.FILTRATION
    same = {
        "source": last.vessel(),
        "into": last.put_in,
        "filter_kind": last.detail("filter"),
        "aid": last.used(ItemKind.FILTER_AID),
        "paper": last.used(ItemKind.FILTER_PAPER),
    }
    caution = HOT_CAUTION
    aids = (
        ("aid", ItemKind.FILTER_AID, "Filter aid", fields.MASSES),
        ("paper", ItemKind.FILTER_PAPER, "Filter paper", ("pieces", *fields.MASSES)),
    )
    rows = (*SourceFields.rows, ("aid", "aid_amount"), ("paper", "paper_amount"))
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
        self.add_aids(facility)
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        self.fields["temperature"] = fields.temperature(facility, "Syrup temperature")
        self.fields["pressure"] = fields.MeasureField(fields.PRESSURES, "Highest pressure")
        self.order_fields(
            (
                "at", "source", "taken", "emptied", "filter_kind", "into", "temperature", "aid",
                "aid_amount", "paper", "paper_amount", "pressure", "clarity", "brix",
            )
        )  # fmt: skip

    def sources(self) -> list[Source]:
        """Return the syrup, the filter aid and the papers."""
        return [*super().sources(), *self.aid_sources()]

    def clean(self) -> dict[str, Any]:
        """Ask why syrup was not filtered."""
        cleaned = super().clean()
        if cleaned.get("filter_kind") == "not filtered" and not cleaned.get("reason"):
            self.add_error("reason", "Say why it was not filtered.")
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
            seen=temperature_seen(data["temperature"]),
            detail={
                "clarity": data["clarity"],
                "filter": data["filter_kind"],
                "pressure": f"{data['pressure'].text} {data['pressure'].unit}".strip(),
                "reason": data["reason"],
            },
        )


def temperature_seen(typed: Typed) -> list[Observation]:
    """Return a temperature as typed beside its °C, where one was typed."""
    degrees = celsius(typed)
    if degrees is None:
        return []
    kind = ReadingKind.TEMPERATURE
    return [Observation(kind, typed.text, typed.unit, f"{degrees:.4f}", "°C")]


class DrumFillForm(fields.DensityFields, SourceFields):
    """The drums of one filling."""

    title = "Drum fill"
    kind = StepKind.DRUM_FILL
    same = {"source": last.vessel()}
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


class MixtureForm(fields.DensityFields, RecordForm):
    """A blend, transfer or re-heat: up to three vessels into one."""

    caution = HOT_CAUTION
    kind: str = StepKind.BLEND
    same = {"source_1": last.vessel(), "into": last.put_in}
    sources_offered = 3
    rows = tuple((f"source_{number}", f"taken_{number}") for number in range(1, 4))
    note = forms.CharField(required=False, widget=forms.Textarea(attrs={"rows": 2}))
    folded = ("device", "sample_temperature", "note")

    def build(self, facility: Facility) -> None:
        """Offer the vessels."""
        for number in range(1, self.sources_offered + 1):
            self.fields[f"source_{number}"] = forms.ModelChoiceField(
                places(facility, *TANKS),
                label=f"From vessel {number}",
                required=number == 1,
            )
            self.fields[f"taken_{number}"] = fields.volume(facility, f"Taken {number} (empty: all)")
        self.fields["into"] = forms.ModelChoiceField(places(facility, *TANKS))
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")

    def sources(self) -> list[Source]:
        """Return what was drawn."""
        data = self.cleaned_data
        numbers = range(1, self.sources_offered + 1)
        return [
            FromVessel(data[f"source_{n}"], data[f"taken_{n}"])
            for n in numbers
            if data.get(f"source_{n}")
        ]

    def record(self, context: Context) -> Step:
        """Record the mixture."""
        data = self.cleaned_data
        return syrup.record_mixture(
            context,
            kind=self.kind,
            at=self.moment,
            sources=self.sources(),
            into=data["into"],
            item=the_item(self.facility, ItemKind.SYRUP),
            brix=self.density(),
            note=data["note"],
        )


class BlendForm(MixtureForm):
    """Several vessels into one."""

    title = "Blend"


class TransferForm(MixtureForm):
    """One vessel into another, the canner included."""

    title = "Transfer"
    kind = StepKind.TRANSFER
    sources_offered = 1


class ReheatForm(MixtureForm):
    """Syrup heated again before filling; its earlier grade readings support no label."""

    title = "Re-heat"
    kind = StepKind.REHEAT
    sources_offered = 1


class GradeForm(fields.DensityFields, RecordForm):
    """A grading of one lot."""

    title = "Grade reading"
    transmittance = fields.MeasureField(["%Tc"], "Colour at 560 nm, glycerol 100")
    flavour = forms.CharField(required=False, max_length=40)
    clarity = forms.ChoiceField(
        choices=[("", "not judged"), ("clear", "clear"), ("hazy", "hazy"), ("cloudy", "cloudy")],
        required=False,
    )
    defect = forms.CharField(label="Defect", required=False, max_length=40)
    intensity = forms.ChoiceField(
        choices=[("", "none"), ("trace", "trace"), ("slight", "slight"), ("strong", "strong")],
        required=False,
    )
    grader = forms.CharField(required=False, max_length=80)
    folded = ("device", "sample_temperature", "defect", "intensity")

    def build(self, facility: Facility) -> None:
        """Offer syrup and packed lots."""
        self.fields["lot"] = any_lot(facility, *STOCKED)
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        self.order_fields(("at", "lot", "transmittance", "brix", "flavour", "clarity", "grader"))

    def record(self, context: Context) -> Step:
        """Record the grading."""
        data = self.cleaned_data
        found = [(data["defect"], data["intensity"] or "trace")] if data["defect"] else []
        return syrup.record_grade_reading(
            context,
            at=self.moment,
            lot=data["lot"],
            transmittance=data["transmittance"],
            brix=self.density(),
            flavour=data["flavour"],
            clarity=data["clarity"],
            defects=found,
            grader=data["grader"],
        )

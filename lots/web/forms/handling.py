"""Forms of handling: blend, transfer, re-heat, grade, move, split, returns, removals, counts."""

from django import forms

from lots.models import Draw, DrawRole, Facility, ItemKind, Lot, Place, PlaceKind, Step, StepKind
from lots.recording import goods_out, receiving, syrup, upkeep
from lots.recording._sources import FromVessel, Source
from lots.recording.context import Context
from lots.recording.errors import RecordingError
from lots.recording.measures import NOT_MEASURED

from . import fields
from .base import RecordForm
from .sap import TANKS, items, places, the_item
from .syrup import HOT_CAUTION

STOCKED = (ItemKind.PACKED, ItemKind.SYRUP)
AMOUNTS = ("pieces", "US gal", "imp gal", "qt", "pt", "L", "lb", "kg")


def standing(facility: Facility) -> forms.ModelChoiceField:
    """Return the choice of a place that goods can stand in."""
    rows = Place.objects.filter(facility=facility, active=True).exclude(kind=PlaceKind.WOODS)
    return forms.ModelChoiceField(rows.order_by("name"))


def any_lot(facility: Facility, *kinds: str) -> fields.LotChoice:
    """Return the choice of a lot in stock."""
    return fields.LotChoice(fields.lots_in_stock(facility, *(kinds or tuple(ItemKind))))


class MixtureForm(fields.DensityFields, RecordForm):
    """A blend, transfer or re-heat: up to three vessels into one."""

    caution = HOT_CAUTION
    kind = StepKind.BLEND
    sources_offered = 3
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


class MoveForm(RecordForm):
    """Goods from one place to another."""

    title = "Move"
    amount = fields.MeasureField(AMOUNTS, "Amount (empty: all that stands there)")

    def build(self, facility: Facility) -> None:
        """Offer lots and places."""
        self.fields["lot"] = any_lot(facility)
        self.fields["come_from"] = standing(facility)
        self.fields["come_from"].label = "From"
        self.fields["to"] = standing(facility)

    def record(self, context: Context) -> Step:
        """Record the move."""
        data = self.cleaned_data
        names = ("lot", "come_from", "to", "amount")
        return upkeep.record_move(context, at=self.moment, **{name: data[name] for name in names})


class SplitForm(RecordForm):
    """Part of a lot set apart; it keeps the printed code."""

    title = "Split"
    amount = fields.MeasureField(AMOUNTS, "Amount", required=True)
    reason = forms.CharField(max_length=200)
    held = forms.BooleanField(label="Hold the part split off", required=False)

    def build(self, facility: Facility) -> None:
        """Offer lots."""
        self.fields["lot"] = any_lot(facility, *STOCKED)

    def record(self, context: Context) -> Step:
        """Record the split."""
        data = self.cleaned_data
        names = ("lot", "amount", "reason", "held")
        return upkeep.record_split(context, at=self.moment, **{name: data[name] for name in names})


class RemovalForm(RecordForm):
    """Goods that leave without a sale."""

    title = "Removal"
    amount = fields.MeasureField(AMOUNTS, "Amount (empty: all)")
    reason = forms.ChoiceField(choices=[(one, one) for one in goods_out.REMOVALS])
    note = forms.CharField(required=False, widget=forms.Textarea(attrs={"rows": 2}))

    def build(self, facility: Facility) -> None:
        """Offer lots."""
        self.fields["lot"] = any_lot(facility)

    def record(self, context: Context) -> Step:
        """Record the removal."""
        data = self.cleaned_data
        names = ("lot", "amount", "reason", "note")
        return goods_out.record_removal(
            context, at=self.moment, **{name: data[name] for name in names}
        )


class ReworkForm(RecordForm):
    """Packed goods opened back to bulk."""

    title = "Rework"
    caution = HOT_CAUTION
    amount = fields.MeasureField(["pieces"], "Pieces (empty: all)")

    def build(self, facility: Facility) -> None:
        """Offer packed lots and vessels."""
        self.fields["lot"] = any_lot(facility, ItemKind.PACKED)
        self.fields["into"] = forms.ModelChoiceField(places(facility, *TANKS))

    def record(self, context: Context) -> Step:
        """Record the rework."""
        data = self.cleaned_data
        return upkeep.record_rework(
            context,
            at=self.moment,
            lot=data["lot"],
            amount=data["amount"],
            into=data["into"],
            item=the_item(self.facility, ItemKind.SYRUP),
        )


class CountForm(RecordForm):
    """A count that sets the book."""

    title = "Count"
    counted = fields.MeasureField(AMOUNTS, "Counted", required=True)
    reason = forms.CharField(max_length=200)

    def build(self, facility: Facility) -> None:
        """Offer lots and places."""
        self.fields["lot"] = any_lot(facility)
        self.fields["place"] = standing(facility)

    def record(self, context: Context) -> Step:
        """Record the count."""
        data = self.cleaned_data
        names = ("lot", "place", "counted", "reason")
        return upkeep.record_count(context, at=self.moment, **{name: data[name] for name in names})


class CustomerReturnForm(RecordForm):
    """Goods back from a customer, on hold until decided."""

    title = "Customer return"
    amount = fields.MeasureField(["pieces", "lb", "kg"], "Came back", required=True)
    reason = forms.CharField(max_length=200)

    def build(self, facility: Facility) -> None:
        """Offer the sale lines."""
        lines = Draw.objects.filter(facility=facility, role=DrawRole.SHIPPED, ended_at=None)
        self.fields["line"] = SaleLine(
            lines.select_related("lot__item", "step__partner").order_by("-step__started_at"),
            label="Sold as",
        )
        self.fields["into"] = standing(facility)
        self.order_fields(("at", "line", "amount", "into", "reason"))

    def record(self, context: Context) -> Step:
        """Record the return."""
        data = self.cleaned_data
        return goods_out.record_customer_return(
            context,
            at=self.moment,
            sale=data["line"].step,
            lot=data["line"].lot,
            amount=data["amount"],
            into=data["into"],
            reason=data["reason"],
        )


class SaleLine(forms.ModelChoiceField):
    """One line of a sale."""

    def label_from_instance(self, obj: Draw) -> str:
        """Return lot, customer, day and quantity."""
        name = obj.step.partner or "over the counter"
        return f"{obj.lot.code} {obj.lot.item}, {name}, {obj.step.started_at:%Y-%m-%d}"


class SupplierReturnForm(RecordForm):
    """Goods back to their supplier; held and rejected goods may go."""

    title = "Return to supplier"
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


class OpeningStockForm(fields.DensityFields, RecordForm):
    """Stock on hand when the book begins."""

    title = "Opening stock"
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

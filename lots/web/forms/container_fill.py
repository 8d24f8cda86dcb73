"""Forms of filling containers: a whole run afterwards, or opened and finished."""

from django import forms

from lots.models import DrawRole, Facility, Item, ItemKind, PrintedCode, Step, StepKind
from lots.recording import container_fill
from lots.recording.context import Context

from . import fields, last
from .base import RecordForm
from .choices import HOT_CAUTION, STORES, items, places
from .second_product import PACKAGING, SecondProduct
from .sources import SourceFields


class FillFields(fields.DensityFields, SourceFields):
    """What a run says of itself, whole or at its end: what it drew, used and made."""

    caution = HOT_CAUTION
    vessels = 3
    kind = StepKind.CONTAINER_FILL
    same = {
        "source": last.vessel(),
        "into": last.put_in,
        **{kind.value: last.used(kind, DrawRole.PACKAGING) for kind in PACKAGING},
    }
    made = forms.IntegerField(label="Filled", min_value=0)
    rejected = forms.IntegerField(label="Rejected", min_value=0, initial=0, required=False)
    best_before = forms.DateField(
        label="Best before", required=False, widget=forms.DateInput(attrs={"type": "date"})
    )
    transmittance = fields.MeasureField(["%Tc"], "Colour at 560 nm")
    net_sample = forms.CharField(
        label="Net-content sample",
        required=False,
        max_length=200,
        help_text="What was weighed or measured, such as: 3 bottles, 1262, 1260 and 1263 g net.",
    )
    folded = ("device", "rejected", "printed_code", "best_before", *PACKAGING, "people")

    def build(self, facility: Facility) -> None:
        """Offer stock and stores."""
        super().build(facility)
        self.fields["into"] = forms.ModelChoiceField(places(facility, *STORES), label="Stored in")
        for number in ("1", "2", "3"):
            self.fields[f"fill_{number}"] = fields.temperature(
                facility, f"Fill temperature {number}"
            )
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        for kind in PACKAGING:
            self.fields[kind.value] = fields.LotChoice(
                fields.lots_in_stock(facility, kind), required=False, label=f"{kind.label} lot"
            )
        self.order_fields(
            (
                "at", "product", "made", "source", "taken", "emptied", "fill_1", "fill_2",
                "fill_3", "brix", "sample_temperature", "transmittance", "net_sample", "into",
            )
        )  # fmt: skip

    def run(self, product: Item) -> container_fill.Run:
        """Return what the form says of the run."""
        data = self.cleaned_data
        return container_fill.Run(
            product=product,
            made=data["made"],
            rejected=data["rejected"] or 0,
            into=data["into"],
            printed_code=data.get("printed_code", ""),
            best_before=data["best_before"],
            fill_temperatures=[data[f"fill_{number}"] for number in ("1", "2", "3")],
            brix=self.density(),
            transmittance=data["transmittance"],
            packaging=[container_fill.Packaging(data[kind]) for kind in PACKAGING if data[kind]],
            net_sample=data["net_sample"],
        )


class ContainerFillForm(SecondProduct, FillFields):
    """A whole run of one product, or of two out of the same vessels."""

    title = "Container fill"
    same = {"product": last.product, **FillFields.same}
    verb = "Record fill"
    printed_code = forms.CharField(label="Code (empty: the next)", required=False, max_length=20)
    people = forms.CharField(label="People", required=False, max_length=200)
    groups = (*FillFields.groups, *SecondProduct.groups)

    def build(self, facility: Facility) -> None:
        """Offer products."""
        self.fields["product"] = forms.ModelChoiceField(items(facility, ItemKind.PACKED))
        super().build(facility)
        self.add_second(facility)

    def record(self, context: Context) -> Step:
        """Record the run: one product or two, in one transaction."""
        data = self.cleaned_data
        first = self.run(data["product"])
        steps = container_fill.record_container_fills(
            context, at=self.moment, runs=self.runs(first, self.sources()), people=data["people"]
        )
        return steps[0]


class OpenFillForm(RecordForm):
    """The start of a run: its code is reserved, so that the coder can be set."""

    title = "Open a fill"
    kind = StepKind.CONTAINER_FILL
    same = {"product": last.product}
    verb = "Open and reserve the code"
    caution = HOT_CAUTION
    printed_code = forms.CharField(label="Code (empty: the next)", required=False, max_length=20)
    people = forms.CharField(label="People", required=False, max_length=200)
    since_last_run = forms.ChoiceField(
        label="Since the last run the canner was",
        choices=[(one, one) for one in ("left as it was", "emptied", "rinsed", "washed")],
    )
    folded = ("people",)

    def build(self, facility: Facility) -> None:
        """Offer the products."""
        self.fields["product"] = forms.ModelChoiceField(items(facility, ItemKind.PACKED))
        self.order_fields(("at", "product", "printed_code", "since_last_run"))

    def record(self, context: Context) -> Step:
        """Open the run."""
        data = self.cleaned_data
        names = ("product", "printed_code", "since_last_run", "people")
        step, _ = container_fill.open_container_fill(
            context, at=self.moment, **{name: data[name] for name in names}
        )
        return step


class FinishFillForm(FillFields):
    """The end of a run that was opened; the opening said what it makes."""

    title = "Finish the fill"
    verb = "Finish the fill"

    def record_on(self, context: Context, step: Step) -> Step:
        """Close the run."""
        code = PrintedCode.objects.get(uuid=step.detail["printed_code"])
        container_fill.close_container_fill(
            context,
            step=step,
            ended_at=self.moment,
            sources=self.sources(),
            run=self.run(code.item),
        )
        return step

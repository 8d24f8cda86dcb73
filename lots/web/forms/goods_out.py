"""Forms of what goes out and what comes back: sales, returns, removals."""

from django import forms

from lots.models import Draw, DrawRole, Facility, ItemKind, Partner, PartnerKind, Step, StepKind
from lots.recording import goods_out
from lots.recording._sources import FromLot
from lots.recording.context import Context

from . import fields, last
from .base import RecordForm
from .choices import AMOUNTS, any_lot, standing

LINES = range(1, 7)  # lots of a sale: more are a second record


class SaleForm(RecordForm):
    """Goods out."""

    title = "Sale"
    rows = tuple((f"lot_{number}", f"quantity_{number}") for number in LINES)
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


class CustomerReturnForm(RecordForm):
    """Goods back from a customer, on hold until decided."""

    title = "Customer return"
    kind = StepKind.CUSTOMER_RETURN
    same = {"into": last.place}
    rows = (("line", "amount"),)
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


class RemovalForm(RecordForm):
    """Goods that leave without a sale."""

    title = "Removal"
    rows = (("lot", "amount"),)
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

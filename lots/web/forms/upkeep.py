"""Forms of upkeep: moves, splits, rework, counts and cleaning."""

from django import forms

from lots.models import Facility, ItemKind, PlaceKind, Step, StepKind
from lots.recording import upkeep
from lots.recording.context import Context

from . import fields, last
from .base import RecordForm
from .choices import AMOUNTS, HOT_CAUTION, STOCKED, TANKS, any_lot, places, standing, the_item


class MoveForm(RecordForm):
    """Goods from one place to another."""

    title = "Move"
    kind = StepKind.MOVE
    same = {"come_from": last.come_from, "to": last.place}
    rows = (("lot", "amount"),)
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
    rows = (("lot", "amount"),)
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


class ReworkForm(RecordForm):
    """Packed goods opened back to bulk."""

    title = "Rework"
    kind = StepKind.REWORK
    same = {"into": last.place}
    rows = (("lot", "amount"),)
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
    kind = StepKind.ADJUSTMENT
    same = {"place": last.place}
    rows = (("lot", "counted"),)
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

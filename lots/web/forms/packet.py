"""The form that asks for a packet: codes, or days."""

from typing import Any

from django import forms

from lots.models import Facility, Lot
from lots.tracing import find

DAY = forms.DateInput(attrs={"type": "date"})


class PacketForm(forms.Form):
    """Lots by code, and the packed lots of some days."""

    codes = forms.CharField(
        label="Lot codes, separated by spaces or commas", required=False, max_length=400
    )
    first = forms.DateField(label="Or packed from", required=False, widget=DAY)
    last = forms.DateField(label="to", required=False, widget=DAY)
    form = forms.ChoiceField(
        label="As", choices=[("pdf", "PDF"), ("xlsx", "spreadsheet"), ("html", "print view")]
    )

    def __init__(self, facility: Facility, *args: Any, **kwargs: Any) -> None:
        self.facility = facility
        super().__init__(*args, **kwargs)

    def clean(self) -> dict[str, Any]:
        """Find the lots; an unknown code is named."""
        data = super().clean() or {}
        lots: list[Lot] = []
        for code in data.get("codes", "").replace(",", " ").split():
            found = list(find.lots_by_code(self.facility, code))
            if not found:
                self.add_error("codes", f"No lot carries {code}.")
            lots += found
        if data.get("first"):
            lots += find.packed_between(
                self.facility, data["first"], data.get("last") or data["first"]
            )
        if not lots and not self.errors:
            self.add_error("codes", "Enter at least one code, or the days of packing.")
        data["lots"] = list(dict.fromkeys(lots))
        return data

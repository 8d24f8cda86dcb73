"""Processing aids in a form: the lot that went in (filter aid, paper, defoamer) and how much."""

from collections.abc import Sequence
from typing import Any

from lots.models import DrawRole, Facility
from lots.recording._sources import FromLot

from . import fields
from .base import RecordForm


class AidFields(RecordForm):
    """A form with processing aids: ``aids`` are (name, kind of item, label, units)."""

    aids: tuple[tuple[str, str, str, Sequence[str]], ...] = ()

    def add_aids(self, facility: Facility) -> None:
        """Offer the lots in stock of each aid, and its amount."""
        for name, kind, label, units in self.aids:
            self.fields[name] = fields.LotChoice(
                fields.lots_in_stock(facility, kind), required=False, label=f"{label} lot"
            )
            self.fields[f"{name}_amount"] = fields.MeasureField(units, f"{label} used")

    def clean(self) -> dict[str, Any]:
        """Ask how much of an aid went in, and which lot an amount is of."""
        cleaned = super().clean()
        for name, _, label, _ in self.aids:
            amount = cleaned.get(f"{name}_amount")
            typed = amount is not None and amount.value is not None
            if cleaned.get(name) and amount is not None and not typed:
                self.add_error(f"{name}_amount", f"Enter how much {label.lower()} went in.")
            if typed and not cleaned.get(name) and name not in self.errors:
                self.add_error(name, f"Choose which lot the {label.lower()} came from.")
        return cleaned

    def aid_sources(self) -> list[FromLot]:
        """Return the aids that went in."""
        data = self.cleaned_data
        return [
            FromLot(data[name], data[f"{name}_amount"], DrawRole.AID)
            for name, *_ in self.aids
            if data.get(name)
        ]

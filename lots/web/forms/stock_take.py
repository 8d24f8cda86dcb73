"""A stock-take: every lot standing in one place, each with what was counted."""

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal
from typing import Any

from django import forms
from django.db import transaction

from lots.models import Facility, Step, Stock, Unit
from lots.quantities import units
from lots.quantities.rounding import MILLIGRAMS_PER_KILOGRAM, brix_of, fixed, volume_of
from lots.recording import upkeep
from lots.recording.context import Context
from lots.recording.errors import RecordingError
from lots.recording.measures import VOLUMES, Typed
from lots.web.words import amount_words

from . import fields
from .base import RecordForm


class StockTakeForm(RecordForm):
    """The lots of one place; an empty count is none, and one as the book says changes nothing."""

    title = "Stock-take"
    verb = "Record the counts"
    reason = forms.CharField(max_length=200, initial="Stock-take")

    def __init__(
        self, facility: Facility, *args: Any, rows: Sequence[Stock] = (), **kwargs: Any
    ) -> None:
        self.counts = {f"counted_{row.lot.uuid.hex}": row for row in rows}
        super().__init__(facility, *args, **kwargs)

    def build(self, facility: Facility) -> None:
        """Ask a count of each lot."""
        masses = fields.ordered(fields.MASSES, facility.mass_unit)
        liquids = [*masses, *fields.ordered(fields.VOLUMES, facility.volume_unit)]
        for name, row in self.counts.items():
            lot = row.lot
            printed = f" · {lot.printed_code.text}" if lot.printed_code else ""
            if lot.item.unit == Unit.PIECE:
                offered = ["pieces"]
            else:
                offered = liquids if lot.item.is_liquid else masses
            self.fields[name] = fields.MeasureField(
                offered,
                f"{lot.code}{printed} · {lot.item.name}",
                help_text=f"By the book: {amount_words(lot, row.quantity)}",
            )
        self.order_fields(("at", *self.counts, "reason"))

    def clean(self) -> dict[str, Any]:
        """Refuse counts below nothing, half pieces, and a page without any count."""
        cleaned = super().clean()
        for name, row in self.counts.items():
            typed = cleaned.get(name)
            if typed is None or typed.value is None:
                continue
            if typed.value < 0:
                self.add_error(name, "A count cannot be below zero.")
            elif row.lot.item.unit == Unit.PIECE and typed.value != int(typed.value):
                self.add_error(name, "Count whole pieces.")
        if not self.errors and not self.counted():
            self.add_error(None, "Enter what was counted of at least one lot.")
        return cleaned

    def counted(self) -> list[str]:
        """Return the fields in which a count was typed."""
        data = self.cleaned_data
        return [name for name in self.counts if data.get(name) and data[name].value is not None]

    def changed(self) -> list[str]:
        """Return the fields whose count is another than the book's."""
        data = self.cleaned_data
        return [name for name in self.counted() if differs(self.counts[name], data[name])]

    def record_counts(self, context: Context) -> list[Step]:
        """Record each count that differs from the book: all of them, or none."""
        steps = []
        with transaction.atomic():
            for name in self.changed():
                row = self.counts[name]
                try:
                    step = upkeep.record_count(
                        context,
                        at=self.moment,
                        lot=row.lot,
                        place=row.place,
                        counted=self.cleaned_data[name],
                        reason=self.cleaned_data["reason"],
                    )
                except RecordingError as error:
                    error.field = error.field if error.field == "at" else name
                    raise
                steps.append(step)
                context = replace(context, client=None)
        return steps


def differs(row: Stock, typed: Typed) -> bool:
    """Whether a count is another than the book's, to the decimals it was typed with."""
    assert typed.value is not None  # noqa: S101 - only what was counted is compared
    places = max(0, -int(typed.value.as_tuple().exponent))
    return fixed(book_in(row, typed.unit), places) != fixed(typed.value, places)


def book_in(row: Stock, unit: str) -> Decimal:
    """Return what the book holds of a lot in a place, in a unit of the form."""
    if row.lot.item.unit == Unit.PIECE:
        return Decimal(row.quantity)
    if unit not in VOLUMES:
        return units.convert(Decimal(row.quantity) / MILLIGRAMS_PER_KILOGRAM, "kg", unit)
    lot, brix = row.lot, Decimal(0)
    if lot.remaining and lot.solids_remaining is not None:
        brix = brix_of(lot.remaining, lot.solids_remaining)
    return volume_of(row.quantity, brix, unit)

"""A second product of the same run: pints beside quarts, out of the same vessels."""

from collections.abc import Sequence
from dataclasses import replace
from datetime import datetime
from decimal import Decimal
from typing import Any

from django import forms

from lots.models import Facility, Item, ItemKind, Place
from lots.quantities import units
from lots.quantities.rounding import MILLIGRAMS_PER_KILOGRAM, share_out, whole
from lots.recording._sources import FromVessel, Source
from lots.recording._vessels import contents
from lots.recording.container_fill import Packaging, Run
from lots.recording.errors import RecordingError
from lots.recording.measures import Typed

from . import fields
from .base import RecordForm
from .choices import items

PACKAGING = (ItemKind.CONTAINER, ItemKind.CLOSURE, ItemKind.LABEL)
SECOND_FILLS = ("second_fill_1", "second_fill_2", "second_fill_3")
STEP = Decimal("0.0001")  # the finest amount a form takes


class SecondProduct(RecordForm):
    """A form whose run may fill a second product: the vessels' syrup is shared between the two.

    What was taken is shared by what each filled, rejects included: count × declared size. Density
    and colour are of the same syrup and stand for both; fill temperatures are each product's own.
    """

    groups = (
        (
            "Second product of this run",
            (
                "second_product", "second_made", "second_rejected", *SECOND_FILLS,
                "second_printed_code", "second_net_sample",
                *(f"second_{kind.value}" for kind in PACKAGING),
            ),
            True,
        ),
    )  # fmt: skip

    def add_second(self, facility: Facility) -> None:
        """Offer the second product."""
        self.fields["second_product"] = forms.ModelChoiceField(
            items(facility, ItemKind.PACKED),
            required=False,
            label="Second product",
            help_text="What was taken is shared by what each product filled. The density and "
            "colour above stand for both.",
        )
        self.fields["second_made"] = forms.IntegerField(
            label="Filled, second product", min_value=0, required=False
        )
        self.fields["second_rejected"] = forms.IntegerField(
            label="Rejected, second product", min_value=0, required=False
        )
        for number, name in enumerate(SECOND_FILLS, start=1):
            label = f"Fill temperature {number}, second product"
            self.fields[name] = fields.temperature(facility, label)
        self.fields["second_printed_code"] = forms.CharField(
            label="Code, second product (empty: the next)", required=False, max_length=20
        )
        self.fields["second_net_sample"] = forms.CharField(
            label="Net-content sample, second product", required=False, max_length=200
        )
        for kind in PACKAGING:
            self.fields[f"second_{kind.value}"] = fields.LotChoice(
                fields.lots_in_stock(facility, kind),
                required=False,
                label=f"{kind.label} lot, second product",
            )

    def clean(self) -> dict[str, Any]:
        """Ask what a second product still lacks."""
        cleaned = super().clean()
        second = cleaned.get("second_product")
        if second is None:
            if cleaned.get("second_made") and "second_product" not in self.errors:
                self.add_error("second_product", "Choose the second product.")
            return cleaned
        if cleaned.get("second_made") is None and "second_made" not in self.errors:
            self.add_error("second_made", "Enter how many of the second product were filled.")
        if second == cleaned.get("product"):
            self.add_error("second_product", "Choose another product: one product is one count.")
        for name in ("product", "second_product"):
            if cleaned.get(name) and not cleaned[name].size_value:
                self.add_error(name, f"Enter the size of {cleaned[name]} under Materials first.")
        return cleaned

    def runs(self, first: Run, sources: Sequence[Source]) -> list[tuple[Sequence[Source], Run]]:
        """Return the run, or the two runs with the sources shared between them."""
        data = self.cleaned_data
        if data.get("second_product") is None:
            return [(sources, first)]
        kinds = [f"second_{kind.value}" for kind in PACKAGING]
        second = replace(
            first,
            product=data["second_product"],
            made=data["second_made"],
            rejected=data["second_rejected"] or 0,
            printed_code=data["second_printed_code"],
            fill_temperatures=[data[name] for name in SECOND_FILLS],
            packaging=[Packaging(data[kind]) for kind in kinds if data[kind]],
            net_sample=data["second_net_sample"],
        )
        shares = [filled(first), filled(second)]
        if not all(shares):
            raise RecordingError("Enter how many were filled.", field="made")
        parts = [shared(source, shares, self.moment) for source in sources]
        return [([one for one, _ in parts], first), ([other for _, other in parts], second)]

    def beside(self, error: RecordingError) -> str | None:
        """Put a refusal of the second product's code beside that code."""
        second = self.cleaned_data.get("second_printed_code")
        if error.field == "printed_code" and second:
            product = str(self.cleaned_data.get("second_product"))
            if product in error.message or second in error.message:
                return "second_printed_code"
        return super().beside(error)


def filled(run: Run) -> int:
    """Return what a run filled by its declared size, rejects included, in whole microlitres."""
    product: Item = run.product
    each = units.convert(Decimal(product.size_value), product.size_unit, "mL") * 1000
    return whole(each * (run.made + run.rejected))


def shared(source: Source, shares: Sequence[int], at: datetime) -> tuple[Source, Source]:
    """Return a vessel's source in two: the first product's share, and the rest of it.

    Raises RecordingError where nothing was typed and what the vessel holds was not measured.
    """
    assert isinstance(source, FromVessel)  # noqa: S101 - a fill draws from vessels
    if source.amount.value is None:
        first = share_out(held(source.vessel, at), shares)[0]
        part = Typed(Decimal(first) / MILLIGRAMS_PER_KILOGRAM, "kg")
        return replace(source, amount=part, emptied=False), source
    everything = source.amount.value
    part = (everything * shares[0] / sum(shares)).quantize(STEP)
    return (
        replace(source, amount=Typed(part, source.amount.unit), emptied=False),
        replace(source, amount=Typed(everything - part, source.amount.unit)),
    )


def held(vessel: Place, at: datetime) -> int:
    """Return what a vessel held then by the book, in milligrams."""
    rows = contents(vessel, at)
    if any(row.lot.made is None for row in rows):
        raise RecordingError(
            f"What {vessel} holds was not measured: enter how much the run took.", field="taken"
        )
    if not rows:
        raise RecordingError(f"{vessel} is empty by the book.", field="vessel")
    return sum(row.quantity for row in rows)

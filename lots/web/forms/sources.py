"""Where a step takes from: one vessel or several, all of each or an amount."""

from django import forms

from lots.models import Facility
from lots.recording._sources import FromVessel, Source

from . import fields
from .base import RecordForm
from .choices import TANKS, places


class SourceFields(RecordForm):
    """Where the syrup comes from: up to so many vessels, all of each or an amount.

    The first vessel's fields are ``source``, ``taken`` and ``emptied``; the others end in their
    number.
    """

    vessels = 1
    rows = (("source", "taken"), ("source_2", "taken_2"), ("source_3", "taken_3"))
    groups = (
        (
            "Second and third vessel",
            ("source_2", "taken_2", "emptied_2", "source_3", "taken_3", "emptied_3"),
            True,
        ),
    )

    def build(self, facility: Facility) -> None:
        """Offer the vessels that hold something."""
        held = places(facility, *TANKS).filter(stock__isnull=False).distinct()
        for number in range(1, self.vessels + 1):
            end, words = ("", "") if number == 1 else (f"_{number}", f" {number}")
            self.fields[f"source{end}"] = forms.ModelChoiceField(
                held, label=f"From vessel{words}", required=number == 1
            )
            self.fields[f"taken{end}"] = fields.volume(
                facility, f"Amount taken{words} (empty: all)"
            )
            self.fields[f"emptied{end}"] = forms.BooleanField(
                label=f"Vessel{words} is empty now" if words else "The source is empty",
                required=False,
            )

    def sources(self) -> list[Source]:
        """Return what was drawn."""
        data = self.cleaned_data
        ends = ["" if number == 1 else f"_{number}" for number in range(1, self.vessels + 1)]
        return [
            FromVessel(data[f"source{end}"], data[f"taken{end}"], data[f"emptied{end}"])
            for end in ends
            if data.get(f"source{end}")
        ]

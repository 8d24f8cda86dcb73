"""The form of a whole boil, filled in afterwards: one record, all of it or none."""

from collections.abc import Iterator
from datetime import datetime, time, timedelta
from typing import Any

from django import forms

from lots.models import Facility, ItemKind, PlaceKind, Step, StepKind
from lots.recording import boil
from lots.recording._sources import FromVessel, Source
from lots.recording.context import Context
from lots.recording.errors import RecordingError
from lots.recording.measures import BAUME, BRIX

from . import fields, last
from .aids import AidFields
from .base import LocalDateTimeField
from .boil import DEFOAMER, EVAPORATOR_CAUTION, pans_were
from .choices import TANKS, places, the_item

SOURCES = range(1, 4)
DRAW_OFFS = range(1, 7)
PARTS = ("time", "draw", "density", "sample", "into")  # what one draw-off says
LONGEST = timedelta(hours=24)  # an hour without its day says when only within a day
DRAW_OFF_WORDS = "Enter the hour of this draw-off.", "Choose the vessel it went into."


class WholeBoilForm(fields.DensityFields, AidFields):
    """From fire lit to fire out: what it drew, its draw-offs, and what stays in the pans."""

    title = "Whole boil, afterwards"
    kind = StepKind.BOIL
    same = {
        "evaporator": last.place,
        "source_1": last.vessel(1),
        "into_1": last.drawn_into,
    }
    verb = "Record the boil"
    caution = EVAPORATOR_CAUTION
    instead = ("boil", "Open a boil that is about to run")
    aids = (DEFOAMER,)
    rows = (
        *((f"source_{number}", f"taken_{number}") for number in SOURCES),
        ("defoamer", "defoamer_amount"),
    )
    groups = (
        ("Second and third tank", ("source_2", "taken_2", "source_3", "taken_3"), True),
        ("Defoamer", ("defoamer", "defoamer_amount"), True),
        *(
            (f"Draw-off {number}", tuple(f"{part}_{number}" for part in PARTS), number > 2)
            for number in DRAW_OFFS
        ),
        ("What stays in the pans", ("stays", "brix", "sample_temperature", "emptied"), False),
    )
    folded = ("device", "water_boiling", "since_last_run", "people")
    ended_at = LocalDateTimeField(label="Fire out")
    since_last_run = pans_were()
    people = forms.CharField(label="People", required=False, max_length=200)
    emptied = forms.BooleanField(label="The pans were emptied", required=False)

    def build(self, facility: Facility) -> None:
        """Offer evaporators, tanks and receiving vessels."""
        self.fields["at"].label = "Fire lit"
        self.fields["brix"].label = "Density in the pans, as read"
        self.fields["evaporator"] = forms.ModelChoiceField(places(facility, PlaceKind.EVAPORATOR))
        for number in SOURCES:
            self.fields[f"source_{number}"] = forms.ModelChoiceField(
                places(facility, PlaceKind.TANK), label=f"From tank {number}", required=number == 1
            )
            self.fields[f"taken_{number}"] = fields.volume(
                facility, f"Amount from tank {number} (empty: all)"
            )
        self.add_aids(facility)
        for number in DRAW_OFFS:
            self._add_draw_off(facility, number)
        self.fields["stays"] = fields.volume(facility, "Stays in the pans (empty: not measured)")
        self.fields["sample_temperature"] = fields.temperature(facility, "Sample temperature")
        self.fields["water_boiling"] = fields.temperature(facility, "Water boils at, this morning")
        self.order_fields(("at", "ended_at", "evaporator"))

    def _add_draw_off(self, facility: Facility, number: int) -> None:
        self.fields[f"time_{number}"] = forms.TimeField(
            label=f"Hour {number}",
            required=False,
            widget=forms.TimeInput(attrs={"type": "time"}, format="%H:%M"),
            error_messages={"invalid": "Enter an hour, such as 15:40."},
        )
        self.fields[f"draw_{number}"] = fields.volume(facility, f"Syrup {number}")
        self.fields[f"density_{number}"] = fields.MeasureField(
            [BRIX, BAUME], f"Density {number}, as read"
        )
        self.fields[f"sample_{number}"] = fields.temperature(
            facility, f"Sample temperature {number}"
        )
        self.fields[f"into_{number}"] = forms.ModelChoiceField(
            places(facility, *TANKS), label=f"Into {number}", required=False
        )

    def clean(self) -> dict[str, Any]:
        """Ask what each draw-off still lacks, and for hours within the boil."""
        cleaned = super().clean()
        start, end = cleaned.get("at"), cleaned.get("ended_at")
        if start and end and not start <= end:
            self.add_error("ended_at", "The fire went out before it was lit; check the hours.")
        elif start and end and end - start > LONGEST:
            self.add_error(
                "ended_at",
                "This form takes a boil of up to 24 hours; check the days, or open the boil and "
                "add its draw-offs one by one.",
            )
        for number in self._typed():
            for part, words in zip(("time", "into"), DRAW_OFF_WORDS, strict=True):
                if not cleaned.get(f"{part}_{number}") and f"{part}_{number}" not in self.errors:
                    self.add_error(f"{part}_{number}", words)
            self._clean_draw_off(cleaned, number)
        return cleaned

    def _clean_draw_off(self, cleaned: dict[str, Any], number: int) -> None:
        at = self._hour(number)
        if at and self._missing(at.replace(tzinfo=None)):
            self.add_error(f"time_{number}", "The clocks went forward over that hour.")
        elif at and cleaned.get("ended_at") and at > self.moment_of("ended_at"):
            self.add_error(f"time_{number}", "That hour is not between fire lit and fire out.")
        reading = fields.reading_of(cleaned, f"density_{number}", f"sample_{number}")
        try:
            if reading is not None:
                reading.true_brix()
        except RecordingError as error:
            beside = "sample" if error.field == "sample_temperature" else "density"
            self.add_error(f"{beside}_{number}", error.message)

    def _typed(self) -> Iterator[int]:
        """Yield the numbers of the draw-offs that say more than a vessel offered beforehand."""
        for number in DRAW_OFFS:
            said = [self.cleaned_data.get(f"{part}_{number}") for part in PARTS]
            numbers = [one for one in said[1:4] if one is not None and one.value is not None]
            if said[0] is not None or numbers or (number > 1 and said[4]):
                yield number

    def _hour(self, number: int) -> datetime | None:
        """Return when a draw-off was: its hour's first occurrence since the fire was lit."""
        hour: time | None = self.cleaned_data.get(f"time_{number}")
        start: datetime | None = self.cleaned_data.get("at")
        if hour is None or start is None:
            return None
        at = datetime.combine(start.date(), hour, self.moment.tzinfo)
        return at if at >= self.moment else at + timedelta(days=1)

    def sources(self) -> list[Source]:
        """Return what the boil drew."""
        data = self.cleaned_data
        tanks = [
            FromVessel(data[f"source_{number}"], data[f"taken_{number}"])
            for number in SOURCES
            if data.get(f"source_{number}")
        ]
        return [*tanks, *self.aid_sources()]

    def draw_offs(self) -> list[boil.DrawOff]:
        """Return the draw-offs, in the order of their hours."""
        data, found = self.cleaned_data, []
        for number in self._typed():
            at = self._hour(number)
            assert at is not None  # noqa: S101 - clean asks for the hour
            reading = fields.reading_of(data, f"density_{number}", f"sample_{number}", at)
            found.append(boil.DrawOff(at, data[f"into_{number}"], data[f"draw_{number}"], reading))
        return sorted(found, key=lambda draw: draw.at)

    def record(self, context: Context) -> Step:
        """Record the boil."""
        data = self.cleaned_data
        names = ("evaporator", "stays", "emptied", "water_boiling", "since_last_run", "people")
        return boil.record_boil(
            context,
            at=self.moment,
            ended_at=self.moment_of("ended_at"),
            sources=self.sources(),
            draw_offs=self.draw_offs(),
            syrup=the_item(self.facility, ItemKind.SYRUP),
            contents=the_item(self.facility, ItemKind.CONTENTS),
            stays_brix=self.density(),
            **{name: data[name] for name in names},
        )

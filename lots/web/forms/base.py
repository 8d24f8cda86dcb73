"""The base of every record form: its own id, its time, and refusals beside their fields."""

import re
from collections.abc import Mapping
from datetime import datetime
from typing import Any
from uuid import UUID, uuid4
from zoneinfo import ZoneInfo

from django import forms
from django.utils import timezone

from lots.models import Draw, Facility, Item, Lot, Step, Unit
from lots.recording.context import Context
from lots.recording.errors import GaugeDifference, RecordingError, WouldRedivide

from . import last

Group = tuple[str, list[str], bool]
# What a form sends that is no part of what it says.
NOT_CONTENT = frozenset({"csrfmiddlewaretoken", "client_id", "redivide", "happened", "difference"})
AMOUNT_WORDS = ("amount", "quantity", "counted")


class LocalDateTimeInput(forms.DateTimeInput):
    """A date and time in the facility's zone."""

    input_type = "datetime-local"

    def __init__(self) -> None:
        super().__init__(format="%Y-%m-%dT%H:%M")


class LocalDateTimeField(forms.DateTimeField):
    """A date and time as the facility's clock shows it, without a zone."""

    def __init__(self, **kwargs: Any) -> None:
        super().__init__(
            widget=LocalDateTimeInput(),
            input_formats=["%Y-%m-%dT%H:%M", "%Y-%m-%d %H:%M"],
            error_messages={"invalid": "Enter a date and time, such as 2026-04-02 14:30."},
            **kwargs,
        )

    def to_python(self, value: Any) -> datetime | None:
        """Return the time as typed."""
        moment: datetime | None = super().to_python(value)
        return None if moment is None else moment.replace(tzinfo=None)


class RecordForm(forms.Form):
    """A record form of one facility; ``record`` calls the one recorder it stands for.

    ``folded`` names what stands under "More"; ``groups`` are (legend, names, folded) parts of a
    long form; ``rows`` pairs a choice of lot, item or vessel with its amount; ``instead`` is
    (kind, words) of another form for the same work; ``kind`` and ``same`` say what is offered as it
    was last (see ``last.py``).
    """

    title = ""
    verb = "Record"
    caution = ""
    folded: tuple[str, ...] = ()
    groups: tuple[tuple[str, tuple[str, ...], bool], ...] = ()
    rows: tuple[tuple[str, str], ...] = ()
    instead: tuple[str, str] | None = None
    kind: str = ""
    same: Mapping[str, last.Reader] = {}  # noqa: RUF012 - a table, never written to
    refused = False
    filled_in = False
    would_redivide = False
    within_tolerance = False
    repeated_hour = False
    client_id = forms.UUIDField(widget=forms.HiddenInput)
    at = LocalDateTimeField(label="When")

    def __init__(
        self, facility: Facility, *args: Any, step: Step | None = None, **kwargs: Any
    ) -> None:
        self.facility = facility
        self.step = step
        now = timezone.now().astimezone(ZoneInfo(facility.zone)).replace(tzinfo=None)
        initial = {"client_id": uuid4(), "at": now.replace(second=0, microsecond=0)}
        kwargs["initial"] = {**initial, **(kwargs.get("initial") or {})}
        super().__init__(*args, **kwargs)
        self.build(facility)
        self.offered = [] if self.is_bound else last.offer(self)

    def build(self, facility: Facility) -> None:
        """Add the fields whose choices depend on the facility."""

    def fill_in(self, typed: Mapping[str, str]) -> None:
        """Show what was typed before, exactly as typed, with none of it folded away."""
        self.filled_in, self.offered = True, []
        for name, field in self.fields.items():
            if name != "client_id":
                self.initial[name] = field.widget.value_from_datadict(typed, {}, name)

    @property
    def fieldsets(self) -> list[Group]:
        """Return the groups a page shows: the numbers first, the rest folded under "More"."""
        grouped = {name for _, names, _ in self.groups for name in names}
        plain = [name for name in self.fields if name not in grouped and name != "client_id"]
        found: list[Group] = [("", [name for name in plain if not self.hides(name)], False)]
        for legend, names, folded in self.groups:
            found.append((legend, [name for name in names if name in self.fields], folded))
        rest = [name for name in plain if self.hides(name)]
        return [
            (legend, names, folded and not self._says(names))
            for legend, names, folded in [*found, ("More", rest, True)]
            if names
        ]

    def _says(self, names: list[str]) -> bool:
        """Whether a filled-in form says something in one of the fields."""
        values = [self[name].value() for name in names] if self.filled_in else []
        return any(value[0] if isinstance(value, list) else value for value in values)

    def hides(self, name: str) -> bool:
        """Whether a field stands under "More"."""
        return name in self.folded

    def clean(self) -> dict[str, Any]:
        """Refuse what no paper can hold, an hour that did not exist, and pieces of a liquid."""
        cleaned: dict[str, Any] = super().clean() or {}
        for name, value in list(cleaned.items()):
            if isinstance(value, str) and any(0xD800 <= ord(char) <= 0xDFFF for char in value):
                self.add_error(name, "This text holds a broken character; type it again.")
            if isinstance(self.fields.get(name), LocalDateTimeField) and self._missing(value):
                self.add_error(name, "The clocks went forward over that hour; enter another.")
            if isinstance(self.fields.get(name), LocalDateTimeField) and self._twice(value):
                self.repeated_hour = True
                self.add_error(name, "The clocks went back: that hour came twice. Say which below.")
        for choice, amount in self.rows:
            self._check_unit(cleaned, choice, amount)
        return cleaned

    def _missing(self, typed: datetime | None) -> bool:
        """Whether the facility's clock never showed that hour."""
        if typed is None:
            return False
        zone = ZoneInfo(self.facility.zone)
        there = typed.replace(tzinfo=zone).astimezone(ZoneInfo("UTC")).astimezone(zone)
        return there.replace(tzinfo=None) != typed

    def _twice(self, typed: datetime | None) -> bool:
        """Whether the clock showed that hour twice and the form does not say which."""
        if typed is None or self.data.get("which_hour") in ("first", "second"):
            return False
        zone = ZoneInfo(self.facility.zone)
        offsets = {typed.replace(tzinfo=zone, fold=fold).utcoffset() for fold in (0, 1)}
        return len(offsets) == 2 and not self._missing(typed)

    def _check_unit(self, cleaned: dict[str, Any], choice: str, amount: str) -> None:
        item, typed = item_of(cleaned.get(choice)), cleaned.get(amount)
        if item is None or typed is None or typed.value is None:
            return
        if item.unit == Unit.PIECE and typed.unit != "pieces":
            self.add_error(amount, f"{item.name} is counted: enter pieces, not {typed.unit}.")
        elif item.unit == Unit.PIECE and typed.value != int(typed.value):
            self.add_error(amount, "Count whole pieces.")
        if item.unit != Unit.PIECE and typed.unit == "pieces":
            self.add_error(amount, f"{item.name} is kept by weight: choose a weight or volume.")

    @property
    def moment(self) -> datetime:
        """Return when the act happened."""
        return self.moment_of("at")

    def moment_of(self, name: str) -> datetime:
        """Return a time of the form, in the facility's zone."""
        typed: datetime = self.cleaned_data[name]
        fold = 1 if self.data.get("which_hour") == "second" else 0
        return typed.replace(tzinfo=ZoneInfo(self.facility.zone), fold=fold)

    def client(self) -> tuple[UUID, Any]:
        """Return the form's own id and its content, by which a repeat is told."""
        content = {
            key: self.data.getlist(key) for key in sorted(self.data) if key not in NOT_CONTENT
        }
        return self.cleaned_data["client_id"], content

    def record(self, context: Context) -> Step:
        """Write the record of a whole step."""
        raise RecordingError("Nothing to record.")

    def record_on(self, context: Context, step: Step) -> Any:
        """Write the record of an act inside a running step."""
        raise RecordingError("Nothing to record.")

    def write(self, context: Context) -> Step:
        """Write the record, and return its step: the running one for an act inside it."""
        if self.step is None:
            return self.record(context)
        self.record_on(context, self.step)
        return self.step

    def refuse(self, error: RecordingError) -> None:
        """Put a refusal beside its field, keeping all that was typed."""
        self.refused = True
        self.would_redivide = isinstance(error, WouldRedivide)
        self.within_tolerance = isinstance(error, GaugeDifference)
        self.add_error(self.beside(error), error.message)

    def beside(self, error: RecordingError) -> str | None:
        """Return the field a refusal stands beside, or ``None`` for the whole form.

        Without a field of that name: the row whose lot or vessel the refusal names, or the only
        row there is.
        """
        if error.field in self.fields:
            return error.field
        chosen = [row for row in self.rows if self._chose(row[0])]
        named = [row for row in chosen if names_it(error.message, self.cleaned_data[row[0]])]
        if not named and len(chosen) == 1:
            named = chosen
        for choice, amount in named:
            return amount if error.field in AMOUNT_WORDS and amount in self.fields else choice
        first = f"{error.field}_1"
        return first if first in self.fields else None

    def _chose(self, name: str) -> bool:
        return name in self.fields and self.cleaned_data.get(name) is not None


def item_of(choice: Any) -> Item | None:
    """Return what a chosen lot, sale line or item is of; ``None`` for a vessel."""
    if isinstance(choice, Draw):
        choice = choice.lot
    if isinstance(choice, Lot):
        choice = choice.item
    return choice if isinstance(choice, Item) else None


def names_it(message: str, choice: Any) -> bool:
    """Whether a sentence names a lot or vessel: "Tank 1" is not in "Tank 12 is empty"."""
    words = choice.lot.code if isinstance(choice, Draw) else str(choice)
    return re.search(rf"(?<!\w){re.escape(words)}(?!\w)", message) is not None

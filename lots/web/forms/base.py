"""The base of every record form: its own id, its time, and refusals beside their fields."""

from datetime import datetime
from typing import Any
from uuid import UUID, uuid4
from zoneinfo import ZoneInfo

from django import forms
from django.utils import timezone

from lots.models import Facility, Step
from lots.recording.context import Context
from lots.recording.errors import RecordingError, WouldRedivide

# What a form sends that is no part of what it says.
NOT_CONTENT = frozenset({"csrfmiddlewaretoken", "client_id", "redivide", "happened"})


class LocalDateTimeInput(forms.DateTimeInput):
    """A date and time in the facility's zone."""

    input_type = "datetime-local"

    def __init__(self) -> None:
        super().__init__(format="%Y-%m-%dT%H:%M")


class RecordForm(forms.Form):
    """A record form of one facility; ``record`` calls the one recorder it stands for."""

    title = ""
    verb = "Record"
    caution = ""
    folded: tuple[str, ...] = ()
    refused = False
    would_redivide = False
    client_id = forms.UUIDField(widget=forms.HiddenInput)
    at = forms.DateTimeField(
        label="When",
        widget=LocalDateTimeInput(),
        input_formats=["%Y-%m-%dT%H:%M", "%Y-%m-%d %H:%M"],
        error_messages={"invalid": "Enter a date and time, such as 2026-04-02 14:30."},
    )

    def __init__(self, facility: Facility, *args: Any, **kwargs: Any) -> None:
        self.facility = facility
        now = timezone.now().astimezone(ZoneInfo(facility.zone)).replace(tzinfo=None)
        initial = {"client_id": uuid4(), "at": now.replace(second=0, microsecond=0)}
        kwargs["initial"] = {**initial, **(kwargs.get("initial") or {})}
        super().__init__(*args, **kwargs)
        self.build(facility)

    def build(self, facility: Facility) -> None:
        """Add the fields whose choices depend on the facility."""

    @property
    def fieldsets(self) -> list[tuple[str, list[str], bool]]:
        """Return the groups a page shows: the numbers first, the rest folded under "More"."""
        shown = [name for name in self.fields if name not in self.folded and name != "client_id"]
        rest = [name for name in self.fields if name in self.folded]
        return [("", shown, False), *([("More", rest, True)] if rest else [])]

    def clean(self) -> dict[str, Any]:
        """Refuse text that no database and no paper can hold."""
        cleaned: dict[str, Any] = super().clean() or {}
        for name, value in cleaned.items():
            if isinstance(value, str) and any(0xD800 <= ord(char) <= 0xDFFF for char in value):
                self.add_error(name, "This text holds a broken character; type it again.")
        return cleaned

    @property
    def moment(self) -> datetime:
        """Return when the act happened."""
        at: datetime = self.cleaned_data["at"]
        return at.replace(tzinfo=ZoneInfo(self.facility.zone))

    def clean_at(self) -> datetime:
        """Return the time as typed, in the facility's zone; an hour that did not exist is asked."""
        typed: datetime = self.cleaned_data["at"].replace(tzinfo=None)
        zone = ZoneInfo(self.facility.zone)
        there = typed.replace(tzinfo=zone).astimezone(ZoneInfo("UTC")).astimezone(zone)
        if there.replace(tzinfo=None) != typed:
            raise forms.ValidationError("The clocks went forward over that hour; enter another.")
        return typed

    def client(self) -> tuple[UUID, Any]:
        """Return the form's own id and its content, by which a repeat is told."""
        content = {
            key: self.data.getlist(key) for key in sorted(self.data) if key not in NOT_CONTENT
        }
        return self.cleaned_data["client_id"], content

    def record(self, context: Context) -> Step:
        """Write the record."""
        raise RecordingError("Nothing to record.")

    def refuse(self, error: RecordingError) -> None:
        """Put a refusal beside its field, keeping all that was typed."""
        self.refused = True
        self.would_redivide = isinstance(error, WouldRedivide)
        self.add_error(error.field if error.field in self.fields else None, error.message)

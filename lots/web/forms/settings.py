"""The form of a facility's settings."""

from calendar import month_name
from datetime import date
from typing import Any
from zoneinfo import available_timezones

from django import forms

from lots.identification import lot_code
from lots.models import Facility
from lots.quantities.units import MASS, PRESSURE, TEMPERATURE
from lots.rules import rule_set

# What a whole sugarhouse is measured in; quarts and ounces are for labels.
VOLUMES = ("US gal", "imp gal", "L")
CONTINENT = ("America/", "Canada/", "US/", "Atlantic/")
FIELDS = (
    "name", "address", "zone", "rule_set", "volume_unit", "mass_unit", "temperature_unit",
    "pressure_unit", "season_start_month", "code_pattern", "release_needs_person",
    "gauge_tolerance_percent",
)  # fmt: skip
# A busy day's last run: the code must still fit the goods then.
LATE_RUNS = (0, 9, 30, 99)


def _pairs(values: Any) -> list[tuple[str, str]]:
    return [(value, value) for value in values]


class SettingsForm(forms.Form):
    """Everything an owner may change of the facility; the address in the URL stays."""

    name = forms.CharField(label="Name of the facility", max_length=120)
    address = forms.CharField(
        max_length=240, required=False, help_text="As it stands on packets and papers."
    )
    rule_set = forms.ChoiceField(
        label="Rule set",
        help_text="New checks use it. Checks already made keep the one they were made by.",
    )
    zone = forms.ChoiceField(
        label="Time zone", help_text="Every day, code and season is told by its clock."
    )
    season_start_month = forms.TypedChoiceField(
        label="The season begins in",
        coerce=int,
        choices=[(number, month_name[number]) for number in range(1, 13)],
    )
    volume_unit = forms.ChoiceField(label="Volume in", choices=_pairs(VOLUMES))
    mass_unit = forms.ChoiceField(label="Weight in", choices=_pairs(MASS[:2]))
    temperature_unit = forms.ChoiceField(label="Temperature in", choices=_pairs(TEMPERATURE))
    pressure_unit = forms.ChoiceField(label="Pressure in", choices=_pairs(PRESSURE))
    code_pattern = forms.CharField(label="Pattern of printed codes", max_length=40)
    gauge_tolerance_percent = forms.IntegerField(
        label="Gauge tolerance, percent",
        min_value=0,
        max_value=25,
        help_text="A vessel may hold this much more or less than the book says; a difference "
        "within it is offered in one tap, one beyond it needs a lead.",
    )
    release_needs_person = forms.BooleanField(
        label="A person releases every lot, even when its chain is complete and its checks passed",
        required=False,
    )

    def __init__(self, facility: Facility, *args: Any, **kwargs: Any) -> None:
        self.facility = facility
        kwargs["initial"] = {name: getattr(facility, name) for name in FIELDS}
        super().__init__(*args, **kwargs)
        zones = {one for one in available_timezones() if one.startswith(CONTINENT)}
        self.fields["zone"].choices = _pairs(sorted(zones | {facility.zone}))
        self.fields["rule_set"].choices = [(key, rule_set.load(key).name) for key in rule_set.KEYS]
        self.fields["code_pattern"].help_text = (
            "{YY} is the year, {DDD} the day of the year, {LETTER} the day's run from A, {SEQ} "
            f"the run from 1. Now: {_example(facility.code_pattern)} for the first run of "
            "2 April 2026."
        )

    @property
    def fieldsets(self) -> list[tuple[str, list[str], bool]]:
        """Return the groups a page shows."""
        return [
            ("The place", ["name", "address", "zone", "season_start_month"], False),
            ("Rules", ["rule_set", "release_needs_person", "gauge_tolerance_percent"], False),
            ("Units shown first", [name for name in FIELDS if name.endswith("_unit")], False),
            ("Codes", ["code_pattern"], False),
        ]

    def clean_code_pattern(self) -> str:
        """Refuse a pattern that names no run, or whose code does not fit the goods."""
        pattern: str = lot_code.normalise(self.cleaned_data["code_pattern"])
        try:
            lot_code.check_pattern(pattern)
            for serial in LATE_RUNS:
                lot_code.render(pattern, date(2026, 12, 31), serial)
        except ValueError as error:
            raise forms.ValidationError(
                f"{error} A code has up to {lot_code.MAX_LENGTH} of A–Z without O and I, 0–9 and "
                "the hyphen, on the hundredth run of a day too."
            ) from error
        return pattern

    def changed(self) -> dict[str, Any]:
        """Return the settings whose value is new."""
        data = self.cleaned_data
        return {name: data[name] for name in FIELDS if data[name] != getattr(self.facility, name)}


def _example(pattern: str) -> str:
    try:
        return lot_code.render(pattern, date(2026, 4, 2), 0)
    except ValueError:
        return "no code that can be printed"

"""The inputs every record form is made of: amounts with units, times, lots and vessels."""

from collections.abc import Sequence
from datetime import datetime
from decimal import Decimal
from typing import Any

from django import forms

from lots.models import Facility, Instrument, Lot, LotState
from lots.recording.measures import BAUME, BRIX, NOT_MEASURED, DensityReading, Typed

VOLUMES = ("US gal", "imp gal", "qt", "pt", "fl oz", "L", "mL")
MASSES = ("lb", "kg", "g")
TEMPERATURES = ("°F", "°C")
PRESSURES = ("psi", "kPa", "inHg")


class MeasureWidget(forms.MultiWidget):
    """A number with its unit beside it."""

    template_name = "lots/widgets/measure.html"

    def __init__(self, units: Sequence[str], name: str) -> None:
        super().__init__(
            [
                forms.TextInput(attrs={"inputmode": "decimal", "autocomplete": "off"}),
                forms.Select(
                    choices=[(unit, unit) for unit in units],
                    attrs={"aria-label": f"Unit of {name}"},
                ),
            ]
        )

    def decompress(self, value: Any) -> list[Any]:
        """Split an initial value into number and unit."""
        if isinstance(value, Typed):
            return [value.value, value.unit]
        return [None, value] if isinstance(value, str) else [None, None]


class MeasureField(forms.MultiValueField):
    """A number and unit kept exactly as typed; empty is "not measured"."""

    def __init__(self, units: Sequence[str], label: str, **kwargs: Any) -> None:
        number = forms.DecimalField(
            required=False,
            max_digits=12,
            decimal_places=4,
            error_messages={"invalid": "Enter a number, such as 42.5."},
        )
        choice = forms.ChoiceField(choices=[(unit, unit) for unit in units], required=False)
        kwargs.setdefault("required", False)
        super().__init__(
            [number, choice],
            widget=MeasureWidget(units, label),
            label=label,
            require_all_fields=False,
            **kwargs,
        )

    def compress(self, data_list: list[Any]) -> Typed:
        """Return what was typed."""
        if not data_list or data_list[0] is None:
            return NOT_MEASURED
        return Typed(Decimal(data_list[0]), data_list[1])


def ordered(units: Sequence[str], first: str) -> list[str]:
    """Return the units with the facility's own first."""
    return sorted(units, key=lambda unit: unit != first)


def volume(facility: Facility, label: str, **kwargs: Any) -> MeasureField:
    """Return an amount of liquid, by volume or weight."""
    return MeasureField(
        [*ordered(VOLUMES, facility.volume_unit), *ordered(MASSES, facility.mass_unit)],
        label,
        **kwargs,
    )


def temperature(facility: Facility, label: str, **kwargs: Any) -> MeasureField:
    """Return a temperature."""
    return MeasureField(ordered(TEMPERATURES, facility.temperature_unit), label, **kwargs)


class DensityFields(forms.Form):
    """A density reading: the number, what read it, and the sample's temperature."""

    brix = MeasureField([BRIX, BAUME], "Density as read")
    device = forms.ChoiceField(
        label="Read with",
        required=False,
        choices=[
            ("hydrometer-60", "Hydrometer marked 60 °F"),
            ("hydrometer-68", "Hydrometer marked 68 °F (20 °C)"),
            ("refractometer", "Refractometer, 20 °C, not compensating"),
            ("compensating", "Compensating instrument"),
        ],
    )

    def density(self) -> DensityReading | None:
        """Return the reading typed, or ``None`` where there is none."""
        return reading_of(self.cleaned_data)


def reading_of(
    data: dict[str, Any],
    number: str = "brix",
    sample: str = "sample_temperature",
    at: datetime | None = None,
) -> DensityReading | None:
    """Return the density reading of some cleaned fields, or ``None`` where no number is."""
    typed: Typed = data.get(number) or NOT_MEASURED
    if typed.value is None:
        return None
    device = data.get("device") or "hydrometer-60"
    instrument: Instrument | None = data.get("instrument")
    return DensityReading(
        value=typed.value,
        unit=typed.unit,
        device="refractometer" if device == "refractometer" else "hydrometer",
        sample=data.get(sample) or NOT_MEASURED,
        reference_celsius=20.0 if device == "hydrometer-68" else 15.56,
        compensates=device == "compensating",
        instrument=instrument,
        at=at,
    )


class LotChoice(forms.ModelChoiceField):
    """A lot with something left, named by code, item and what remains."""

    def label_from_instance(self, obj: Lot) -> str:
        """Return the words of one choice."""
        printed = f" · {obj.printed_code.text}" if obj.printed_code else ""
        return f"{obj.code}{printed} · {obj.item.name}"


def lots_in_stock(facility: Facility, *kinds: str, released: bool = False) -> Any:
    """Return the lots that a form offers."""
    rows = Lot.objects.filter(facility=facility, item__kind__in=kinds, remaining__gt=0)
    rows = rows.exclude(state__in=[LotState.VOID])
    if released:
        rows = rows.filter(state=LotState.RELEASED)
    return rows.select_related("item", "printed_code").order_by("-made_at", "-pk")

"""What a person typed, turned once into what the ledger holds."""

from dataclasses import dataclass, field
from datetime import datetime
from decimal import Decimal

from lots.models import Instrument, ReadingKind
from lots.physics import hydrometer, refractometer
from lots.quantities import rounding, units

from .errors import RecordingError

BRIX = "°Brix"
BAUME = "°Bé"
VOLUMES = frozenset({"US gal", "imp gal", "qt", "pt", "fl oz", "L", "mL"})


@dataclass(frozen=True)
class Typed:
    """A number and its unit exactly as typed; ``None`` is "not measured"."""

    value: Decimal | None
    unit: str = ""

    @property
    def text(self) -> str:
        """Return the number as typed, or an empty string."""
        return "" if self.value is None else str(self.value)


NOT_MEASURED = Typed(None)


def celsius(typed: Typed, *, name: str = "temperature") -> float | None:
    """Return °C; refuses anything outside −40 to 150 °C."""
    if typed.value is None:
        return None
    degrees = float(units.convert(typed.value, typed.unit, "°C"))
    if not -40.0 <= degrees <= 150.0:
        raise RecordingError(
            f"{typed.text} {typed.unit} is not a temperature this work can reach; "
            "check the number and its unit.",
            field=name,
        )
    return degrees


@dataclass(frozen=True)
class DensityReading:
    """A density reading: number, scale, instrument and the sample's temperature, as typed."""

    value: Decimal
    unit: str = BRIX
    device: str = "hydrometer"
    sample: Typed = NOT_MEASURED
    reference_celsius: float = 15.56
    compensates: bool = False
    instrument: Instrument | None = None
    at: datetime | None = None

    @property
    def method(self) -> str:
        """Return the method and version that corrected the reading."""
        return f"{self.device} {self.reference_celsius:g} °C, density polynomial v1"

    def true_brix(self) -> float:
        """Return the true °Brix, never below zero; raises RecordingError for an impossible number.

        Nearly plain water read cold corrects to a little below nought: that is no sugar.
        """
        try:
            return max(0.0, self._corrected())
        except ValueError as error:
            raise RecordingError(
                f"A density of {self.value} {self.unit} cannot be corrected: {error}",
                field="brix",
            ) from error

    def _corrected(self) -> float:
        number = float(self.value)
        if self.unit == BAUME:
            number = hydrometer.brix_from_baume(number)
        degrees = celsius(self.sample, name="sample_temperature")
        if degrees is None or self.compensates:
            if not 0 <= number <= 85:
                raise ValueError("Brix must be from 0 to 85.")
            return number
        if self.device == "refractometer":
            return refractometer.true_brix(number, degrees)
        return hydrometer.true_brix(number, degrees, self.reference_celsius)


@dataclass(frozen=True)
class Observation:
    """Any other reading: temperature, colour, clarity, flavour, pressure."""

    kind: ReadingKind
    typed: str
    unit: str = ""
    corrected: str = ""
    corrected_unit: str = ""
    method: str = ""
    instrument: Instrument | None = None
    at: datetime | None = None


@dataclass(frozen=True)
class Liquid:
    """A volume or weight of sap, concentrate or syrup with its true °Brix and temperature."""

    amount: Typed = NOT_MEASURED
    brix: float | None = None
    temperature: Typed = field(default=NOT_MEASURED)

    def milligrams(self) -> int | None:
        """Return whole milligrams, or ``None`` where nothing was measured."""
        return liquid_mass(self.amount, self.brix, self.temperature)

    def solids(self) -> int | None:
        """Return whole milligrams of soluble solids, or ``None`` where unknown."""
        mass = self.milligrams()
        if mass is None or self.brix is None:
            return None
        return rounding.solids_milligrams(mass, Decimal(f"{self.brix:.4f}"))


def liquid_mass(amount: Typed, brix: float | None, temperature: Typed = NOT_MEASURED) -> int | None:
    """Return whole milligrams of an amount typed as volume or weight.

    An unknown °Brix counts as water's density: 0.8 % light for sap of 2 °Brix (computed).
    """
    if amount.value is None:
        return None
    if amount.value < 0:
        raise RecordingError("An amount cannot be below zero.", field="amount")
    degrees = celsius(temperature)
    if amount.unit in VOLUMES:
        try:
            return rounding.liquid_milligrams(
                amount.value, amount.unit, brix or 0.0, 20.0 if degrees is None else degrees
            )
        except ValueError as error:
            raise RecordingError(
                f"{amount.text} {amount.unit} cannot be weighed: {error}", field="amount"
            ) from error
    return rounding.milligrams(amount.value, amount.unit)

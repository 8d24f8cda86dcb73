"""Units at the edges, by exact published factors; never a plain "gal"."""

from decimal import Decimal


class UnitError(ValueError):
    """A unit that is unknown, or of another dimension."""


# Exact: 1 US gal = 231 in³ = 3.785411784 L, 1 lb = 0.45359237 kg, 1 imp gal = 4.54609 L
# (NIST Handbook 44, appendix C; UK Units of Measurement Regulations 1995).
_US_GALLON = Decimal("3.785411784")
_FACTORS: dict[str, tuple[str, Decimal]] = {
    "US gal": ("volume", _US_GALLON),
    "imp gal": ("volume", Decimal("4.54609")),
    "qt": ("volume", _US_GALLON / 4),
    "pt": ("volume", _US_GALLON / 8),
    "fl oz": ("volume", _US_GALLON / 128),
    "L": ("volume", Decimal(1)),
    "mL": ("volume", Decimal("0.001")),
    "lb": ("mass", Decimal("0.45359237")),
    "kg": ("mass", Decimal(1)),
    "g": ("mass", Decimal("0.001")),
    "inHg": ("pressure", Decimal("3.386389")),
    "kPa": ("pressure", Decimal(1)),
    "psi": ("pressure", Decimal("6.894757293168")),
    "°C": ("temperature", Decimal(1)),
    "°F": ("temperature", Decimal(1)),
}
VOLUME = tuple(unit for unit, (kind, _) in _FACTORS.items() if kind == "volume")
MASS = tuple(unit for unit, (kind, _) in _FACTORS.items() if kind == "mass")
TEMPERATURE = ("°F", "°C")
PRESSURE = ("inHg", "kPa", "psi")


def dimension(unit: str) -> str:
    """Return volume, mass, pressure or temperature; raises UnitError for an unknown unit."""
    if unit not in _FACTORS:
        raise UnitError(f"{unit} is not a unit this book knows.")
    return _FACTORS[unit][0]


def convert(value: Decimal, from_unit: str, to_unit: str) -> Decimal:
    """Return a value in another unit of the same dimension; raises UnitError otherwise."""
    if dimension(from_unit) != dimension(to_unit):
        raise UnitError(f"{from_unit} cannot become {to_unit}.")
    if from_unit == to_unit:
        return value
    if from_unit == "°F":
        return (value - 32) * 5 / 9
    if from_unit == "°C":
        return value * 9 / 5 + 32
    return value * _FACTORS[from_unit][1] / _FACTORS[to_unit][1]

"""Units at the edges, by exact published factors; never a plain "gal"."""

from decimal import Context, Decimal, localcontext

# More digits than any stored value, so that a result does not depend on the caller's context.
_EXACT = Context(prec=40)


class UnitError(ValueError):
    """A unit that is unknown, or of another dimension."""


# Defining constants: 1 in = 25.4 mm and 1 lb = 0.45359237 kg (international yard and pound
# agreement of 1959); 1 US gal = 231 in³ (NIST Handbook 44, appendix C); 1 imp gal = 4.54609 L (UK
# Units of Measurement Regulations 1995); standard gravity 9.80665 m/s² and the conventional
# millimetre of mercury, 13.5951 × 9.80665 Pa (NIST SP 811, appendix B).
_US_GALLON = Decimal("3.785411784")
_POUND = Decimal("0.45359237")
_INCH_OF_MERCURY = Decimal("25.4") * Decimal("13.5951") * Decimal("9.80665") / 1000
with localcontext(_EXACT):
    _POUND_PER_SQUARE_INCH = _POUND * Decimal("9.80665") / Decimal("0.00064516") / 1000

_FACTORS: dict[str, tuple[str, Decimal]] = {
    "US gal": ("volume", _US_GALLON),
    "imp gal": ("volume", Decimal("4.54609")),
    "qt": ("volume", _US_GALLON / 4),
    "pt": ("volume", _US_GALLON / 8),
    "fl oz": ("volume", _US_GALLON / 128),
    "L": ("volume", Decimal(1)),
    "mL": ("volume", Decimal("0.001")),
    "lb": ("mass", _POUND),
    "kg": ("mass", Decimal(1)),
    "g": ("mass", Decimal("0.001")),
    "inHg": ("pressure", _INCH_OF_MERCURY),
    "kPa": ("pressure", Decimal(1)),
    "psi": ("pressure", _POUND_PER_SQUARE_INCH),
}
TEMPERATURE = ("°F", "°C")


def _codes(kind: str) -> tuple[str, ...]:
    return tuple(unit for unit, (of, _) in _FACTORS.items() if of == kind)


VOLUME = _codes("volume")
MASS = _codes("mass")
PRESSURE = _codes("pressure")


def dimension(unit: str) -> str:
    """Return volume, mass, pressure or temperature; raises UnitError for an unknown unit."""
    if unit in TEMPERATURE:
        return "temperature"
    if unit not in _FACTORS:
        raise UnitError(f"{unit} is not a unit this book knows.")
    return _FACTORS[unit][0]


def convert(value: Decimal, from_unit: str, to_unit: str) -> Decimal:
    """Return a value in another unit of the same dimension, to 40 digits.

    A temperature is converted as a point on its scale, not as a difference. Raises UnitError for
    an unknown unit or another dimension, ValueError for a value that is no finite number.
    """
    if dimension(from_unit) != dimension(to_unit):
        raise UnitError(f"{from_unit} cannot become {to_unit}.")
    if not value.is_finite():
        raise ValueError(f"{value} is not a number that can be converted.")
    if from_unit == to_unit:
        return value
    with localcontext(_EXACT):
        if from_unit == "°F":
            return (value - 32) * 5 / 9
        if from_unit == "°C":
            return value * 9 / 5 + 32
        return value * _FACTORS[from_unit][1] / _FACTORS[to_unit][1]

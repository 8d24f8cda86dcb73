"""The curves of a sucrose solution without range checks, for the modules that check."""

from . import water

# Polynomial of Bubnik, Kadlec, Urban and Bruhns, Sugar Technologists Manual (1995) p. 164: one row
# for each power of (t − 20)/100, one column for each power of the mass fraction from the first.
_DENSITY = (
    (385.1761, 135.3705, 40.9299, -3.9643, 13.4853, -17.2890),
    (-46.2720, -7.1720, 1.1597, 5.1126, 17.5254),
    (59.7712, 7.2491, 12.3630, -35.4791),
    (-47.2207, -21.6977, 27.6301),
    (18.3184, 12.3081),
)
_INDEX = (1.3329871451, 0.1427351698, 0.0549050339, 0.0115138402, 0.0140131089, -0.0098869531)
_PER_KELVIN = (-8.98247e-5, -1.430604e-4, -6.387489e-6)
_PER_KELVIN_SQUARED = (-1.744739e-6, 5.145e-6, -5.13667e-6)
_PER_KELVIN_CUBED = 1.186404e-8

# The tables print cold corrections of plain water, whose true value lies below zero.
LOWEST = -3.0
HIGHEST = 85.0


def _polynomial(coefficients: tuple[float, ...], x: float) -> float:
    total = 0.0
    for coefficient in reversed(coefficients):
        total = total * x + coefficient
    return total


def density(brix: float, celsius: float) -> float:
    """Return kg/m³; raises ValueError for a temperature outside 0–105 °C."""
    w, tau = brix / 100, (celsius - 20) / 100
    rows = tuple(_polynomial(row, w) * w for row in _DENSITY)
    return water.density(celsius) + _polynomial(rows, tau)


def refractive_index(brix: float, celsius: float) -> float:
    """Return the index in air at 589.3 nm, from fits named in ``sucrose.refractive_index``."""
    w, d = brix / 100, celsius - 20
    bend = _polynomial(_PER_KELVIN_SQUARED, w) + d * _PER_KELVIN_CUBED
    return _polynomial(_INDEX, w) + d * (_polynomial(_PER_KELVIN, w) + d * bend)

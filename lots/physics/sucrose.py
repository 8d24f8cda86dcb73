"""Pure sucrose in water: density, refractive index, boiling point, solubility, osmosis."""

import math

from . import _curves, water
from ._bounds import solve, within

_SUCROSE, _WATER = 342.2965, 18.01528  # g/mol
_GAS = 8.314462618  # J/(mol K)


def density(brix: float, celsius: float) -> float:
    """Return kg/m³ in vacuo at 0–85 °Bx and 0–105 °C.

    Within 0.1 kg/m³ to 50 °Bx, 0.3 at 66–70 °Bx, 1 near 100 °C. Raises ValueError out of range.
    Source: the ICUMSA polynomial in Bubnik, Kadlec, Urban and Bruhns, Sugar Technologists Manual
    (1995) p. 164; it lies up to 0.3 kg/m³ above NBS Circular C440 at syrup strength.
    """
    within("Brix", brix, 0.0, _curves.HIGHEST, "°Bx")
    return _curves.density(brix, within("Temperature", celsius, 0.0, 105.0, "°C"))


# The public name of the argument is that of the function above, so the curve is called instead.
def brix_from_density(density: float, celsius: float) -> float:
    """Return °Bx (0–85) whose density at 0–105 °C is the kg/m³ given.

    Raises ValueError where none is. Source: as ``density``, by bisection.
    """
    within("Density", density, 0.0, 2000.0, "kg/m³")
    return solve(lambda b: _curves.density(b, celsius), 0.0, _curves.HIGHEST, density, "Brix")


def refractive_index(brix: float, celsius: float) -> float:
    """Return the index in air at 589.3 nm, for 0–85 °Bx and 0–40 °C.

    Within 6e-6 of the scale at 20 °C; best at 5–30 °C. Raises ValueError out of range. Source: a
    fit of the ICUMSA 1974 scale, of the 1936 and OIV correction tables and of IAPWS water.
    """
    within("Brix", brix, 0.0, _curves.HIGHEST, "°Bx")
    return _curves.refractive_index(brix, within("Temperature", celsius, 0.0, 40.0, "°C"))


def brix_from_refractive_index(n: float, celsius: float) -> float:
    """Return °Bx (0–85) whose index in air at 0–40 °C is the one given.

    Raises ValueError where none is. Source: as ``refractive_index``, by bisection.
    """
    within("Refractive index", n, 1.0, 2.0, "(no unit)")
    within("Temperature", celsius, 0.0, 40.0, "°C")
    return solve(lambda b: _curves.refractive_index(b, celsius), 0.0, _curves.HIGHEST, n, "Brix")


def water_activity(brix: float, celsius: float) -> float:
    """Return the water activity, 0 to 1, at 0–85 °Bx and 0–130 °C.

    Raises ValueError out of range. Source: Starzak and Peacock (1997).
    """
    within("Brix", brix, 0.0, _curves.HIGHEST, "°Bx")
    within("Temperature", celsius, 0.0, 130.0, "°C")
    moles = brix / _SUCROSE
    x = moles / (moles + (100 - brix) / _WATER)
    energy = -17638.0 * x * x * (1 - 1.0038 * x - 0.24653 * x * x)
    return (1 - x) * math.exp(energy / (_GAS * (celsius + 273.15)))


def boiling_point_elevation(brix: float, kilopascal: float = 101.325) -> float:
    """Return the K by which 0–80 °Bx boils above water at 50–120 kPa of station pressure.

    Within 0.06 K (0.1 °F) at draw-off, 0.3 K elsewhere. Raises ValueError out of range. Source:
    water activity of Starzak and Peacock (1997) on the IAPWS-IF97 saturation line.
    """
    within("Brix", brix, 0.0, 80.0, "°Bx")
    base = water.boiling_point(within("Pressure", kilopascal, 50.0, 120.0, "kPa"))
    boiling = solve(
        lambda t: water.saturation_pressure(t) * water_activity(brix, t),
        base - 0.01,
        base + 20,
        kilopascal,
        "temperature",
    )
    # Bisection leaves plain water a rounding error that may fall below zero.
    return max(0.0, boiling - base)


def solubility(celsius: float) -> float:
    """Return °Bx at which a solution is saturated at 0–100 °C.

    Within 0.12 °Bx to 80 °C and 0.24 at 100; older tables run up to 0.5 higher. Raises ValueError
    out of range. Source: Vavrinecz, in Bubnik and Kadlec (1995).
    """
    t = within("Temperature", celsius, 0.0, 100.0, "°C")
    return 64.447 + 0.08222 * t + 1.6169e-3 * t**2 - 1.558e-6 * t**3 - 4.63e-8 * t**4


def osmotic_pressure(brix: float, celsius: float) -> float:
    """Return kPa against pure water at 0–70 °Bx and 0–40 °C, within 3 %.

    Minerals and acids of sap are not counted. Raises ValueError out of range. Source: the
    definition, with the water activity of Starzak and Peacock (1997).
    """
    within("Brix", brix, 0.0, 70.0, "°Bx")
    within("Temperature", celsius, 0.0, 40.0, "°C")
    molar_volume = _WATER * 1e-3 / water.density(celsius)
    energy = _GAS * (celsius + 273.15) * -math.log(water_activity(brix, celsius))
    return max(0.0, energy / molar_volume / 1000)

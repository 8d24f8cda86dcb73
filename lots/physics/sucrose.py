"""Pure sucrose in water: density, refractive index, boiling point, solubility, osmosis."""

import math

from . import water
from ._bounds import solve, within

_DENSITY = (
    (385.1761, 135.3705, 40.9299, -3.9643, 13.4853, -17.2890),
    (-46.2720, -7.1720, 1.1597, 5.1126, 17.5254),
    (59.7712, 7.2491, 12.3630, -35.4791),
    (-47.2207, -21.6977, 27.6301),
    (18.3184, 12.3081),
)
_INDEX = (1.3329871451, 0.1427351698, 0.0549050339, 0.0115138402, 0.0140131089, -0.0098869531)
_SUCROSE, _WATER, _GAS = 342.2965, 18.01528, 8.314462618


def density(brix: float, celsius: float) -> float:
    """Return kg/m³ in vacuo at 0–85 °Bx and 0–105 °C.

    Method: the ICUMSA polynomial as given by Bubnik, Kadlec, Urban and Bruhns, Sugar
    Technologists Manual (1995) p. 164; uncertainty 0.3 kg/m³ at 66–70 °Bx, 1 near 100 °C.
    """
    w = within("Brix", brix, 0.0, 85.0, "°Bx") / 100
    tau = (within("Temperature", celsius, 0.0, 105.0, "°C") - 20) / 100
    total = water.density(celsius)
    for power, row in enumerate(_DENSITY):
        total += tau**power * sum(c * w ** (j + 1) for j, c in enumerate(row))
    return total


def brix_from_density(density_kg_m3: float, celsius: float) -> float:
    """Return °Bx (0–85) whose density at a temperature is the one given."""
    return solve(lambda b: density(b, celsius), 0.0, 85.0, density_kg_m3, "Brix")


def refractive_index(brix: float, celsius: float) -> float:
    """Return the index at 589.3 nm for 0–85 °Bx, 0–40 °C.

    Method: a fit of 86 rows of the ICUMSA 1974 scale and of the published correction tables.
    """
    within("Brix", brix, 0.0, 85.0, "°Bx")
    return _index(brix, within("Temperature", celsius, 0.0, 40.0, "°C"))


def _index(brix: float, celsius: float) -> float:
    w, d = brix / 100, celsius - 20
    at_20 = sum(c * w**j for j, c in enumerate(_INDEX))
    first = -8.98247e-5 - 1.430604e-4 * w - 6.387489e-6 * w**2
    second = -1.744739e-6 + 5.145e-6 * w - 5.13667e-6 * w**2
    return at_20 + d * first + d**2 * second + d**3 * 1.186404e-8


def brix_from_refractive_index(n: float, celsius: float) -> float:
    """Return °Bx whose index at 0–40 °C is the one given: −3 to 85.

    Below zero lies a cold correction of plain water, as the published tables print it.
    """
    within("Temperature", celsius, 0.0, 40.0, "°C")
    return solve(lambda b: _index(b, celsius), -3.0, 85.0, n, "Brix")


def water_activity(brix: float, celsius: float) -> float:
    """Return the water activity at 0–85 °Bx (Starzak and Peacock 1997)."""
    b = within("Brix", brix, 0.0, 85.0, "°Bx")
    moles = b / _SUCROSE
    x = moles / (moles + (100 - b) / _WATER)
    power = -17638.0 * x * x * (1 - 1.0038 * x - 0.24653 * x * x)
    return (1 - x) * math.exp(power / (_GAS * (celsius + 273.15)))


def boiling_point_elevation(brix: float, kilopascal: float = 101.325) -> float:
    """Return K by which a solution boils above water at 50–120 kPa, 0–80 °Bx (± 0.06 K)."""
    within("Brix", brix, 0.0, 80.0, "°Bx")
    within("Pressure", kilopascal, 50.0, 120.0, "kPa")
    base = water.boiling_point(kilopascal)
    boiling = solve(
        lambda t: water.saturation_pressure(t) * water_activity(brix, t),
        base - 0.01,
        base + 25,
        kilopascal,
        "temperature",
    )
    return boiling - base


def solubility(celsius: float) -> float:
    """Return °Bx at which a solution is saturated at 0–100 °C (Vavrinecz)."""
    t = within("Temperature", celsius, 0.0, 100.0, "°C")
    return 64.447 + 0.08222 * t + 1.6169e-3 * t**2 - 1.558e-6 * t**3 - 4.63e-8 * t**4


def osmotic_pressure(brix: float, celsius: float) -> float:
    """Return kPa at 0–40 °Bx, 0–40 °C, within 3 %, from the water activity."""
    within("Brix", brix, 0.0, 40.0, "°Bx")
    within("Temperature", celsius, 0.0, 40.0, "°C")
    volume = _WATER * 1e-3 / water.density(celsius)
    return -_GAS * (celsius + 273.15) / volume * math.log(water_activity(brix, celsius)) / 1000

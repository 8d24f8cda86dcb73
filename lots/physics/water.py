"""Pure water: where it boils and what it weighs."""

import math

from ._bounds import within

_N = (
    1167.0521452767,
    -724213.16703206,
    -17.073846940092,
    12020.824702470,
    -3232555.0322333,
    14.915108613530,
    -4823.2657361591,
    405113.40542057,
    -0.23855557567849,
    650.17534844798,
)


def boiling_point(kilopascal: float) -> float:
    """Return °C at which water boils at a station pressure of 1 to 1000 kPa.

    Method: IAPWS-IF97 region 4 backward equation. Raises ValueError out of range.
    """
    within("Pressure", kilopascal, 1.0, 1000.0, "kPa")
    n = (0.0, *_N)
    b = (kilopascal / 1000.0) ** 0.25
    e = b * b + n[3] * b + n[6]
    f = n[1] * b * b + n[4] * b + n[7]
    g = n[2] * b * b + n[5] * b + n[8]
    d = 2 * g / (-f - math.sqrt(f * f - 4 * e * g))
    kelvin = (n[10] + d - math.sqrt((n[10] + d) ** 2 - 4 * (n[9] + n[10] * d))) / 2
    return kelvin - 273.15


def saturation_pressure(celsius: float) -> float:
    """Return kPa over boiling water at 5 to 150 °C: the inverse of ``boiling_point``."""
    from ._bounds import solve

    within("Temperature", celsius, 7.0, 150.0, "°C")
    return solve(boiling_point, 1.0, 1000.0, celsius, "pressure")


def density(celsius: float) -> float:
    """Return kg/m³ at 0 to 105 °C (Kell 1975), extrapolated above 100 °C."""
    t = within("Temperature", celsius, 0.0, 105.0, "°C")
    top = (
        999.83952
        + 16.952577 * t
        - 7.9905127e-3 * t**2
        - 46.241757e-6 * t**3
        + 105.84601e-9 * t**4
        - 281.03006e-12 * t**5
    )
    return top / (1 + 16.887236e-3 * t)

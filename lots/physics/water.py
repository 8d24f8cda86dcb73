"""Pure water: where it boils and what it weighs."""

import math

from ._bounds import within

# IAPWS-IF97, table 34: n1 to n10 of the saturation line.
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
    """Return °C at which water boils at a station pressure of 1–1000 kPa.

    A weather report reduced to sea level is not a station pressure. Raises ValueError out of
    range. Source: IAPWS-IF97 region 4, backward equation; 2e-4 °C against IAPWS-95.
    """
    within("Pressure", kilopascal, 1.0, 1000.0, "kPa")
    n1, n2, n3, n4, n5, n6, n7, n8, n9, n10 = _N
    beta = (kilopascal / 1000) ** 0.25
    e = beta * beta + n3 * beta + n6
    f = n1 * beta * beta + n4 * beta + n7
    g = n2 * beta * beta + n5 * beta + n8
    d = 2 * g / (-f - math.sqrt(f * f - 4 * e * g))
    return (n10 + d - math.sqrt((n10 + d) ** 2 - 4 * (n9 + n10 * d))) / 2 - 273.15


def saturation_pressure(celsius: float) -> float:
    """Return the kPa at which water boils at 7–179 °C: the inverse of ``boiling_point``.

    Raises ValueError out of range. Source: IAPWS-IF97 region 4, basic equation.
    """
    within("Temperature", celsius, 7.0, 179.0, "°C")
    n1, n2, n3, n4, n5, n6, n7, n8, n9, n10 = _N
    kelvin = celsius + 273.15
    theta = kelvin + n9 / (kelvin - n10)
    a = theta * theta + n1 * theta + n2
    b = n3 * theta * theta + n4 * theta + n5
    c = n6 * theta * theta + n7 * theta + n8
    return float(1000 * (2 * c / (-b + math.sqrt(b * b - 4 * a * c))) ** 4)


def density(celsius: float) -> float:
    """Return kg/m³ of air-free water at 0–105 °C, extrapolated above 100.

    Raises ValueError out of range. Source: Kell (1975), the water under the sucrose polynomial;
    0.02 kg/m³ against IAPWS-IF97.
    """
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

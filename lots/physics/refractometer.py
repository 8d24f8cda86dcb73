"""Refractometers without automatic compensation: correction to 20 °C."""

from . import _curves, sucrose
from ._bounds import solve, within


def true_brix(reading: float, celsius: float) -> float:
    """Return the true °Bx of a reading of 0–80 °Bx taken at 0–40 °C.

    An instrument that compensates by itself must not be corrected again. A cold reading of nearly
    plain water comes out slightly below zero. Within 0.03 °Bx from 10 to 30 °C. Raises ValueError
    out of range. Source: the 1936 international and the OIV-MA-AS2-02 correction tables.
    """
    within("Reading", reading, 0.0, 80.0, "°Bx")
    within("Temperature", celsius, 0.0, 40.0, "°C")
    return solve(
        lambda b: _curves.refractive_index(b, celsius),
        _curves.LOWEST,
        _curves.HIGHEST,
        sucrose.refractive_index(reading, 20.0),
        "true Brix",
    )

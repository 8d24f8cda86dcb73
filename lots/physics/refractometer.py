"""Refractometers without automatic compensation: correction to 20 °C."""

from . import sucrose
from ._bounds import within


def true_brix(reading: float, celsius: float) -> float:
    """Return the true °Bx of a reading (0–80) taken at 0–40 °C; 0.03 °Bx from 10 to 30 °C.

    An instrument that compensates by itself must not be corrected again.
    """
    within("Reading", reading, 0.0, 80.0, "°Bx")
    return sucrose.brix_from_refractive_index(sucrose.refractive_index(reading, 20.0), celsius)

"""Hydrometers: correcting a reading for temperature, and the Baumé scale of modulus 145."""

from . import sucrose, water
from ._bounds import solve, within

GLASS = 25e-6
MODULUS = 145.0


def _expansion(celsius: float, reference_celsius: float) -> float:
    return 1 + GLASS * (celsius - reference_celsius)


def true_brix(reading: float, celsius: float, reference_celsius: float) -> float:
    """Return the true °Bx of a reading (0–80) in a sample at 0–105 °C.

    Method: the float displaces its own mass and its glass grows 25e-6 per K; within 0.05 °Bx of
    the NBS C440 correction table from 5 to 60 °C, about 0.1 at 211 °F.
    """
    within("Reading", reading, 0.0, 80.0, "°Bx")
    target = sucrose.density(reading, reference_celsius)
    factor = _expansion(celsius, reference_celsius)
    return solve(lambda b: sucrose.density(b, celsius) * factor, 0.0, 85.0, target, "Brix")


def reading_for(brix: float, celsius: float, reference_celsius: float) -> float:
    """Return what a hydrometer reads in a solution of true °Bx 0–80 at 0–105 °C."""
    within("Brix", brix, 0.0, 80.0, "°Bx")
    target = sucrose.density(brix, celsius) * _expansion(celsius, reference_celsius)
    return solve(lambda r: sucrose.density(r, reference_celsius), 0.0, 85.0, target, "reading")


def baume_from_brix(brix: float) -> float:
    """Return °Bé of modulus 145 for 0–85 °Bx, on true specific gravity 20/20."""
    return MODULUS - MODULUS * water.density(20.0) / sucrose.density(brix, 20.0)


def brix_from_baume(baume: float) -> float:
    """Return °Bx for 0–44.9 °Bé of modulus 145."""
    within("Baumé", baume, 0.0, 44.9, "°Bé")
    gravity = MODULUS / (MODULUS - baume)
    return sucrose.brix_from_density(gravity * water.density(20.0), 20.0)

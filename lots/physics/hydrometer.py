"""Hydrometers: correcting a reading for temperature, and the Baumé scale of modulus 145."""

from . import _curves, sucrose, water
from ._bounds import solve, within

# Cubic expansion per K: the common glass that departs least from the NBS C440 corrections.
GLASS = 25e-6
MODULUS = 145.0


def _expansion(celsius: float, reference_celsius: float) -> float:
    within("Temperature", celsius, 0.0, 105.0, "°C")
    within("Reference temperature", reference_celsius, 0.0, 40.0, "°C")
    return 1 + GLASS * (celsius - reference_celsius)


def true_brix(reading: float, celsius: float, reference_celsius: float) -> float:
    """Return the true °Bx of a reading of 0–80 °Bx in a sample at 0–105 °C.

    The instrument's reference lies at 0–40 °C (often 15.56 or 20). A cold reading of nearly plain
    water comes out slightly below zero, as the published table prints it. Within 0.05 °Bx from 5
    to 60 °C, about 0.1 at 0 and at 99 °C. Raises ValueError out of range. Source: a float displaces
    its own mass and its glass expands; compared with NBS Circular C440.
    """
    within("Reading", reading, 0.0, 80.0, "°Bx")
    factor = _expansion(celsius, reference_celsius)
    return solve(
        lambda b: _curves.density(b, celsius) * factor,
        _curves.LOWEST,
        _curves.HIGHEST,
        sucrose.density(reading, reference_celsius),
        "true Brix",
    )


def reading_for(brix: float, celsius: float, reference_celsius: float) -> float:
    """Return the °Bx a hydrometer shows in a true 0–80 °Bx at 0–105 °C.

    Reference at 0–40 °C. Raises ValueError out of range and where the float sinks below its zero.
    Source and accuracy: as ``true_brix``.
    """
    within("Brix", brix, 0.0, 80.0, "°Bx")
    shown = _expansion(celsius, reference_celsius) * sucrose.density(brix, celsius)
    return solve(
        lambda r: _curves.density(r, reference_celsius), 0.0, _curves.HIGHEST, shown, "reading"
    )


def baume_from_brix(brix: float) -> float:
    """Return °Bé of modulus 145 for 0–85 °Bx, on the true specific gravity 20/20.

    Within 0.04 °Bé of handbook and legal pairs. Raises ValueError out of range. Source: the modulus
    of US law; other tables use 144.3.
    """
    return MODULUS - MODULUS * water.density(20.0) / sucrose.density(brix, 20.0)


def brix_from_baume(baume: float) -> float:
    """Return °Bx (0–85) of a °Bé of modulus 145, 0 to about 44.9.

    Raises ValueError out of range. Source: the inverse of ``baume_from_brix``.
    """
    within("Baumé", baume, 0.0, baume_from_brix(_curves.HIGHEST), "°Bé")
    gravity = MODULUS / (MODULUS - baume)
    return sucrose.brix_from_density(gravity * water.density(20.0), 20.0)

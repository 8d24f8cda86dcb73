"""Mixing syrups: mass and solids are conserved, volumes are not."""

from collections.abc import Sequence

from . import sucrose, water
from ._bounds import at_least_zero, within


def mix(parts: Sequence[tuple[float, float]]) -> tuple[float, float]:
    """Return (volume, °Bx) of (volume, °Bx) parts of 0–85 °Bx, all at 20 °C, in the parts' unit.

    Raises ValueError out of range or without a volume. Source: conservation of mass and solids.
    """
    mass = solids = 0.0
    for volume, brix in parts:
        part = at_least_zero("Volume", volume, "volume units") * sucrose.density(brix, 20.0)
        mass += part
        solids += part * brix
    if mass <= 0:
        raise ValueError("A blend needs a volume above zero.")
    brix = min(85.0, solids / mass)  # rounding may carry equal parts past the end of the range
    return mass / sucrose.density(brix, 20.0), brix


def water_to_reach(volume: float, brix: float, target_brix: float) -> float:
    """Return the volume of water, in the syrup's unit at 20 °C, that thins it to a lower °Bx.

    Syrup of 0–85 °Bx. Raises ValueError out of range and for a target of 0 or above the syrup.
    Source: conservation of mass and solids.
    """
    at_least_zero("Volume", volume, "volume units")
    mass = volume * sucrose.density(brix, 20.0)
    within("Target Brix", target_brix, 0.0, 85.0, "°Bx")
    if not 0 < target_brix <= brix:
        raise ValueError("Water can only thin: the target must be above 0 and not above the syrup.")
    return mass * (brix / target_brix - 1) / water.density(20.0)

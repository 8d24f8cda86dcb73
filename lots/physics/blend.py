"""Mixing syrups: mass and solids are conserved, volumes are not."""

from collections.abc import Sequence

from . import sucrose, water


def mix(parts: Sequence[tuple[float, float]]) -> tuple[float, float]:
    """Return (volume, °Bx) of (volume, °Bx) parts, all at 20 °C, in the parts' unit."""
    mass = sum(volume * sucrose.density(brix, 20.0) for volume, brix in parts)
    if mass <= 0:
        raise ValueError("A blend needs a volume above zero.")
    solids = sum(volume * sucrose.density(brix, 20.0) * brix for volume, brix in parts)
    brix = solids / mass
    return mass / sucrose.density(brix, 20.0), brix


def water_to_reach(volume: float, brix: float, target_brix: float) -> float:
    """Return the volume of water at 20 °C that thins a syrup to a lower °Bx."""
    if not 0 < target_brix <= brix:
        raise ValueError("Water can only thin: the target must be above 0 and not above the syrup.")
    mass = volume * sucrose.density(brix, 20.0)
    return mass * (brix / target_brix - 1) / water.density(20.0)

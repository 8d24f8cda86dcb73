"""Filling by volume and by weight: what hot syrup becomes at 20 °C."""

from . import sucrose
from ._bounds import at_least_zero


def net_mass(volume_ml: float, brix: float) -> float:
    """Return grams (true mass) of a volume in mL at 20 °C, 0–85 °Bx.

    A scale in air shows 0.08 % less. Raises ValueError out of range. Source: ``sucrose.density``.
    """
    return at_least_zero("Volume", volume_ml, "mL") * sucrose.density(brix, 20.0) / 1000


def net_volume(net_mass_g: float, brix: float) -> float:
    """Return mL at 20 °C of a true mass in grams, 0–85 °Bx.

    Raises ValueError out of range. Source: ``sucrose.density``.
    """
    return at_least_zero("Mass", net_mass_g, "g") * 1000 / sucrose.density(brix, 20.0)


def volume_at(volume_ml: float, brix: float, from_celsius: float, to_celsius: float) -> float:
    """Return mL at one temperature of a volume measured at another; 0–85 °Bx, 0–105 °C.

    Within 0.05 % of volume; the container's own expansion is not counted. Raises ValueError out of
    range. Source: the ratio of ``sucrose.density``.
    """
    at_least_zero("Volume", volume_ml, "mL")
    return volume_ml * sucrose.density(brix, from_celsius) / sucrose.density(brix, to_celsius)

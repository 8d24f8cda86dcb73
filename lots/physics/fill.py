"""Filling by volume and by weight: what hot syrup becomes at 20 °C."""

from . import sucrose
from ._bounds import within


def net_mass(volume_ml: float, brix: float) -> float:
    """Return grams (true mass) of a volume in mL at 20 °C."""
    within("Volume", volume_ml, 0.0, 1e9, "mL")
    return volume_ml * sucrose.density(brix, 20.0) / 1000


def net_volume(net_mass_g: float, brix: float) -> float:
    """Return mL at 20 °C of a mass in grams."""
    within("Mass", net_mass_g, 0.0, 1e10, "g")
    return net_mass_g * 1000 / sucrose.density(brix, 20.0)


def volume_at(volume_ml: float, brix: float, from_celsius: float, to_celsius: float) -> float:
    """Return mL at one temperature of a volume measured at another (0.05 %)."""
    within("Volume", volume_ml, 0.0, 1e9, "mL")
    return volume_ml * sucrose.density(brix, from_celsius) / sucrose.density(brix, to_celsius)

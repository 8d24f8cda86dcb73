"""The pan temperature at which syrup has reached its density."""

from . import sucrose, water
from ._bounds import within


def temperature(
    target_brix: float,
    *,
    water_boiling_celsius: float | None = None,
    kilopascal: float | None = None,
) -> float:
    """Return °C in the pan for a target of 0–80 °Bx; ± 0.1 °F, a control, never a proof.

    Give one of the two: where water boils this morning, or the station pressure.
    """
    if (water_boiling_celsius is None) == (kilopascal is None):
        raise ValueError("Give either where water boils today or the station pressure, not both.")
    if water_boiling_celsius is not None:
        within("Boiling point of water", water_boiling_celsius, 85.0, 104.0, "°C")
        kilopascal = water.saturation_pressure(water_boiling_celsius)
    assert kilopascal is not None  # noqa: S101 - narrowed above
    rise = sucrose.boiling_point_elevation(target_brix, kilopascal)
    return water.boiling_point(kilopascal) + rise

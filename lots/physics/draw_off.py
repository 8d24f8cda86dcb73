"""The pan temperature at which syrup has reached its density."""

from . import sucrose, water
from ._bounds import within


def temperature(
    target_brix: float,
    *,
    water_boiling_celsius: float | None = None,
    kilopascal: float | None = None,
) -> float:
    """Return °C in the pan at draw-off for 0–80 °Bx; within 0.06 K, a control and never a proof.

    Give one of the two: where water boils now (85–102 °C), or the station pressure (57–110 kPa),
    not one reduced to sea level. Raises ValueError for both or neither and out of range. Source:
    ``water.boiling_point`` and ``sucrose.boiling_point_elevation``.
    """
    if kilopascal is not None and water_boiling_celsius is None:
        within("Station pressure", kilopascal, 57.0, 110.0, "kPa")
        boiling = water.boiling_point(kilopascal)
    elif water_boiling_celsius is not None and kilopascal is None:
        boiling = within("Boiling point of water", water_boiling_celsius, 85.0, 102.0, "°C")
        kilopascal = water.saturation_pressure(boiling)
    else:
        raise ValueError(
            "Give either the temperature at which water boils here now or the station pressure, "
            "not both and not neither. The pressure in a weather report is reduced to sea level "
            "and is not the station pressure."
        )
    return boiling + sucrose.boiling_point_elevation(target_brix, kilopascal)

"""Colour classes by light transmittance at 560 nm, 10 mm, glycerol as 100 %."""

import math
from collections.abc import Sequence
from decimal import ROUND_DOWN, Decimal

from ._bounds import at_least_zero, within

GOLDEN, AMBER, DARK, VERY_DARK = "golden", "amber", "dark", "very-dark"


def grade_class(transmittance: float) -> str:
    """Return the class of 0–100 %Tc: ``golden``, ``amber``, ``dark`` or ``very-dark``.

    The unrounded value is compared with 75, 50 and 25. Raises ValueError out of range. Source:
    Canadian Grade Compendium Vol. 7; US Standards for Grades of Maple Syrup (2015).
    """
    value = within("Transmittance", transmittance, 0.0, 100.0, "%Tc")
    for edge, name in ((75.0, GOLDEN), (50.0, AMBER), (25.0, DARK)):
        if value >= edge:
            return name
    return VERY_DARK


def shown(transmittance: float) -> str:
    """Return 0–100 %Tc as text, cut to one decimal and never rounded up over a class's edge.

    Raises ValueError out of range.
    """
    within("Transmittance", transmittance, 0.0, 100.0, "%Tc")
    # Through the shortest decimal that names it, or 0.3 would be cut to 0.2.
    return str(Decimal(str(transmittance)).quantize(Decimal("0.1"), ROUND_DOWN))


def blend_transmittance(parts: Sequence[tuple[float, float]]) -> float:
    """Return the estimated %Tc of (volume, %Tc) parts of 0.01–100 %Tc, volumes in one unit.

    An estimate within about 4 %Tc, never a grade: no published measurements of blends were found.
    Raises ValueError out of range or without a volume. Source: Beer–Lambert, absorbances add.
    """
    total = sum(at_least_zero("Volume", volume, "volume units") for volume, _ in parts)
    if total <= 0:
        raise ValueError("A blend needs a volume above zero.")
    absorbance = 0.0
    for volume, value in parts:
        within("Transmittance", value, 0.01, 100.0, "%Tc")
        absorbance -= volume / total * math.log10(value / 100)
    # Rounding may carry a blend of clear parts past 100, which no class takes.
    return min(100.0, 100 * 10**-absorbance)

"""Colour classes by light transmittance at 560 nm, 10 mm, glycerol as 100 %."""

import math
from collections.abc import Sequence
from decimal import ROUND_DOWN, Decimal

from ._bounds import within

GOLDEN, AMBER, DARK, VERY_DARK = "golden", "amber", "dark", "very-dark"


def grade_class(transmittance: float) -> str:
    """Return the class of a transmittance of 0–100 %Tc, compared unrounded with 75, 50, 25.

    Source: Canadian Grade Compendium Vol. 7; US Standards for Grades of Maple Syrup (2015).
    """
    value = within("Transmittance", transmittance, 0.0, 100.0, "%Tc")
    for edge, name in ((75.0, GOLDEN), (50.0, AMBER), (25.0, DARK)):
        if value >= edge:
            return name
    return VERY_DARK


def shown(transmittance: float) -> str:
    """Return the value cut, never rounded up, to one decimal."""
    return str(Decimal(str(transmittance)).quantize(Decimal("0.1"), ROUND_DOWN))


def blend_transmittance(parts: Sequence[tuple[float, float]]) -> float:
    """Return the estimated %Tc of (volume, %Tc) parts: absorbances add (Beer–Lambert).

    An estimate, never a grade: no published measurements of blends were found.
    """
    total = sum(volume for volume, _ in parts)
    if total <= 0:
        raise ValueError("A blend needs a volume above zero.")
    absorbance = 0.0
    for volume, value in parts:
        within("Transmittance", value, 0.01, 100.0, "%Tc")
        absorbance -= volume / total * math.log10(value / 100)
    return 100 * 10**-absorbance

"""The one place where decimals become whole milligrams, and back; half to even."""

from collections.abc import Sequence
from decimal import ROUND_HALF_EVEN, Decimal

from lots.physics import sucrose

from .units import convert, dimension

MILLIGRAMS = Decimal(1_000_000)


def whole(value: Decimal) -> int:
    """Return the nearest whole number, half to even."""
    return int(value.quantize(Decimal(1), ROUND_HALF_EVEN))


def fixed(value: float | Decimal, places: int) -> str:
    """Return a number with fixed decimals, half to even."""
    return str(Decimal(str(value)).quantize(Decimal(1).scaleb(-places), ROUND_HALF_EVEN))


def milligrams(value: Decimal, unit: str) -> int:
    """Return whole milligrams of a mass; raises UnitError for a unit that is no mass."""
    return whole(convert(value, unit, "kg") * MILLIGRAMS)


def liquid_milligrams(value: Decimal, unit: str, brix: float, celsius: float = 20.0) -> int:
    """Return whole milligrams of a volume (or mass) of a solution of °Bx at a temperature."""
    if dimension(unit) == "mass":
        return milligrams(value, unit)
    litres = convert(value, unit, "L")
    return whole(litres * Decimal(str(sucrose.density(brix, celsius))) * 1000)


def solids_milligrams(mass_mg: int, brix: Decimal) -> int:
    """Return whole milligrams of soluble solids in a mass of °Bx."""
    return whole(Decimal(mass_mg) * brix / 100)


def brix_of(mass_mg: int, solids_mg: int) -> Decimal:
    """Return °Bx of a mass holding solids; raises ValueError for no mass."""
    if mass_mg <= 0:
        raise ValueError("No mass has no density.")
    return Decimal(solids_mg) * 100 / Decimal(mass_mg)


def volume_of(mass_mg: int, brix: float, unit: str) -> Decimal:
    """Return the volume at 20 °C of a mass of °Bx."""
    litres = Decimal(mass_mg) / (Decimal(str(sucrose.density(brix, 20.0))) * 1000)
    return convert(litres, "L", unit)


def share_out(total: int, weights: Sequence[int]) -> list[int]:
    """Return whole shares in proportion to the weights, by largest remainder.

    They sum exactly to the total; ties go to the earlier place. With no weight at all the first
    takes everything. Raises ValueError for nothing to share among.
    """
    if not weights:
        raise ValueError("Nothing to share among.")
    everything = sum(weights)
    if everything <= 0:
        return [total] + [0] * (len(weights) - 1)
    shares = [total * weight // everything for weight in weights]
    rests = [total * weight % everything for weight in weights]
    order = sorted(range(len(weights)), key=lambda place: (-rests[place], place))
    for place in order[: total - sum(shares)]:
        shares[place] += 1
    return shares

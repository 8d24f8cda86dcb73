"""The one place where decimals become whole milligrams, and back; half to even."""

from collections.abc import Sequence
from decimal import ROUND_HALF_EVEN, Context, Decimal, localcontext

from lots.physics import sucrose

from .units import convert, dimension

MILLIGRAMS_PER_KILOGRAM = Decimal(1_000_000)
# Sums over a season reach 15 digits; 40 leave every product here exact before its one rounding.
_EXACT = Context(prec=40)


def whole(value: Decimal) -> int:
    """Return the nearest whole number, half to even; raises ValueError for no finite number."""
    if not value.is_finite():
        raise ValueError(f"{value} is not a number that can be rounded.")
    return int(value.to_integral_value(ROUND_HALF_EVEN))


def fixed(value: float | Decimal, places: int) -> str:
    """Return a number with fixed decimals, half to even; never with an exponent.

    A float counts as the shortest decimal that names it, so 0.125 is a tie and 0.1 is 0.1.
    Raises ValueError for no finite number.
    """
    number = Decimal(str(value))
    if not number.is_finite():
        raise ValueError(f"{value} is not a number that can be rounded.")
    with localcontext(_EXACT):
        rounded = number.quantize(Decimal(1).scaleb(-places), ROUND_HALF_EVEN)
        # A reader takes "-0.0" for a loss, so a value that rounds to nothing has no sign.
        return f"{abs(rounded) if rounded == 0 else rounded:f}"


def milligrams(value: Decimal, unit: str) -> int:
    """Return whole milligrams of a mass; raises UnitError for a unit that is no mass."""
    with localcontext(_EXACT):
        return whole(convert(value, unit, "kg") * MILLIGRAMS_PER_KILOGRAM)


def liquid_milligrams(value: Decimal, unit: str, brix: float, celsius: float = 20.0) -> int:
    """Return whole milligrams of a volume (or mass) of 0–85 °Bx at 0–105 °C.

    A volume goes through the density of pure sucrose solution (ICUMSA polynomial, uncertainty
    0.3 kg/m³ at 66–70 °Bx); a mass needs no density and ignores °Bx and temperature. Raises
    UnitError for a unit that is neither, ValueError outside the range.
    """
    if dimension(unit) == "mass":
        return milligrams(value, unit)
    with localcontext(_EXACT):
        litres = convert(value, unit, "L")
        return whole(litres * _grams_a_litre(brix, celsius) * 1000)


def _grams_a_litre(brix: float, celsius: float) -> Decimal:
    # kg/m³ and g/L are the same number.
    return Decimal(str(sucrose.density(brix, celsius)))


def solids_milligrams(mass_mg: int, brix: Decimal) -> int:
    """Return whole milligrams of soluble solids in a mass of 0–100 °Bx.

    Raises ValueError outside that range: more than all of a mass cannot be solids.
    """
    if not 0 <= brix <= 100:
        raise ValueError(f"Brix must be from 0 to 100; got {brix}.")
    with localcontext(_EXACT):
        return whole(Decimal(mass_mg) * brix / 100)


def brix_of(mass_mg: int, solids_mg: int) -> Decimal:
    """Return °Bx (solids by mass, %) of a mass holding solids; raises ValueError for no mass."""
    if mass_mg <= 0:
        raise ValueError("No mass has no density.")
    with localcontext(_EXACT):
        return Decimal(solids_mg) * 100 / Decimal(mass_mg)


def volume_of(mass_mg: int, brix: float | Decimal, unit: str) -> Decimal:
    """Return the volume at 20 °C of a mass of 0–85 °Bx; raises UnitError for no volume unit."""
    with localcontext(_EXACT):
        litres = Decimal(mass_mg) / (_grams_a_litre(float(brix), 20.0) * 1000)
        return convert(litres, "L", unit)


def share_out(total: int, weights: Sequence[int]) -> list[int]:
    """Return whole shares in proportion to the weights, by largest remainder.

    They sum exactly to the total; ties go to the earlier place and a weight of zero gets nothing,
    unless no weight is above zero: then the first takes everything. Raises ValueError for nothing
    to share among, and for a total or a weight below zero.
    """
    if not weights:
        raise ValueError("Nothing to share among.")
    if total < 0 or min(weights) < 0:
        raise ValueError("A total and its weights cannot be below zero.")
    everything = sum(weights)
    if everything == 0:
        return [total] + [0] * (len(weights) - 1)
    shares = [total * weight // everything for weight in weights]
    rests = [total * weight % everything for weight in weights]
    order = sorted(range(len(weights)), key=lambda place: (-rests[place], place))
    for place in order[: total - sum(shares)]:
        shares[place] += 1
    return shares

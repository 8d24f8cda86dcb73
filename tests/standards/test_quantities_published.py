"""Units and weights against published values, each with its source and mark."""

from datetime import date
from decimal import Decimal

import pytest

from lots.identification import lot_code
from lots.physics import sucrose
from lots.quantities import rounding
from lots.quantities.units import convert


@pytest.mark.parametrize(
    ("value", "one", "other", "published", "within"),
    [
        ("1", "US gal", "L", "3.785411784", "0"),  # 231 in³, NIST Handbook 44, READ
        ("1", "imp gal", "L", "4.54609", "0"),  # UK regulations 1995, MEMORY
        ("1", "lb", "kg", "0.45359237", "0"),  # agreement of 1959, READ
        ("40", "US gal", "L", "151.4", "0.1"),  # DERIVED
        ("26.4", "US gal", "L", "100", "0.1"),  # DERIVED
        ("5", "L", "US gal", "1.32", "0.01"),  # Canadian bulk threshold, DERIVED
        ("5", "US gal", "L", "18.93", "0.01"),  # Vermont bulk threshold, DERIVED
        ("1", "qt", "mL", "946", "0.5"),  # trade container table, READ
        ("1", "pt", "mL", "473", "0.5"),  # trade container table, READ
        ("3.4", "fl oz", "mL", "100", "0.6"),  # trade container table, READ
        ("1", "inHg", "kPa", "3.386389", "0.000001"),  # NIST SP 811, MEMORY
        ("29.92", "inHg", "kPa", "101.33", "0.015"),  # boiling table, DERIVED
        ("1", "psi", "kPa", "6.894757", "0.000001"),  # NIST SP 811, MEMORY
        ("100", "°C", "°F", "212", "0"),  # UNECE conversion vectors, READ
        ("180", "°F", "°C", "82", "0.3"),  # hot packing minimum in both units, READ
    ],
)
def test_conversion(value, one, other, published, within):
    found = convert(Decimal(value), one, other)
    assert abs(found - Decimal(published)) <= Decimal(within)


@pytest.mark.parametrize(
    ("brix", "pounds"), [(66.0, 11.027), (66.5, 11.053), (66.9, 11.073)]
)  # University of Vermont Extension, sap pricing page, READ
def test_pounds_in_a_gallon(brix, pounds):
    """The published weights are weights in air, so the buoyancy of air is taken off the mass."""
    true_mass = rounding.liquid_milligrams(Decimal(1), "US gal", brix) / 1e6
    density = sucrose.density(brix, 20.0)
    in_air = true_mass * (1 - 1.2046 / density) / (1 - 1.2046 / 8400)
    assert in_air / 0.45359237 == pytest.approx(pounds, abs=0.004)


@pytest.mark.parametrize(("brix", "pounds"), [("66.9", 7.41), ("66.0", 7.28)])  # DERIVED
def test_solids_in_a_gallon(brix, pounds):
    mass = rounding.liquid_milligrams(Decimal(1), "US gal", float(brix))
    solids = rounding.solids_milligrams(mass, Decimal(brix))
    assert solids / 453592.37 == pytest.approx(pounds, abs=0.01)


@pytest.mark.parametrize(
    ("day", "pattern", "serial", "code"),
    [
        (date(2017, 3, 21), "{DDD}{YY}-{SEQ}", 0, "08017-1"),  # Ontario lot-code page, READ
        (date(2014, 2, 1), "{YY}-{DDD}-{LETTER}", 1, "14-032-B"),  # growers' practice, READ-2
        (date(2024, 3, 21), "S{DDD}{LETTER}", 0, "S081A"),  # a leap year, DERIVED
    ],
)
def test_day_of_year_codes(day, pattern, serial, code):
    assert lot_code.render(pattern, day, serial) == code

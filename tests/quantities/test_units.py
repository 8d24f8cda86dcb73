"""Units convert by exact factors, both ways, and never across dimensions."""

from decimal import Decimal, localcontext

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.quantities import units

AMOUNTS = st.decimals("-1e9", "1e9", places=6, allow_nan=False, allow_infinity=False)
SAME_DIMENSION = st.sampled_from(
    [
        (one, other)
        for codes in (units.VOLUME, units.MASS, units.TEMPERATURE, units.PRESSURE)
        for one in codes
        for other in codes
    ]
)


@given(AMOUNTS, SAME_DIMENSION)
def test_there_and_back_is_the_same(value, pair):
    one, other = pair
    back = units.convert(units.convert(value, one, other), other, one)
    assert abs(back - value) <= max(abs(value), Decimal(1)) * Decimal("1e-35")


@given(AMOUNTS)
def test_the_context_of_the_caller_changes_nothing(value):
    with localcontext() as coarse:
        coarse.prec = 5
        rough = units.convert(value, "US gal", "L")
    assert rough == units.convert(value, "US gal", "L")


@pytest.mark.parametrize(
    ("unit", "count"),
    [("qt", 4), ("pt", 8), ("fl oz", 128)],
)
def test_parts_of_a_us_gallon(unit, count):
    assert units.convert(Decimal(1), "US gal", unit) == count


@pytest.mark.parametrize(
    ("fahrenheit", "celsius"), [("32", "0"), ("212", "100"), ("-40", "-40"), ("180", None)]
)
def test_temperatures(fahrenheit, celsius):
    found = units.convert(Decimal(fahrenheit), "°F", "°C")
    assert found == Decimal(celsius) if celsius else round(found, 4) == Decimal("82.2222")


@pytest.mark.parametrize("unit", ["gal", "oz", "", "KG", "us gal"])
def test_an_unknown_unit_is_refused(unit):
    with pytest.raises(units.UnitError, match="not a unit"):
        units.convert(Decimal(1), unit, "L")


@pytest.mark.parametrize(("one", "other"), [("lb", "L"), ("°F", "kPa"), ("US gal", "kg")])
def test_another_dimension_is_refused(one, other):
    with pytest.raises(units.UnitError, match="cannot become"):
        units.convert(Decimal(1), one, other)


@pytest.mark.parametrize("value", ["NaN", "Infinity"])
def test_no_number_is_refused(value):
    with pytest.raises(ValueError, match="not a number"):
        units.convert(Decimal(value), "L", "mL")


def test_every_code_has_one_dimension():
    codes = (*units.VOLUME, *units.MASS, *units.TEMPERATURE, *units.PRESSURE)
    assert len(codes) == len(set(codes)) == 15
    assert {units.dimension(unit) for unit in codes} == {
        "volume", "mass", "temperature", "pressure",
    }  # fmt: skip

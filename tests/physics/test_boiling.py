"""Boiling points and draw-off against published tables.

Marks: READ, the row was seen in a copy of the source; MEMORY, recalled and then tested.
"""

import pytest

from lots.physics import draw_off, sucrose, water

INCH_OF_MERCURY = 3.386389  # kPa, at 32 °F

# X2. iapws (IAPWS-IF97), a reference library's values in Pa and °C, READ.
IAPWS = [
    (80000, 93.48535),
    (90000, 96.68704),
    (95000, 98.17833),
    (101325, 99.97430),
    (105000, 100.97557),
]
# X3. CoolProp 8.0.0 (IAPWS-95), a reference library's values in Pa and °C, READ.
COOLPROP = [
    (80000, 93.48554),
    (90000, 96.68715),
    (95000, 98.17839),
    (101325, 99.97430),
    (105000, 100.97552),
]
# E1. Distillers' group table, °F by barometer in inHg and by altitude in feet, READ.
BAROMETER = [(27.6, 208.04), (28.0, 208.75), (28.4, 209.44), (28.8, 210.13), (29.2, 210.81)]
ALTITUDE = [(0, 212.0), (500, 211.1), (1000, 210.2), (2000, 208.4), (3000, 206.6), (4000, 204.8)]
# E3. Rise in °F: a density chart; a mailing-list post; Ontario's 104.2 °C for 67 °Bx, READ.
MAPLE_RISE = [(66.0, 7.10), (66.9, 7.50), (67.0, 7.56)]
# E4. sugar technology's table of pure sucrose at 760 mmHg, K, MEMORY.
SUGAR_RISE = [
    (10, 0.10),
    (20, 0.30),
    (30, 0.60),
    (40, 1.00),
    (50, 1.80),
    (60, 3.00),
    (70, 5.10),
    (75, 7.00),
    (80, 9.40),
]
# Regression rows, not published: station pressure inHg, target °Bx, °F.
DRAW_OFF = [
    (28.0, 66.0, 215.75),
    (28.0, 68.9, 216.98),
    (29.0, 66.9, 217.90),
    (29.92, 66.0, 219.15),
    (29.92, 66.9, 219.51),
    (30.5, 68.9, 221.38),
]


@pytest.mark.parametrize(("pascal", "published"), IAPWS)
def test_water_boils(pascal, published):
    # The rows have five decimals, so a table's own rounding is larger than the deviation of 1e-6.
    assert water.boiling_point(pascal / 1000) == pytest.approx(published, abs=6e-6)
    assert water.saturation_pressure(published) * 1000 == pytest.approx(pascal, abs=0.1)


@pytest.mark.parametrize(("pascal", "published"), COOLPROP)
def test_water_boils_by_another_formulation(pascal, published):
    assert water.boiling_point(pascal / 1000) == pytest.approx(published, abs=3e-4)


@pytest.mark.parametrize(("inches", "published"), BAROMETER)
def test_water_boils_by_barometer(inches, published):
    found = water.boiling_point(inches * INCH_OF_MERCURY) * 1.8 + 32
    assert found == pytest.approx(published, abs=0.17)


@pytest.mark.parametrize(("feet", "published"), ALTITUDE)
def test_water_boils_by_altitude(feet, published):
    kilopascal = 101.325 * (1 - 2.25577e-5 * feet * 0.3048) ** 5.25588
    assert water.boiling_point(kilopascal) * 1.8 + 32 == pytest.approx(published, abs=0.17)


@pytest.mark.parametrize(("brix", "published"), MAPLE_RISE)
def test_rise_at_draw_off(brix, published):
    assert sucrose.boiling_point_elevation(brix) * 1.8 == pytest.approx(published, abs=0.15)


@pytest.mark.parametrize(("brix", "published"), SUGAR_RISE)
def test_rise_of_pure_sucrose(brix, published):
    assert sucrose.boiling_point_elevation(brix) == pytest.approx(published, abs=0.3)


@pytest.mark.parametrize(("inches", "brix", "fahrenheit"), DRAW_OFF)
def test_draw_off(inches, brix, fahrenheit):
    kilopascal = inches * INCH_OF_MERCURY
    by_pressure = draw_off.temperature(brix, kilopascal=kilopascal)
    assert by_pressure * 1.8 + 32 == pytest.approx(fahrenheit, abs=0.006)
    by_water = draw_off.temperature(brix, water_boiling_celsius=water.boiling_point(kilopascal))
    assert by_water == pytest.approx(by_pressure, abs=1e-6)


def test_draw_off_asks_for_exactly_one_and_refuses_a_weather_report():
    with pytest.raises(ValueError, match="not both and not neither.*reduced to sea level"):
        draw_off.temperature(66.9)
    with pytest.raises(ValueError, match="not both and not neither"):
        draw_off.temperature(66.9, water_boiling_celsius=99.0, kilopascal=98.0)

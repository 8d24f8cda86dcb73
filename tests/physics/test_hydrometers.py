"""Hydrometer correction and the Baumé scale against published tables.

Marks: READ, the row was seen in a copy of the source; MEMORY, recalled and then tested.
"""

import pytest

from lots.physics import hydrometer

SIXTY_FAHRENHEIT = (60 - 32) / 1.8

# C1. NBS C440, corrections to Brix hydrometers standard at 20 °C, MEMORY.
CORRECTION = [
    (0, 0, -0.30),
    (10, 0, -0.65),
    (60, 0, -1.44),
    (0, 5, -0.36),
    (10, 5, -0.56),
    (30, 5, -0.86),
    (50, 5, -1.05),
    (60, 5, -1.10),
    (70, 5, -1.14),
    (0, 10, -0.32),
    (10, 10, -0.43),
    (30, 10, -0.60),
    (50, 10, -0.72),
    (60, 10, -0.75),
    (70, 10, -0.77),
    (0, 15, -0.20),
    (10, 15, -0.24),
    (30, 15, -0.32),
    (50, 15, -0.36),
    (60, 15, -0.38),
    (70, 15, -0.39),
    (0, 15.56, -0.18),
    (10, 15.56, -0.22),
    (30, 15.56, -0.29),
    (50, 15.56, -0.33),
    (60, 15.56, -0.34),
    (70, 15.56, -0.34),
    (0, 25, 0.27),
    (10, 25, 0.30),
    (30, 25, 0.35),
    (50, 25, 0.39),
    (60, 25, 0.40),
    (70, 25, 0.39),
    (0, 30, 0.61),
    (10, 30, 0.63),
    (30, 30, 0.73),
    (50, 30, 0.79),
    (60, 30, 0.80),
    (70, 30, 0.81),
    (0, 40, 1.42),
    (10, 40, 1.47),
    (30, 40, 1.60),
    (50, 40, 1.65),
    (60, 40, 1.66),
    (70, 40, 1.65),
    (0, 50, 2.46),
    (10, 50, 2.50),
    (30, 50, 2.58),
    (50, 50, 2.58),
    (60, 50, 2.56),
    (70, 50, 2.52),
    (0, 60, 3.69),
    (10, 60, 3.73),
    (30, 60, 3.67),
    (50, 60, 3.57),
    (60, 60, 3.50),
    (70, 60, 3.43),
]
# C2. evaporator maker's manual (2014) p. 19: 60 °F hydrometer in 66.9 °Bx, READ.
CHART_66_9 = [
    (209, 59.0),
    (202, 59.6),
    (193, 60.0),
    (185, 60.4),
    (176, 60.9),
    (167, 61.4),
    (158, 61.8),
    (149, 62.3),
    (140, 62.8),
    (130, 63.3),
    (120, 63.8),
    (110, 64.3),
    (100, 64.8),
    (90, 65.4),
    (80, 65.9),
    (70, 66.4),
    (60, 66.9),
    (50, 67.4),
    (211, 59.1),
]
# C3. density chart for 60 °F hydrometers in 66.0 °Bx, READ.
CHART_66_0 = [
    (209, 58.0),
    (202, 58.5),
    (193, 59.0),
    (185, 59.5),
    (180, 59.7),
    (176, 60.0),
    (167, 60.5),
    (158, 61.0),
    (149, 61.5),
]
# D1. Mohos (2010) table A2.1; from 66 °Bx on Vermont's legal pairs, READ.
BAUME = [
    (5, 2.80),
    (10, 5.57),
    (15, 8.34),
    (20, 11.10),
    (30, 16.60),
    (40, 22.00),
    (60, 32.49),
    (65, 35.04),
    (70, 37.60),
    (80, 42.47),
    (85, 44.86),
    (66, 35.60),
    (66.9, 36.00),
    (68.9, 37.00),
]


@pytest.mark.parametrize(("reading", "celsius", "published"), CORRECTION)
def test_correction_to_add(reading, celsius, published):
    tolerance = 0.11 if celsius < 5 else 0.055
    correction = hydrometer.true_brix(reading, celsius, 20.0) - reading
    assert correction == pytest.approx(published, abs=tolerance)


@pytest.mark.parametrize(("fahrenheit", "published"), CHART_66_9)
def test_reading_in_66_9(fahrenheit, published):
    # The chart steps by 0.25 °Bé and runs straight between its ends, so it reads low between them.
    shown = hydrometer.reading_for(66.9, (fahrenheit - 32) / 1.8, SIXTY_FAHRENHEIT)
    assert shown == pytest.approx(published, abs=0.35)


@pytest.mark.parametrize(("fahrenheit", "published"), CHART_66_0)
def test_reading_in_66_0(fahrenheit, published):
    shown = hydrometer.reading_for(66.0, (fahrenheit - 32) / 1.8, SIXTY_FAHRENHEIT)
    assert shown == pytest.approx(published, abs=0.25)


@pytest.mark.parametrize(("brix", "published"), BAUME)
def test_baume(brix, published):
    assert hydrometer.baume_from_brix(brix) == pytest.approx(published, abs=0.06)
    # 0.06 °Bé is 0.13 °Bx at 85 °Bx and less below.
    assert hydrometer.brix_from_baume(published) == pytest.approx(brix, abs=0.13)


def test_the_reference_temperature_belongs_to_the_instrument():
    at_60, at_68 = (hydrometer.true_brix(66.0, 50.0, (f - 32) / 1.8) for f in (60, 68))
    assert at_60 - at_68 == pytest.approx(0.34, abs=0.01)
    assert hydrometer.true_brix(66.0, 20.0, 20.0) == pytest.approx(66.0, abs=1e-9)


def test_cold_water_comes_out_below_zero_and_hot_water_has_no_reading():
    assert hydrometer.true_brix(0.0, 5.0, 20.0) < 0
    with pytest.raises(ValueError, match="No reading from 0 to 85"):
        hydrometer.reading_for(0.0, 60.0, 20.0)

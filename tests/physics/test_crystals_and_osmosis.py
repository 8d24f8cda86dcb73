"""Solubility and osmotic pressure against published tables.

Marks: READ, the row was seen in a copy of the source; MEMORY, recalled and then tested.
"""

import math

import pytest

from lots.physics import sucrose

ATMOSPHERE = 101.325  # kPa
PSI = 6.894757  # kPa

# I1. sugar-factory table of solubility, % by mass, READ.
FACTORY = [
    (0, 64.44),
    (20, 66.74),
    (40, 70.22),
    (60, 74.32),
    (80, 78.74),
    (100, 82.89),
]
# I2. Mohos (2010) table A2.3, Herzfeld type, % by mass, READ.
OLDER = [
    (0, 64.18),
    (10, 65.58),
    (20, 67.09),
    (30, 68.70),
    (40, 70.42),
    (50, 72.25),
    (60, 74.18),
    (70, 76.22),
    (80, 78.36),
    (100, 82.97),
]
# J1. Robinson and Stokes, 25 °C, by molality, MEMORY.
OSMOTIC_COEFFICIENT = [
    (0.1, 1.008),
    (0.2, 1.017),
    (0.5, 1.041),
    (1, 1.088),
    (2, 1.189),
    (3, 1.288),
    (4, 1.375),
    (5, 1.450),
    (6, 1.511),
]
# J2. Morse and Frazer, atm at 20 °C, by molality, MEMORY.
OSMOTIC_PRESSURE = [
    (0.1, 2.59),
    (0.2, 5.06),
    (0.3, 7.61),
    (0.4, 10.14),
    (0.5, 12.75),
    (0.6, 15.39),
    (0.8, 20.91),
    (1, 26.64),
]
# Regression rows, not published: °Bx, psi at 5 °C, psi at 20 °C.
PSI_ROWS = [
    (1, 9.9, 10.5),
    (2, 20.2, 21.2),
    (8, 87.9, 92.4),
    (20, 267.0, 279.6),
    (35, 625.1, 652.0),
]


def _brix(molality):
    grams = molality * 342.2965
    return 100 * grams / (1000 + grams)


@pytest.mark.parametrize(("celsius", "published"), FACTORY)
def test_solubility(celsius, published):
    tolerance = 0.13 if celsius <= 80 else 0.26
    assert sucrose.solubility(celsius) == pytest.approx(published, abs=tolerance)


@pytest.mark.parametrize(("celsius", "published"), OLDER)
def test_solubility_of_an_older_table(celsius, published):
    assert sucrose.solubility(celsius) == pytest.approx(published, abs=0.45)


@pytest.mark.parametrize(("molality", "published"), OSMOTIC_COEFFICIENT)
def test_osmotic_coefficient(molality, published):
    activity = sucrose.water_activity(_brix(molality), 25.0)
    coefficient = -math.log(activity) / (molality * 0.01801528)
    assert coefficient == pytest.approx(published, abs=0.026)


@pytest.mark.parametrize(("molality", "published"), OSMOTIC_PRESSURE)
def test_osmotic_pressure(molality, published):
    found = sucrose.osmotic_pressure(_brix(molality), 20.0) / ATMOSPHERE
    assert found == pytest.approx(published, abs=0.18)


@pytest.mark.parametrize(("brix", "cold", "warm"), PSI_ROWS)
def test_feed_pressure_floor(brix, cold, warm):
    assert sucrose.osmotic_pressure(brix, 5.0) / PSI == pytest.approx(cold, abs=0.06)
    assert sucrose.osmotic_pressure(brix, 20.0) / PSI == pytest.approx(warm, abs=0.06)

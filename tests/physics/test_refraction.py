"""Refractive index and refractometer correction against published tables.

The curve was fitted to B1, B3 to B5 and X5: there the tolerance shows the fit, not a proof.
Marks: READ, the row was seen in a copy of the source; MEMORY, recalled and then tested.
"""

import pytest

from lots.physics import refractometer, sucrose

# B1. ICUMSA 1974 scale at 20 °C, as carried by chemicals 1.5.2 (Atago data book), READ.
ICUMSA_1974 = [
    (0, 1.33299),
    (2, 1.33586),
    (5, 1.34026),
    (10, 1.34782),
    (15, 1.35568),
    (20, 1.36384),
    (25, 1.37233),
    (30, 1.38115),
    (35, 1.39032),
    (40, 1.39986),
    (45, 1.40978),
    (50, 1.42009),
    (55, 1.43080),
    (60, 1.44193),
    (65, 1.45348),
    (66, 1.45584),
    (67, 1.45822),
    (68, 1.46061),
    (69, 1.46303),
    (70, 1.46546),
    (75, 1.47787),
    (80, 1.49071),
    (85, 1.50398),
]
# B2. CRC Handbook sucrose table, four decimals, READ.
CRC_INDEX = [
    (0, 1.3330),
    (10, 1.3478),
    (20, 1.3639),
    (30, 1.3812),
    (40, 1.3999),
    (50, 1.4201),
    (60, 1.4419),
    (70, 1.4654),
]
# B3. GOST table A.1, the 1936 international table, READ.
CORRECTION_1936 = [
    (0, 10, -0.50),
    (10, 10, -0.58),
    (30, 10, -0.68),
    (60, 10, -0.76),
    (65, 10, -0.78),
    (70, 10, -0.79),
    (0, 12, -0.42),
    (10, 12, -0.48),
    (30, 12, -0.56),
    (60, 12, -0.61),
    (65, 12, -0.63),
    (70, 12, -0.63),
    (0, 15, -0.27),
    (10, 15, -0.31),
    (30, 15, -0.35),
    (60, 15, -0.39),
    (65, 15, -0.40),
    (70, 15, -0.40),
    (0, 18, -0.12),
    (10, 18, -0.13),
    (30, 18, -0.14),
    (60, 18, -0.16),
    (65, 18, -0.16),
    (70, 18, -0.16),
    (0, 21, 0.06),
    (30, 21, 0.08),
    (65, 21, 0.08),
]
# B4. OIV-MA-AS2-02 Table I, READ.
CORRECTION_OIV = [
    (10, 10, -0.59),
    (30, 10, -0.69),
    (50, 10, -0.74),
    (60, 10, -0.75),
    (65, 10, -0.75),
    (70, 10, -0.75),
    (10, 15, -0.32),
    (30, 15, -0.36),
    (50, 15, -0.38),
    (60, 15, -0.38),
    (65, 15, -0.38),
    (70, 15, -0.38),
]
# B5. AOAC international temperature correction table, MEMORY.
CORRECTION_WARM = [
    (0, 25, 0.35),
    (10, 25, 0.36),
    (20, 25, 0.38),
    (30, 25, 0.39),
    (60, 25, 0.40),
    (70, 25, 0.40),
    (0, 30, 0.72),
    (10, 30, 0.75),
    (20, 30, 0.77),
    (30, 30, 0.78),
    (60, 30, 0.80),
    (70, 30, 0.81),
]
# X5. chemicals 1.5.2, index of water by IAPWS in air, a reference library's values, READ.
WATER_INDEX = [
    (2, 1.33396),
    (5, 1.33390),
    (10, 1.33370),
    (15, 1.33339),
    (20, 1.33299),
    (25, 1.33249),
    (30, 1.33193),
    (40, 1.33058),
]


@pytest.mark.parametrize(("brix", "published"), ICUMSA_1974)
def test_index_of_the_icumsa_scale(brix, published):
    assert sucrose.refractive_index(brix, 20.0) == pytest.approx(published, abs=8e-6)


@pytest.mark.parametrize(("brix", "published"), CRC_INDEX)
def test_index_of_the_handbook(brix, published):
    assert sucrose.refractive_index(brix, 20.0) == pytest.approx(published, abs=1e-4)


@pytest.mark.parametrize(("celsius", "published"), WATER_INDEX)
def test_index_of_water(celsius, published):
    assert sucrose.refractive_index(0.0, celsius) == pytest.approx(published, abs=1.2e-5)


@pytest.mark.parametrize(
    ("reading", "celsius", "published"), CORRECTION_1936 + CORRECTION_OIV + CORRECTION_WARM
)
def test_correction_to_add(reading, celsius, published):
    correction = refractometer.true_brix(reading, celsius) - reading
    assert correction == pytest.approx(published, abs=0.035)

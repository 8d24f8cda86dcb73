"""Density against published tables: the deviation found is the tolerance, not a standard's limit.

Marks: READ, the row was seen in a copy of the source; MEMORY, recalled and then tested.
"""

import pytest

from lots.physics import sucrose, water

AIR = 1.2046  # kg/m³ at 20 °C
BRASS = 8400.0  # kg/m³, the weights of a trade balance

# A1. CRC Handbook sucrose table at 20 °C, Plato/C440 basis, READ.
CRC_DENSITY = [
    (0, 998.2),
    (2, 1006.0),
    (5, 1017.8),
    (10, 1038.1),
    (15, 1059.2),
    (20, 1081.0),
    (30, 1127.0),
    (40, 1176.5),
    (50, 1229.5),
    (54, 1251.8),
    (58, 1274.7),
    (60, 1286.4),
    (62, 1298.3),
    (64, 1310.3),
    (66, 1322.4),
    (68, 1334.8),
    (70, 1347.2),
    (74, 1372.6),
]
# A2. NBS C440 Table 109 and Landolt–Börnstein anchors, 20 °C, READ.
ANCHORS = [
    (0, 998.21),
    (10, 1038.11),
    (20, 1080.93),
    (50, 1229.53),
    (70, 1347.14),
]
# A3. SG 20/20: the anchors of A2, then the Beet-Sugar Handbook (2007) Table A.1, READ.
TRUE_GRAVITY = [
    (10, 1.03998),
    (20, 1.08287),
    (50, 1.23174),
    (70, 1.34956),
    (1, 1.00389),
    (3, 1.01172),
    (6, 1.02366),
    (8, 1.03176),
    (11, 1.04413),
    (13, 1.05252),
    (15, 1.06104),
    (17, 1.06968),
    (19, 1.07844),
    (21, 1.08733),
]
# A4. NBS C440 Table 114, apparent SG 20/20, READ.
APPARENT_GRAVITY = [
    (0, 1.00000),
    (2, 1.00780),
    (4, 1.01569),
    (6, 1.02369),
    (8, 1.03180),
    (10, 1.04003),
    (12, 1.04837),
    (14, 1.05683),
    (16, 1.06542),
    (18, 1.07413),
    (20, 1.08297),
    (22, 1.09194),
    (24, 1.10104),
    (26, 1.11027),
    (28, 1.11963),
    (30, 1.12913),
]
# A5. Chen, Brix and Pounds Solids Tables (1992), lb per US gal in air, READ.
SAP_GALLONS = [
    (0.0, 8.322),
    (0.5, 8.338),
    (1.0, 8.354),
    (1.5, 8.370),
    (2.0, 8.387),
    (2.5, 8.403),
    (3.0, 8.419),
    (3.5, 8.436),
    (4.0, 8.452),
    (4.5, 8.469),
    (5.0, 8.486),
]
# A6. lb per US gal of syrup in air, quoted on a web page (C440 basis), READ.
SYRUP_GALLONS = [
    (66.0, 11.027),
    (66.5, 11.053),
    (66.9, 11.073),
]
# A7. sugar-laboratory table of true density at 27.5 °C, READ.
AT_27_5 = [
    (0, 996.373),
    (1, 1000.201),
    (2, 1004.058),
    (3, 1007.944),
    (4, 1011.858),
    (5, 1015.801),
    (10, 1035.950),
    (15, 1056.841),
    (20, 1078.497),
    (23.9, 1095.939),
]
# X1. iapws 1.5.5 (IAPWS-IF97), a reference library's values, READ.
WATER = [
    (4, 999.975),
    (10, 999.702),
    (20, 998.206),
    (40, 992.224),
    (60, 983.211),
    (85, 968.622),
    (99, 959.072),
]
# X6. thermo 0.6.1, Laliberté (2009) at 15–55 °C, a reference library's values, READ.
LALIBERTE = [
    (5, 15, 1018.86),
    (5, 20, 1017.87),
    (5, 25, 1016.62),
    (5, 40, 1011.56),
    (5, 55, 1004.87),
    (10, 15, 1039.30),
    (10, 20, 1038.20),
    (10, 25, 1036.85),
    (10, 40, 1031.56),
    (10, 55, 1024.70),
    (20, 15, 1082.33),
    (20, 20, 1081.00),
    (20, 25, 1079.45),
    (20, 40, 1073.66),
    (20, 55, 1066.48),
    (30, 15, 1128.50),
    (30, 20, 1126.93),
    (30, 25, 1125.15),
    (30, 40, 1118.83),
    (30, 55, 1111.31),
    (40, 15, 1178.17),
    (40, 20, 1176.31),
    (40, 25, 1174.29),
    (40, 40, 1167.40),
    (40, 55, 1159.56),
    (50, 15, 1231.73),
    (50, 20, 1229.57),
    (50, 25, 1227.27),
    (50, 40, 1219.78),
    (50, 55, 1211.62),
]


@pytest.mark.parametrize(("brix", "published"), CRC_DENSITY)
def test_density_at_20(brix, published):
    assert sucrose.density(brix, 20.0) == pytest.approx(published, abs=0.35)


@pytest.mark.parametrize(("brix", "published"), ANCHORS)
def test_density_anchors(brix, published):
    assert sucrose.density(brix, 20.0) == pytest.approx(published, abs=0.4)


@pytest.mark.parametrize(("brix", "published"), TRUE_GRAVITY)
def test_true_gravity(brix, published):
    gravity = sucrose.density(brix, 20.0) / water.density(20.0)
    assert gravity == pytest.approx(published, abs=0.0004)


@pytest.mark.parametrize(("brix", "published"), APPARENT_GRAVITY)
def test_apparent_gravity(brix, published):
    gravity = (sucrose.density(brix, 20.0) - AIR) / (water.density(20.0) - AIR)
    assert gravity == pytest.approx(published, abs=0.00012)


def _pounds_in_air(brix):
    in_air = (sucrose.density(brix, 20.0) - AIR) / (1 - AIR / BRASS)
    return in_air * 3.785411784 / 1000 / 0.45359237


@pytest.mark.parametrize(("brix", "published"), SAP_GALLONS)
def test_pounds_in_a_gallon_of_sap(brix, published):
    assert _pounds_in_air(brix) == pytest.approx(published, abs=0.0011)


@pytest.mark.parametrize(("brix", "published"), SYRUP_GALLONS)
def test_pounds_in_a_gallon_of_syrup(brix, published):
    assert _pounds_in_air(brix) == pytest.approx(published, abs=0.004)


@pytest.mark.parametrize(("brix", "published"), AT_27_5)
def test_density_at_27_5(brix, published):
    assert sucrose.density(brix, 27.5) == pytest.approx(published, abs=0.02)


@pytest.mark.parametrize(("celsius", "published"), WATER)
def test_water(celsius, published):
    assert water.density(celsius) == pytest.approx(published, abs=0.025)
    assert sucrose.density(0.0, celsius) == water.density(celsius)


@pytest.mark.parametrize(("brix", "celsius", "published"), LALIBERTE)
def test_density_of_another_model(brix, celsius, published):
    assert sucrose.density(brix, celsius) == pytest.approx(published, abs=0.3)


def test_density_of_the_hot_test():
    # F1. What a 60 °F hydrometer's hot mark (59.1 at 211 °F in 66.9 °Bx) says of the density:
    # evaporator maker's manual (2014) p. 19, READ.
    assert sucrose.density(66.9, (211 - 32) / 1.8) == pytest.approx(1280.8, abs=1.0)

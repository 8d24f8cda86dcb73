"""Filling, sap and syrup, blends and colour against published rules and worked rows.

Marks: READ, the row was seen in a copy of the source; MEMORY, recalled and then tested.
"""

import pytest

from lots.physics import blend, colour, fill, sap

# G1. Perkins and Isselhardt (2013), as a trade magazine quotes them: sap, syrup, volumes, READ.
RULES = [
    (2, 66.0, 43.55),
    (1, 66.0, 87.10),
    (3, 66.0, 29.03),
    (2, 66.9, 44.10),
    (3, 66.9, 29.40),
    (2, 65.5, 43.0),
    (2.5, 65.5, 34.4),
    (3, 65.5, 28.7),
]
# G2. 87.1/X − 0.32 to 66.0 °Bx: the constant of G1 READ, its offset MEMORY.
CONCENTRATE = [
    (2, 43.23),
    (4, 21.45),
    (8, 10.57),
    (12, 6.94),
    (15, 5.49),
    (18, 4.52),
    (22, 3.64),
    (30, 2.58),
    (66, 1.00),
]
# Regression rows, not published: °F, volume against 68 °F at 66.0, 66.9 and 68.9 °Bx.
HOT = [
    (100, 1.00719, 1.00719, 1.00718),
    (140, 1.01724, 1.01721, 1.01715),
    (180, 1.02844, 1.02836, 1.02819),
    (185, 1.02990, 1.02982, 1.02962),
    (200, 1.03435, 1.03423, 1.03397),
    (211, 1.03763, 1.03749, 1.03716),
]
# Regression rows, not published: mL, °Bx, grams.
NET = [
    (3785.411784, 66.0, 5006.8),
    (3785.411784, 66.9, 5027.7),
    (946.352946, 66.9, 1256.9),
    (500, 68.9, 670.3),
    (250, 66.0, 330.7),
]
# Regression rows, not published: parts of (volume, °Bx), volume, °Bx.
BLENDS = [
    ([(10, 66.0), (10, 68.0)], 20.000, 67.005),
    ([(30, 65.0), (20, 68.5)], 49.999, 66.414),
    ([(40, 67.2), (1, 2.0)], 40.986, 65.990),
    ([(100, 68.9), (2.2, 0.0)], 102.164, 67.790),
]
# Regression rows, not published: parts of (volume, %Tc), estimate, class.
COLOURS = [
    ([(1, 80), (1, 40)], 56.57, "amber"),
    ([(10, 76), (30, 60)], 63.65, "amber"),
    ([(40, 78), (15, 30)], 60.11, "amber"),
    ([(1, 90), (1, 10)], 30.00, "dark"),
    ([(3, 75), (1, 74)], 74.75, "amber"),
]
# Canadian Grade Compendium Vol. 7 (75.0, 50.0 and 25.0 as lower edges), READ.
EDGES = [
    (100, "golden"),
    (75.0, "golden"),
    (74.999, "amber"),
    (74.95, "amber"),
    (50.0, "amber"),
    (49.999, "dark"),
    (25.0, "dark"),
    (24.999, "very-dark"),
    (0, "very-dark"),
]


@pytest.mark.parametrize(("sap_brix", "syrup_brix", "published"), RULES)
def test_sap_per_syrup(sap_brix, syrup_brix, published):
    assert sap.sap_per_syrup(sap_brix, syrup_brix) == pytest.approx(published, abs=0.3)


@pytest.mark.parametrize(("brix", "published"), CONCENTRATE)
def test_revised_rule(brix, published):
    assert sap.revised_rule(brix) == pytest.approx(published, abs=0.006)
    assert sap.sap_per_syrup(brix, 66.0) == pytest.approx(published, abs=0.17)


@pytest.mark.parametrize(("brix", "published"), [(2, 43.0), (2.5, 34.4), (3, 28.7)])
def test_rule_of_86(brix, published):  # the same magazine, READ
    assert sap.rule_of_86(brix) == pytest.approx(published, abs=0.05)


def test_expected_syrup():
    assert sap.expected_syrup(0.0, 2.0, 66.0) == 0
    assert sap.expected_syrup(1000.0, 2.0, 66.0) == pytest.approx(1000 / 43.39, abs=0.005)


@pytest.mark.parametrize(("fahrenheit", "at_66", "at_66_9", "at_68_9"), HOT)
def test_hot_fill(fahrenheit, at_66, at_66_9, at_68_9):
    hot = (fahrenheit - 32) / 1.8
    for brix, ratio in ((66.0, at_66), (66.9, at_66_9), (68.9, at_68_9)):
        assert fill.volume_at(1.0, brix, 20.0, hot) == pytest.approx(ratio, abs=6e-6)


@pytest.mark.parametrize(("millilitres", "brix", "grams"), NET)
def test_net_contents(millilitres, brix, grams):
    assert fill.net_mass(millilitres, brix) == pytest.approx(grams, abs=0.06)
    assert fill.net_volume(grams, brix) == pytest.approx(millilitres, rel=1.5e-4)


@pytest.mark.parametrize(("parts", "volume", "brix"), BLENDS)
def test_mix(parts, volume, brix):
    assert blend.mix(parts) == pytest.approx((volume, brix), abs=6e-4)


def test_water_to_reach():
    assert blend.water_to_reach(100.0, 68.9, 68.9) == 0
    water = blend.water_to_reach(100.0, 68.9, 66.9)
    assert blend.mix([(100.0, 68.9), (water, 0.0)])[1] == pytest.approx(66.9, abs=1e-9)


@pytest.mark.parametrize(("parts", "estimate", "found"), COLOURS)
def test_blend_transmittance(parts, estimate, found):
    assert colour.blend_transmittance(parts) == pytest.approx(estimate, abs=0.006)
    assert colour.grade_class(estimate) == found


@pytest.mark.parametrize(("value", "found"), EDGES)
def test_class_by_the_unrounded_value(value, found):
    assert colour.grade_class(value) == found


@pytest.mark.parametrize(
    ("value", "text"), [(74.99, "74.9"), (75.0, "75.0"), (0.3, "0.3"), (0, "0.0"), (100, "100.0")]
)
def test_shown_is_cut_and_never_rounded_up(value, text):
    assert colour.shown(value) == text

"""The physics floor against published tables.

Keys: CRC, LBGAL, ICU74, GOST, CH669, MOHOS, VT [READ]; C440H, RS [MEMORY]; iapws is a reference
library's value. Tolerances document the agreement found; they are no limits of a standard.
"""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.physics import colour, draw_off, fill, hydrometer, refractometer, sap, sucrose, water


@pytest.mark.parametrize(
    ("brix", "published"),
    [(0, 998.2), (2, 1006.0), (10, 1038.1), (30, 1127.0), (60, 1286.4), (66, 1322.4), (70, 1347.2)],
)
def test_density_at_20(brix, published):  # CRC Handbook, READ
    assert sucrose.density(brix, 20.0) == pytest.approx(published, abs=0.35)


@pytest.mark.parametrize(("brix", "published"), [(0, 996.373), (5, 1015.801), (20, 1078.497)])
def test_density_at_27_5(brix, published):  # laboratory table at 27.5 °C, READ
    assert sucrose.density(brix, 27.5) == pytest.approx(published, abs=0.02)


@pytest.mark.parametrize(
    ("brix", "published"),
    [(0, 1.33299), (20, 1.36384), (50, 1.42009), (66, 1.45584), (85, 1.50398)],
)
def test_refractive_index(brix, published):  # ICUMSA 1974, READ
    assert sucrose.refractive_index(brix, 20.0) == pytest.approx(published, abs=8e-6)


@pytest.mark.parametrize(
    ("reading", "celsius", "published"),
    [(0, 10, -0.50), (60, 10, -0.76), (65, 15, -0.40), (70, 18, -0.16), (65, 21, 0.08)],
)
def test_refractometer_correction(reading, celsius, published):  # GOST table A.1, READ
    corrected = refractometer.true_brix(reading, celsius)
    assert corrected - reading == pytest.approx(published, abs=0.035)


@pytest.mark.parametrize(
    ("reading", "celsius", "published"),
    [(60, 5, -1.10), (60, 15, -0.38), (60, 30, 0.80), (60, 60, 3.50), (10, 50, 2.50)],
)
def test_hydrometer_correction(reading, celsius, published):  # NBS C440, MEMORY
    assert hydrometer.true_brix(reading, celsius, 20.0) - reading == pytest.approx(
        published, abs=0.11
    )


@pytest.mark.parametrize(
    ("fahrenheit", "published"),
    [(209, 59.0), (185, 60.4), (140, 62.8), (100, 64.8), (60, 66.9), (50, 67.4)],
)
def test_hydrometer_reading_of_66_9(fahrenheit, published):  # maker's manual 2014 p. 19, READ
    celsius = (fahrenheit - 32) / 1.8
    assert hydrometer.reading_for(66.9, celsius, 15.556) == pytest.approx(published, abs=0.35)


@pytest.mark.parametrize(("brix", "published"), [(66.0, 35.6), (66.9, 36.0), (68.9, 37.0)])
def test_baume(brix, published):  # Vermont's legal pairs, READ
    assert hydrometer.baume_from_brix(brix) == pytest.approx(published, abs=0.06)


@pytest.mark.parametrize(
    ("kilopascal", "published"), [(80, 93.48535), (95, 98.17833), (101.325, 99.97430)]
)
def test_water_boils(kilopascal, published):  # iapws 1.5.5 (IAPWS-IF97)
    assert water.boiling_point(kilopascal) == pytest.approx(published, abs=1e-5)


@pytest.mark.parametrize(("brix", "rise"), [(66.0, 7.10), (66.9, 7.50)])
def test_draw_off_rise(brix, rise):  # maple sources, READ
    assert sucrose.boiling_point_elevation(brix) * 1.8 == pytest.approx(rise, abs=0.15)


def test_draw_off_asks_for_one_of_two():
    with pytest.raises(ValueError, match="not both"):
        draw_off.temperature(66.0)
    assert draw_off.temperature(66.0, kilopascal=101.325) == pytest.approx(
        draw_off.temperature(66.0, water_boiling_celsius=99.9743), abs=1e-4
    )


@pytest.mark.parametrize(
    ("value", "found"),
    [
        (75.0, "golden"), (74.95, "amber"), (74.9, "amber"), (50.0, "amber"), (49.9, "dark"),
        (25.0, "dark"), (24.9, "very-dark"), (0, "very-dark"),
    ],
)  # fmt: skip
def test_colour_edges(value, found):  # Canadian Grade Compendium Vol. 7, READ
    assert colour.grade_class(value) == found
    assert colour.shown(74.99) == "74.9"


@pytest.mark.parametrize(("brix", "pounds"), [(66.0, 11.027), (66.5, 11.053), (66.9, 11.073)])
def test_pounds_a_gallon(brix, pounds):  # quoted by UVM Extension, READ; in air
    in_air = (sucrose.density(brix, 20.0) - 1.2046) / (1 - 1.2046 / 8400)
    assert in_air * 3.785411784 / 1000 / 0.45359237 == pytest.approx(pounds, abs=0.004)


def test_hot_fill_shrinks():  # hot-test mark, 2.98 % from 185 to 68 °F (DERIVED)
    assert fill.volume_at(1.0, 66.9, 20.0, 85.0) == pytest.approx(1.0298, abs=0.0005)


@pytest.mark.parametrize(("brix", "published"), [(1, 87.1), (2, 43.55), (3, 29.03)])
def test_sap_per_syrup(brix, published):  # Perkins and Isselhardt 2013, quoted, READ-2
    assert sap.sap_per_syrup(brix, 66.0) == pytest.approx(published, abs=0.3)


@given(st.floats(0.5, 79), st.floats(1, 100))
def test_hydrometer_round_trip(brix, celsius):
    reading = hydrometer.reading_for(brix, celsius, 20.0) if 10 < brix < 70 else None
    if reading is not None:
        assert hydrometer.true_brix(reading, celsius, 20.0) == pytest.approx(brix, abs=1e-6)


@given(st.floats(0, 84), st.floats(0, 100))
def test_density_rises_with_brix(brix, celsius):
    assert sucrose.density(brix + 0.5, celsius) > sucrose.density(brix, celsius)


@pytest.mark.parametrize("bad", [-0.1, 85.1, float("nan"), float("inf")])
def test_out_of_range_is_refused(bad):
    with pytest.raises(ValueError, match="must be from"):
        sucrose.density(bad, 20.0)

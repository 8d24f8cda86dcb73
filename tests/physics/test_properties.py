"""Round trips and rising curves over the whole range, and what is conserved."""

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from lots.physics import blend, colour, draw_off, fill, hydrometer, refractometer, sap, sucrose
from lots.physics import water as pure

steady = settings(derandomize=True, deadline=None)
STEP = 0.01
brixes = st.floats(0.0, 80.0)
temperatures = st.floats(0.0, 105.0)
references = st.floats(10.0, 30.0)
volumes = st.floats(0.001, 10_000.0)
transmittances = st.floats(0.01, 100.0)


@steady
@given(brixes, temperatures)
def test_density_rises_with_brix_and_comes_back(brix, celsius):
    found = sucrose.density(brix, celsius)
    assert sucrose.density(brix + STEP, celsius) > found
    assert sucrose.brix_from_density(found, celsius) == pytest.approx(brix, abs=1e-6)


@steady
@given(st.floats(10.0, 80.0), st.floats(5.0, 104.0))
def test_density_falls_with_temperature(brix, celsius):
    assert sucrose.density(brix, celsius + STEP) < sucrose.density(brix, celsius)


@steady
@given(brixes, st.floats(0.0, 40.0))
def test_index_rises_with_brix_and_comes_back(brix, celsius):
    found = sucrose.refractive_index(brix, celsius)
    assert sucrose.refractive_index(brix + STEP, celsius) > found
    assert sucrose.brix_from_refractive_index(found, celsius) == pytest.approx(brix, abs=1e-6)


@steady
@given(st.floats(0.0, 79.0), st.floats(0.0, 40.0))
def test_refractometer_correction_has_the_sign_of_the_warmth(reading, celsius):
    true = refractometer.true_brix(reading, celsius)
    assert refractometer.true_brix(reading + STEP, celsius) > true
    assert (true - reading) * (celsius - 20) >= -1e-9


@steady
@given(st.floats(10.0, 79.0), temperatures, references)
def test_hydrometer_comes_back(brix, celsius, reference):
    reading = hydrometer.reading_for(brix, celsius, reference)
    assume(reading <= 80)
    assert hydrometer.true_brix(reading, celsius, reference) == pytest.approx(brix, abs=1e-6)
    assert hydrometer.reading_for(brix + STEP, celsius, reference) > reading


@steady
@given(st.floats(0.0, 84.9))
def test_baume_rises_and_comes_back(brix):
    baume = hydrometer.baume_from_brix(brix)
    assert hydrometer.baume_from_brix(brix + STEP) > baume
    assert hydrometer.brix_from_baume(baume) == pytest.approx(brix, abs=1e-6)


@steady
@given(st.floats(1.0, 900.0))
def test_boiling_point_of_water_rises_and_comes_back(kilopascal):
    celsius = pure.boiling_point(kilopascal)
    assert pure.boiling_point(kilopascal * 1.001) > celsius
    assume(celsius >= 7.0)
    assert pure.saturation_pressure(celsius) == pytest.approx(kilopascal, rel=1e-7)


@steady
@given(st.floats(0.0, 79.9), st.floats(57.0, 109.0))
def test_draw_off_rises_with_brix_and_pressure(brix, kilopascal):
    found = draw_off.temperature(brix, kilopascal=kilopascal)
    assert draw_off.temperature(brix + 0.1, kilopascal=kilopascal) > found
    assert draw_off.temperature(brix, kilopascal=kilopascal + 0.1) > found


@steady
@given(st.floats(0.0, 99.0))
def test_solubility_rises(celsius):
    assert sucrose.solubility(celsius + STEP) > sucrose.solubility(celsius)


@steady
@given(st.floats(0.0, 69.9), st.floats(0.0, 40.0))
def test_osmotic_pressure_rises_with_brix(brix, celsius):
    stronger = sucrose.osmotic_pressure(brix + STEP, celsius)
    assert stronger > sucrose.osmotic_pressure(brix, celsius) >= 0


@steady
@given(volumes, brixes, st.floats(0.0, 105.0), st.floats(0.0, 105.0))
def test_fill_comes_back(millilitres, brix, start, end):
    grams = fill.net_mass(millilitres, brix)
    assert fill.net_volume(grams, brix) == pytest.approx(millilitres, rel=1e-12)
    moved = fill.volume_at(millilitres, brix, start, end)
    assert fill.volume_at(moved, brix, end, start) == pytest.approx(millilitres, rel=1e-12)


@steady
@given(st.floats(0.5, 20.0), st.floats(60.0, 70.0), volumes)
def test_syrup_holds_the_solids_of_its_sap(sap_brix, syrup_brix, volume):
    syrup = sap.expected_syrup(volume, sap_brix, syrup_brix)
    solids = fill.net_mass(volume, sap_brix) * sap_brix
    assert fill.net_mass(syrup, syrup_brix) * syrup_brix == pytest.approx(solids, rel=1e-9)


@steady
@given(st.lists(st.tuples(volumes, brixes), min_size=1, max_size=6))
def test_mix_conserves_mass_and_solids(parts):
    volume, brix = blend.mix(parts)
    masses = [(fill.net_mass(v, b), b) for v, b in parts]
    mass = fill.net_mass(volume, brix)
    assert mass == pytest.approx(sum(m for m, _ in masses), rel=1e-9)
    assert mass * brix == pytest.approx(sum(m * b for m, b in masses), rel=1e-9, abs=1e-9)


@steady
@given(volumes, st.floats(10.0, 80.0), st.floats(0.05, 1.0))
def test_water_thins_to_the_target(volume, brix, share):
    target = brix * share
    added = blend.water_to_reach(volume, brix, target)
    assert blend.mix([(volume, brix), (added, 0.0)])[1] == pytest.approx(target, rel=1e-9)


@steady
@given(st.lists(st.tuples(volumes, transmittances), min_size=1, max_size=6))
def test_a_blend_lies_between_its_parts(parts):
    values = [value for _, value in parts]
    found = colour.blend_transmittance(parts)
    assert min(values) * (1 - 1e-9) <= found <= max(values) * (1 + 1e-9)


@steady
@given(st.floats(0.0, 100.0))
def test_the_shown_value_is_in_the_class_of_the_unrounded(value):
    assert colour.grade_class(float(colour.shown(value))) == colour.grade_class(value)

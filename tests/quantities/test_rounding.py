"""Decimals become whole milligrams once, half to even, and shares sum exactly."""

from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.quantities import rounding
from lots.quantities.units import UnitError

WEIGHTS = st.lists(st.integers(0, 10**15), min_size=1, max_size=12)
MASSES = st.integers(1, 10**15)


@given(st.integers(0, 10**15), WEIGHTS)
def test_shares_sum_to_the_total(total, weights):
    shares = rounding.share_out(total, weights)
    assert sum(shares) == total
    assert all(share >= 0 for share in shares)


@given(st.integers(0, 10**15), WEIGHTS.filter(any))
def test_each_share_is_within_one_of_its_part(total, weights):
    for share, weight in zip(rounding.share_out(total, weights), weights, strict=True):
        assert abs(share * sum(weights) - total * weight) < sum(weights)
        assert weight or share == 0


@given(WEIGHTS)
def test_emptying_takes_each_to_exactly_zero(weights):
    assert rounding.share_out(sum(weights), weights) == weights


@pytest.mark.parametrize(
    ("total", "weights", "shares"),
    [
        (1, [1, 1], [1, 0]),
        (5, [1, 1, 1], [2, 2, 1]),
        (10, [0, 3, 0], [0, 10, 0]),
        (7, [0, 0], [7, 0]),
        (0, [2, 3], [0, 0]),
        (100, [1, 2], [33, 67]),
    ],
)
def test_largest_remainder_and_ties_by_position(total, weights, shares):
    assert rounding.share_out(total, weights) == shares


@pytest.mark.parametrize(("total", "weights"), [(1, []), (-1, [1]), (1, [2, -1])])
def test_what_cannot_be_shared_is_refused(total, weights):
    with pytest.raises(ValueError, match="share|zero"):
        rounding.share_out(total, weights)


@pytest.mark.parametrize(
    ("value", "places", "text"),
    [
        (0.125, 2, "0.12"),
        (0.375, 2, "0.38"),
        (Decimal("2.5"), 0, "2"),
        (66.845, 2, "66.84"),
        (-0.01, 1, "0.0"),
        (1e-7, 2, "0.00"),
        (1e21, 0, "1000000000000000000000"),
    ],
)
def test_fixed_is_half_even_and_plain(value, places, text):
    assert rounding.fixed(value, places) == text


def test_no_number_is_refused():
    with pytest.raises(ValueError, match="rounded"):
        rounding.fixed(float("nan"), 1)
    with pytest.raises(ValueError, match="rounded"):
        rounding.whole(Decimal("Infinity"))


def test_milligrams_round_half_to_even():
    assert rounding.milligrams(Decimal("0.0000005"), "kg") == 0
    assert rounding.milligrams(Decimal("0.0000015"), "kg") == 2
    assert rounding.milligrams(Decimal(1), "lb") == 453592
    with pytest.raises(UnitError):
        rounding.milligrams(Decimal(1), "L")


def test_a_mass_needs_no_density():
    assert rounding.liquid_milligrams(Decimal(2), "kg", 200.0, 500.0) == 2_000_000


def test_hot_syrup_fills_more_than_it_weighs():
    hot = rounding.liquid_milligrams(Decimal(1), "US gal", 66.9, 85.0)
    cold = rounding.liquid_milligrams(Decimal(1), "US gal", 66.9, 20.0)
    assert 0.965 < hot / cold < 0.975


@pytest.mark.parametrize("brix", ["-0.1", "100.1"])
def test_impossible_solids_are_refused(brix):
    with pytest.raises(ValueError, match="from 0 to 100"):
        rounding.solids_milligrams(1000, Decimal(brix))


@given(MASSES, st.decimals(0, 100, places=4))
def test_brix_comes_back_from_its_solids(mass, brix):
    solids = rounding.solids_milligrams(mass, brix)
    assert 0 <= solids <= mass
    assert abs(rounding.brix_of(mass, solids) - brix) <= Decimal(51) / mass


def test_no_mass_has_no_brix():
    with pytest.raises(ValueError, match="No mass"):
        rounding.brix_of(0, 0)


@given(st.integers(1000, 10**13), st.decimals(0, 80, places=2), st.sampled_from(["L", "US gal"]))
def test_volume_comes_back_from_its_mass(mass, brix, unit):
    volume = rounding.volume_of(mass, brix, unit)
    assert rounding.liquid_milligrams(volume, unit, float(brix)) == mass

"""Density: rounded once, compared once, borderline on both sides, held only when sold or packed."""

import dataclasses

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.rules import density, rule_set, words
from lots.rules.verdict import FAILING, Outcome, Stage, rounded
from tests.rules.partial import without

VERMONT = rule_set.load("vermont")


@pytest.mark.parametrize(
    ("brix", "shown", "outcome"),
    [
        (60.0, "60.00", Outcome.FAIL),
        (66.69, "66.69", Outcome.FAIL),
        (66.7, "66.70", Outcome.BORDERLINE_FAIL),
        (66.894, "66.89", Outcome.BORDERLINE_FAIL),
        (66.895, "66.90", Outcome.BORDERLINE_PASS),
        (67.1, "67.10", Outcome.BORDERLINE_PASS),
        (67.11, "67.11", Outcome.PASS),
        (68.69, "68.69", Outcome.PASS),
        (68.7, "68.70", Outcome.BORDERLINE_PASS),
        (68.905, "68.90", Outcome.BORDERLINE_PASS),
        (68.91, "68.91", Outcome.BORDERLINE_FAIL),
        (69.1, "69.10", Outcome.BORDERLINE_FAIL),
        (69.11, "69.11", Outcome.FAIL),
    ],
)
def test_outcomes(brix, shown, outcome):
    verdict = density.check(VERMONT, Stage.PACKED, brix)
    assert (verdict.values["value"], verdict.outcome) == (shown, outcome)


def test_rounding_is_half_to_even_once():
    assert str(rounded(66.885, "66.9")) == "66.88"
    assert str(rounded(66.895, "66.9")) == "66.90"
    assert str(rounded(179.95, "180")) == "180.0"
    with pytest.raises(ValueError, match="judged"):
        rounded(float("inf"), "66.9")


@given(st.floats(0, 100), st.sampled_from(Stage), st.sampled_from(rule_set.KEYS))
def test_a_failure_holds_only_what_is_sold_or_packed(brix, stage, key):
    verdict = density.check(rule_set.load(key), stage, brix)
    sold = stage in (Stage.BULK_SOLD, Stage.PACKED)
    assert verdict.holds is (sold and verdict.outcome in FAILING)
    assert verdict.source in words.sentence(verdict)


def test_in_process_reads_the_limits_of_kept_bulk():
    early = density.check(VERMONT, Stage.IN_PROCESS, 66.0)
    kept = density.check(VERMONT, Stage.BULK_KEPT, 66.0)
    assert dataclasses.replace(kept, stage=Stage.IN_PROCESS) == early
    assert early.mark == "DERIVED"


@pytest.mark.parametrize(
    "gone", [("density-min",), ("density-max",), ("density-min", "density-max")]
)
def test_a_missing_limit_never_passes(gone):
    verdict = density.check(without(VERMONT, *gone), Stage.PACKED, 67.5)
    assert verdict.outcome is Outcome.NOT_SET
    assert not verdict.holds


def test_what_is_set_still_fails():
    assert density.check(without(VERMONT, "density-max"), Stage.PACKED, 60).outcome is Outcome.FAIL
    assert density.check(without(VERMONT, "density-min"), Stage.PACKED, 75).outcome is Outcome.FAIL


@pytest.mark.parametrize("brix", [-0.1, 100.1, float("nan"), float("inf")])
def test_the_impossible_is_refused(brix):
    with pytest.raises(ValueError, match="from 0 to 100"):
        density.check(VERMONT, Stage.PACKED, brix)

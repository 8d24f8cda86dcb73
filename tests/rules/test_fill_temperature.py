"""Fill temperature: compared in the unit of the limit, borderline within 1 °F."""

import pytest

from lots.rules import fill_temperature, rule_set
from lots.rules.verdict import Outcome, Stage
from tests.rules.partial import without

VERMONT, CANADA = rule_set.load("vermont"), rule_set.load("canada")


def celsius(fahrenheit):
    return (fahrenheit - 32) / 1.8


@pytest.mark.parametrize(
    ("kind", "fahrenheit", "outcome"),
    [
        ("container", 178.9, Outcome.FAIL),
        ("container", 179.0, Outcome.BORDERLINE_FAIL),
        ("container", 179.9, Outcome.BORDERLINE_FAIL),
        ("container", 179.96, Outcome.BORDERLINE_PASS),
        ("container", 180.0, Outcome.BORDERLINE_PASS),
        ("container", 181.0, Outcome.BORDERLINE_PASS),
        ("container", 181.1, Outcome.PASS),
        ("drum", 183.9, Outcome.FAIL),
        ("drum", 185.0, Outcome.BORDERLINE_PASS),
        ("drum", 188.0, Outcome.PASS),
    ],
)
def test_in_fahrenheit(kind, fahrenheit, outcome):
    verdict = fill_temperature.check(VERMONT, kind, Stage.PACKED, celsius(fahrenheit))
    assert (verdict.outcome, verdict.unit) == (outcome, "°F")


@pytest.mark.parametrize(
    ("degrees", "outcome"),
    [
        (81.4, Outcome.FAIL),
        (81.5, Outcome.BORDERLINE_FAIL),
        (82.0, Outcome.BORDERLINE_PASS),
        (82.5, Outcome.BORDERLINE_PASS),
        (82.6, Outcome.PASS),
    ],
)
def test_in_celsius_a_degree_fahrenheit_is_five_ninths(degrees, outcome):
    verdict = fill_temperature.check(CANADA, "container", Stage.PACKED, degrees)
    assert (verdict.outcome, verdict.unit) == (outcome, "°C")


def test_a_kept_drum_is_never_held_by_its_temperature():
    verdict = fill_temperature.check(VERMONT, "drum", Stage.BULK_KEPT, 60.0)
    assert verdict.outcome is Outcome.FAIL
    assert not verdict.holds


def test_a_missing_limit_never_passes():
    rules = without(VERMONT, "drum-fill-min")
    verdict = fill_temperature.check(rules, "drum", Stage.BULK_SOLD, 95.0)
    assert verdict.outcome is Outcome.NOT_SET


def test_the_impossible_is_refused():
    with pytest.raises(ValueError, match="neither"):
        fill_temperature.check(VERMONT, "bucket", Stage.PACKED, 90.0)
    with pytest.raises(ValueError, match="not a number"):
        fill_temperature.check(VERMONT, "drum", Stage.PACKED, float("nan"))

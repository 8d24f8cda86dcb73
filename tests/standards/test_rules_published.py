"""The rule sets against published limits, each with its source and mark.

Compendium: Canadian Grade Compendium Vol. 7. USDA: US Standards for Grades of Maple Syrup (2015).
"""

from datetime import date
from decimal import Decimal

import pytest

from lots.rules import container_size, density, fill_temperature, grade, retention, rule_set
from lots.rules.verdict import FAILING, PASSING, Stage

PACKED = Stage.PACKED


def _passes(verdict):
    assert verdict.outcome in PASSING | FAILING
    return verdict.outcome in PASSING


@pytest.mark.parametrize(
    ("transmittance", "label"),
    [
        (75.0, "Golden"),  # Maple Products Regulations Sch. III (2015), READ
        (74.95, "Amber"),  # Canadian "less than 75.0", READ
        (74.9, "Amber"),  # READ
        (60.5, "Amber"),  # old Medium Amber's lower bound, READ
        (50.0, "Amber"),  # READ
        (49.9, "Dark"),  # READ
        (44.0, "Dark"),  # old Dark Amber's lower bound, READ / DERIVED
        (25.0, "Dark"),  # READ
        (24.9, "Very Dark"),  # READ
        (0.0, "Very Dark"),  # READ
    ],
)
@pytest.mark.parametrize("key", rule_set.KEYS)
def test_colour_edges(key, transmittance, label):
    rules = rule_set.load(key)
    for name in grade.NAMES.values():
        verdict = grade.check_colour(rules, PACKED, transmittance, name)
        assert _passes(verdict) is (name == label)


@pytest.mark.parametrize(
    ("key", "brix", "passes"),
    [
        ("canada", 66.0, True),  # Compendium s. 3(a), READ
        ("canada", 68.9, True),  # READ
        ("canada", 69.0, False),  # READ
        ("canada", 65.9, False),  # READ
        ("us-federal", 65.9, False),  # USDA 52.5961, READ-2
        ("us-federal", 66.0, True),  # READ-2
        ("us-federal", 69.0, False),  # USDA 52.5962, READ
        ("new-york", 65.9, False),  # 1 NYCRR 270.1(b)(1), READ
        ("new-york", 66.5, True),  # READ
        ("new-york", 69.0, False),  # READ
        ("vermont", 66.5, False),  # Vermont Maple Regulations III, READ-2
        ("vermont", 66.9, True),  # READ
        ("vermont", 68.9, True),  # READ
        ("vermont", 69.0, False),  # READ
        ("maine", 65.9, False),  # 7 M.R.S. 892-A(1)(D), READ
        ("maine", 68.9, True),  # READ
        ("maine", 69.0, False),  # READ
        ("wisconsin", 66.0, True),  # ATCP 87.36, READ
        ("wisconsin", 65.9, False),  # READ
        ("wisconsin", 69.0, False),  # READ
    ],
)
def test_density_limits(key, brix, passes):
    assert _passes(density.check(rule_set.load(key), PACKED, brix)) is passes


@pytest.mark.parametrize(
    ("key", "low", "high", "reference"),
    [
        ("us-federal", "66.0", "68.9", ""),
        ("vermont", "66.9", "68.9", "60 °F"),
        ("new-york", "66.0", "68.9", ""),
        ("maine", "66.0", "68.9", "68 °F"),
        ("wisconsin", "66.0", "68.9", "68 °F"),
        ("canada", "66.0", "68.9", "20 °C"),
    ],
)
def test_density_rows(key, low, high, reference):
    rules = rule_set.load(key)
    least, most = rules.limit("density-min", PACKED), rules.limit("density-max", PACKED)
    assert (least.value, most.value, least.reference) == (low, high, reference)


@pytest.mark.parametrize(
    ("key", "kind", "celsius", "passes"),
    [
        ("canada", "container", 81.0, False),  # CFIA packing practice, READ
        ("canada", "container", 82.0, True),  # READ
        ("canada", "container", 85.0, True),  # Ontario note on mould (2014), READ
        ("canada", "drum", 85.0, True),  # READ
        ("canada", "drum", 84.0, False),  # READ
        ("us-federal", "container", 82.2222222222, True),  # 180 °F, Ohio tip card, READ
        ("us-federal", "container", 81.6666666667, False),  # 179 °F, READ
    ],
)
def test_fill_temperatures(key, kind, celsius, passes):
    assert _passes(fill_temperature.check(rule_set.load(key), kind, PACKED, celsius)) is passes


@pytest.mark.parametrize(
    ("size", "unit", "passes"),
    [
        ("4", "US gal", False),  # USDA 52.5962(b), READ
        ("5", "US gal", True),  # READ
        ("20", "L", True),  # READ
        ("1", "qt", False),  # READ
    ],
)
def test_processing_grade_container(size, unit, passes):
    verdict = container_size.check(
        rule_set.load("us-federal"), PACKED, "Processing Grade", Decimal(size), unit
    )
    assert _passes(verdict) is passes


@pytest.mark.parametrize(
    ("jurisdiction", "organic", "until"),
    [
        ("CA", False, date(2028, 3, 1)),  # SFCR 90(3), READ
        ("US-VT", False, date(2028, 3, 1)),  # 21 CFR 1.360, MEMORY
        ("US-VT", True, date(2031, 3, 1)),  # 7 CFR 205.103, READ
    ],
)
def test_retention(jurisdiction, organic, until):
    day, rule = retention.latest(jurisdiction, date(2026, 3, 1), organic=organic)
    assert day == until
    assert rule.source

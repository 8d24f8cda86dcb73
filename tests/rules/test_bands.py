"""Container sizes, loss bands, retention, regulators and the required chain."""

from datetime import date
from decimal import Decimal

import pytest

from lots.quantities.units import UnitError
from lots.rules import completeness, container_size, loss, regulators, retention, rule_set, words
from lots.rules.verdict import Outcome, Stage

VERMONT, CANADA = rule_set.load("vermont"), rule_set.load("canada")


def test_the_container_rule_is_for_processing_grade_only():
    assert container_size.check(VERMONT, Stage.PACKED, "Amber", Decimal(1), "pt") is None
    unset = container_size.check(CANADA, Stage.PACKED, "Processing Grade", Decimal(1), "L")
    assert unset.outcome is Outcome.NOT_SET
    with pytest.raises(UnitError):
        container_size.check(VERMONT, Stage.PACKED, "Processing Grade", Decimal(1), "kg")


@pytest.mark.parametrize(
    ("kind", "solids_in", "solids_out", "outcome", "shown"),
    [
        ("filtration", 1000, 1000, Outcome.PASS, "0.0"),
        ("filtration", 1000, 920, Outcome.PASS, "8.0"),
        ("filtration", 1000, 919, Outcome.FAIL, "8.1"),
        ("filtration", 1000, 1010, Outcome.FAIL, "1.0"),
        ("filtration", 1_000_000, 1_000_001, Outcome.PASS, "0.0"),
    ],
)
def test_loss(kind, solids_in, solids_out, outcome, shown):
    verdict = loss.check(VERMONT, kind, solids_in, solids_out)
    assert (verdict.outcome, verdict.values["value"]) == (outcome, shown)
    assert not verdict.holds


@pytest.mark.parametrize(("kind", "solids_in"), [("sale", 1000), ("boil", 0)])
def test_without_a_band_or_solids_there_is_no_pass(kind, solids_in):
    assert loss.check(VERMONT, kind, solids_in, 0).outcome is Outcome.NOT_SET


@pytest.mark.parametrize(
    ("start", "years", "until"),
    [
        (date(2024, 2, 29), 2, date(2026, 2, 28)),
        (date(2024, 2, 29), 4, date(2028, 2, 29)),
        (date(2026, 3, 1), 2, date(2028, 3, 1)),
    ],
)
def test_keep_until(start, years, until):
    assert retention.keep_until(start, years) == until


def test_no_retention_for_an_unknown_place():
    with pytest.raises(ValueError, match="No retention"):
        retention.latest("FR", date(2026, 1, 1))


@pytest.mark.parametrize("key", rule_set.KEYS)
def test_every_set_has_its_regulators(key):
    found = regulators.REGULATORS[rule_set.load(key).jurisdiction]
    assert found
    assert all(name and "." in domain and "/" not in domain for name, domain in found)


@pytest.mark.parametrize(
    ("kind", "present", "lacks"),
    [
        (
            "own-syrup",
            {"collected", "boiled", "density"},
            ("filtered", "grade", "fill-temperature"),
        ),
        ("own-syrup", set(completeness.REQUIRED["own-syrup"]), ()),
        ("received-syrup", {"density", "grade"}, ("receiving-decision",)),
        ("kit", {"paper-reference"}, ("lead-release",)),
        ("made-product", set(), ("paper-reference", "lead-release")),
        ("opening-stock", {"paper-reference", "lead-release"}, ()),
        ("other", {"density"}, ("kind-of-goods",)),
    ],
)
def test_required_chain(kind, present, lacks):
    assert completeness.missing(kind, present) == lacks


def test_every_requirement_has_words():
    parts = {part for chain in completeness.REQUIRED.values() for part in chain}
    assert parts | set(completeness.UNKNOWN_KIND) == set(words.REQUIREMENTS)

"""Density: the true °Brix against a set's limits; never shifted by temperature."""

from decimal import ROUND_HALF_EVEN, Decimal

from .rule_set import RuleSet
from .verdict import Outcome, Stage, Verdict

BORDER = Decimal("0.2")


def rounded(value: float, limit: str) -> Decimal:
    """Return the value with one decimal more than the limit has, half to even, once."""
    places = -Decimal(limit).as_tuple().exponent + 1  # type: ignore[operator]
    return Decimal(str(value)).quantize(Decimal(1).scaleb(-places), ROUND_HALF_EVEN)


def check(rules: RuleSet, stage: Stage, true_brix: float) -> Verdict:
    """Judge a true °Brix of any syrup; with no limit in the set the verdict is "not set"."""
    low, high = rules.limit("density-min"), rules.limit("density-max")
    if low is None:
        return Verdict(
            "density", stage, Outcome.NOT_SET, "density-not-set", {}, "", "°Brix", rules.name, ""
        )
    value = rounded(true_brix, low.value)
    limit, message, passed = low, "density-pass", True
    if value < Decimal(low.value):
        message, passed = "density-low", False
    elif high is not None and value > Decimal(high.value):
        limit, message, passed = high, "density-high", False
    elif high is not None and Decimal(high.value) - value <= BORDER:
        limit = high
    near = abs(value - Decimal(limit.value)) <= BORDER
    outcome = {
        (True, False): Outcome.PASS,
        (True, True): Outcome.BORDERLINE_PASS,
        (False, True): Outcome.BORDERLINE_FAIL,
        (False, False): Outcome.FAIL,
    }[passed, near]
    values = {"value": str(value), "limit": limit.value, "source": limit.source}
    return Verdict(
        "density",
        stage,
        outcome,
        message,
        values | {"high": high.value if high else ""},
        limit.value,
        limit.unit,
        limit.source + (f", stated at {limit.reference}" if limit.reference else ""),
        limit.mark,
    )

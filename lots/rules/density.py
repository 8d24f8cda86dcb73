"""Density: the true °Brix against a set's limits; never shifted by temperature."""

from decimal import Decimal

from .rule_set import RuleSet
from .verdict import Outcome, Stage, Verdict, judged, not_set, of_limit, rounded

# In use, about half of 75–90 hydrometers read within this (Ohio State University Extension, READ).
BORDER = Decimal("0.2")


def check(rule_set: RuleSet, stage: Stage, true_brix: float) -> Verdict:
    """Judge a true °Brix of 0–100; with a limit missing in the set, nothing passes.

    In process the limits of kept bulk are read, as advice. The value is rounded once, half to
    even, to one decimal more than the limit has, and compared so; within 0.2 °Brix of the limit
    that decides is borderline. Raises ValueError outside the range.
    """
    if not 0 <= true_brix <= 100:
        raise ValueError(f"Brix must be from 0 to 100; got {true_brix}.")
    row = Stage.BULK_KEPT if stage is Stage.IN_PROCESS else stage
    low, high = rule_set.limit("density-min", row), rule_set.limit("density-max", row)
    if low and (value := rounded(true_brix, low.value)) < low.number:
        outcome = judged(passed=False, near=low.number - value <= BORDER)
        return of_limit("density", stage, outcome, "density-low", low, {"value": str(value)})
    if high and (value := rounded(true_brix, high.value)) > high.number:
        outcome = judged(passed=False, near=value - high.number <= BORDER)
        return of_limit("density", stage, outcome, "density-high", high, {"value": str(value)})
    if not low or not high:
        return not_set(rule_set, "density", stage)
    value = rounded(true_brix, low.value)
    nearest = min((low, high), key=lambda limit: abs(value - limit.number))
    values = {"value": str(value), "low": low.value, "high": high.value}
    outcome = judged(passed=True, near=abs(value - nearest.number) <= BORDER)
    message = "density-near" if outcome is Outcome.BORDERLINE_PASS else "density-pass"
    return of_limit("density", stage, outcome, message, nearest, values)

"""What a rule finds."""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import ROUND_HALF_EVEN, Decimal
from enum import StrEnum

from .rule_set import Limit, RuleSet


class Outcome(StrEnum):
    """The five verdicts; a missing limit is never a pass."""

    PASS = "pass"  # noqa: S105 - a verdict, not a password
    FAIL = "fail"
    BORDERLINE_PASS = "borderline-pass"  # noqa: S105 - a verdict, not a password
    BORDERLINE_FAIL = "borderline-fail"
    NOT_SET = "not-set"


class Stage(StrEnum):
    """What a check judges; only sold and packed verdicts hold a lot."""

    IN_PROCESS = "in-process"
    BULK_KEPT = "bulk-kept"
    BULK_SOLD = "bulk-sold"
    PACKED = "packed"


PASSING = frozenset({Outcome.PASS, Outcome.BORDERLINE_PASS})
FAILING = frozenset({Outcome.FAIL, Outcome.BORDERLINE_FAIL})
HOLDING = frozenset({Stage.BULK_SOLD, Stage.PACKED})


@dataclass(frozen=True)
class Verdict:
    """One rule applied: the outcome, the numbers, the limit and its source.

    ``message`` is the id of a sentence in ``words``; ``values`` are the numbers it shows.
    """

    rule: str
    stage: Stage
    outcome: Outcome
    message: str
    values: Mapping[str, str]
    limit: str
    unit: str
    source: str
    mark: str

    @property
    def holds(self) -> bool:
        """Whether the verdict sets the lot apart; for colour, borderline is a mark only."""
        if self.rule == "colour" and self.outcome is Outcome.BORDERLINE_FAIL:
            return False
        return self.outcome in FAILING and self.stage in HOLDING


def judged(passed: bool, near: bool) -> Outcome:
    """Return the outcome of a comparison; near is "within the uncertainty of the reading"."""
    if passed:
        return Outcome.BORDERLINE_PASS if near else Outcome.PASS
    return Outcome.BORDERLINE_FAIL if near else Outcome.FAIL


def rounded(value: float | Decimal, limit: str) -> Decimal:
    """Return the value with one decimal more than the limit has, half to even, once.

    Raises ValueError for no finite number.
    """
    number = Decimal(str(value))
    if not number.is_finite():
        raise ValueError(f"{value} is not a number that can be judged.")
    exponent = int(Decimal(limit).as_tuple().exponent)
    return number.quantize(Decimal(1).scaleb(exponent - 1), ROUND_HALF_EVEN)


def of_limit(
    rule: str,
    stage: Stage,
    outcome: Outcome,
    message: str,
    limit: Limit,
    values: Mapping[str, str],
) -> Verdict:
    """Return the verdict that a limit gave, with its value, unit, source and mark."""
    shown = {"limit": limit.value, "unit": limit.unit, **values}
    return Verdict(
        rule, stage, outcome, message, shown, limit.value, limit.unit, limit.cited, limit.mark
    )


def not_set(
    rules: RuleSet, rule: str, stage: Stage, values: Mapping[str, str] | None = None
) -> Verdict:
    """Return the verdict of a rule for which the set holds no limit: neither pass nor fail."""
    return Verdict(
        rule, stage, Outcome.NOT_SET, f"{rule}-not-set", values or {}, "", "", rules.name, ""
    )

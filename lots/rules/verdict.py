"""What a rule finds."""

from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum


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


@dataclass(frozen=True)
class Verdict:
    """One rule applied: the outcome, the numbers, the limit and its source."""

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
        """Whether the verdict sets the lot apart."""
        failed = self.outcome in (Outcome.FAIL, Outcome.BORDERLINE_FAIL)
        return failed and self.stage in (Stage.BULK_SOLD, Stage.PACKED)

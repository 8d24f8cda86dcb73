"""Container size: how small a container of Processing Grade may be."""

from decimal import Decimal

from lots.quantities.units import convert

from .label_grade import PROCESSING, read
from .rule_set import RuleSet
from .verdict import Outcome, Stage, Verdict, not_set, of_limit


def check(
    rule_set: RuleSet, stage: Stage, label_grade: str, size: Decimal, unit: str
) -> Verdict | None:
    """Judge a container's nominal size; ``None`` where the grade is not Processing Grade.

    The size is a printed number, not a measurement: it is compared exactly and never borderline.
    Raises UnitError for a unit that is no volume.
    """
    if read(label_grade) != PROCESSING:
        return None
    limit = rule_set.limit("processing-container-min")
    if limit is None:
        return not_set(rule_set, "container-size", stage)
    passed = convert(size, unit, limit.unit) >= limit.number
    return of_limit(
        "container-size",
        stage,
        Outcome.PASS if passed else Outcome.FAIL,
        "container-size-pass" if passed else "container-size-small",
        limit,
        {"value": f"{size:f}", "size_unit": unit},
    )

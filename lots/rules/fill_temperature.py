"""Fill temperature of containers and drums against a set's minimum."""

from decimal import Decimal

from lots.quantities.units import convert

from .density import rounded
from .rule_set import RuleSet
from .verdict import Outcome, Stage, Verdict

BORDER_FAHRENHEIT = Decimal(1)


def check(rules: RuleSet, kind: str, stage: Stage, celsius: float) -> Verdict:
    """Judge a fill temperature in °C, for a ``container`` or a ``drum``, in the limit's unit."""
    limit = rules.limit(f"{kind}-fill-min")
    if limit is None:
        return Verdict(
            "fill-temperature", stage, Outcome.NOT_SET, "fill-not-set", {}, "", "", rules.name, ""
        )
    value = rounded(float(convert(Decimal(str(celsius)), "°C", limit.unit)), limit.value)
    border = BORDER_FAHRENHEIT if limit.unit == "°F" else BORDER_FAHRENHEIT * 5 / 9
    passed = value >= Decimal(limit.value)
    near = abs(value - Decimal(limit.value)) <= border
    # A fill at the minimum meets it: the limit is itself set with a margin over the temperatures
    # that moulds survive, so nearness is noted on failures only.
    missed = Outcome.BORDERLINE_FAIL if near else Outcome.FAIL
    outcome = Outcome.PASS if passed else missed
    return Verdict(
        "fill-temperature",
        stage,
        outcome,
        "fill-pass" if passed else "fill-low",
        {"value": str(value), "limit": limit.value, "unit": limit.unit, "source": limit.source},
        limit.value,
        limit.unit,
        limit.source,
        limit.mark,
    )

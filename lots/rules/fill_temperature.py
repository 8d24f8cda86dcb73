"""Fill temperature of containers and drums against a set's minimum."""

from decimal import Decimal

from lots.quantities.units import convert

from .rule_set import RuleSet
from .verdict import Stage, Verdict, judged, not_set, of_limit, rounded

BORDER_FAHRENHEIT = Decimal(1)
# A difference of 1 °F; a conversion of the point 1 °F would be −17 °C.
_BORDERS = {"°F": BORDER_FAHRENHEIT, "°C": BORDER_FAHRENHEIT * 5 / 9}
KINDS = ("container", "drum")


def check(rule_set: RuleSet, container_kind: str, stage: Stage, celsius: float) -> Verdict:
    """Judge a fill temperature in °C, for a ``container`` or a ``drum``, in the limit's unit.

    The value is rounded once, half to even, to one decimal more than the limit has; within 1 °F of
    the limit is borderline. Raises ValueError for another kind or no finite number.
    """
    if container_kind not in KINDS:
        raise ValueError(f"{container_kind} is neither a container nor a drum.")
    limit = rule_set.limit(f"{container_kind}-fill-min")
    if limit is None:
        return not_set(rule_set, "fill-temperature", stage)
    value = rounded(convert(Decimal(str(celsius)), "°C", limit.unit), limit.value)
    passed = value >= limit.number
    return of_limit(
        "fill-temperature",
        stage,
        judged(passed, near=abs(value - limit.number) <= _BORDERS[limit.unit]),
        "fill-temperature-pass" if passed else "fill-temperature-low",
        limit,
        {"value": str(value), "kind": container_kind},
    )

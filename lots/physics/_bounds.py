"""Refuse numbers outside a method's range, in a sentence."""

import math


def within(name: str, value: float, low: float, high: float, unit: str) -> float:
    """Return the value; raises ValueError if it is not a number from low to high."""
    if not math.isfinite(value) or not low <= value <= high:
        raise ValueError(f"{name} must be from {low:g} to {high:g} {unit}; got {value:g}.")
    return value


def solve(function, low: float, high: float, target: float, name: str) -> float:  # type: ignore[no-untyped-def]
    """Return x in [low, high] where a monotonic function meets the target, by bisection."""
    first, last = function(low), function(high)
    rising = last > first
    if not min(first, last) - 1e-9 <= target <= max(first, last) + 1e-9:
        raise ValueError(f"No {name} from {low:g} to {high:g} gives that value.")
    for _ in range(80):
        middle = (low + high) / 2
        if (function(middle) < target) == rising:
            low = middle
        else:
            high = middle
    return (low + high) / 2

"""Refuse numbers outside a method's range, in a sentence, and invert rising or falling curves."""

import math
from collections.abc import Callable


def within(name: str, value: float, low: float, high: float, unit: str) -> float:
    """Return the value; raises ValueError if it is not a number from low to high."""
    if not math.isfinite(value) or not low <= value <= high:
        raise ValueError(f"{name} must be from {low:g} to {high:g} {unit}; got {value:g}.")
    return value


def at_least_zero(name: str, value: float, unit: str) -> float:
    """Return the value; raises ValueError if it is below zero or not a finite number."""
    if not math.isfinite(value) or value < 0:
        raise ValueError(f"{name} must be a number of {unit} not below 0; got {value:g}.")
    return value


def solve(
    function: Callable[[float], float], low: float, high: float, target: float, name: str
) -> float:
    """Return x in [low, high] where a monotonic function meets the target, by bisection.

    Raises ValueError, naming what is sought, where no x in the range does.
    """
    first, last = function(low), function(high)
    rising = last > first
    # The slack lets a value computed at an end of the range come back through its inverse.
    if not min(first, last) - 1e-9 <= target <= max(first, last) + 1e-9:
        raise ValueError(f"No {name} from {low:g} to {high:g} gives {target:g}.")
    for _ in range(80):
        middle = (low + high) / 2
        if (function(middle) < target) == rising:
            low = middle
        else:
            high = middle
    return (low + high) / 2

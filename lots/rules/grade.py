"""Colour class against the label's grade, and the clarity and defects a grade allows."""

from collections.abc import Sequence
from decimal import Decimal

from lots.physics import colour

from .label_grade import NAMES, PROCESSING, read
from .rule_set import Limit, RuleSet
from .verdict import Outcome, Stage, Verdict, judged, not_set, of_limit

# Photometers read within about 4 %Tc (Proctor Maple Research Center 2020, READ).
BORDER = Decimal(4)
CLASSES = ("golden", "amber", "dark")  # very-dark is what is left below the last edge
# Haze may be air or cold and clear by itself, so it is looked at once more before it counts.
DOUBTFUL_CLARITY = frozenset({"hazy"})
# Never tolerated at any intensity, in any grade: retained always, or hold-for-review (Québec
# M-35.1 r.18.1 defect codes 2, 3 and 6, READ).
NEVER = ("ferment", "mould", "mold", "chemical", "ropy", "stringy")


def check_colour(
    rule_set: RuleSet, stage: Stage, transmittance: float, label_grade: str
) -> Verdict:
    """Judge whether 0–100 %Tc fits the class named on the label; nearness is a mark only.

    The unrounded value is compared with the set's edges and shown cut to one decimal; within
    4 %Tc of an edge of the label's class is borderline. Processing Grade has no class, so any
    colour fits. Raises ValueError outside the range.
    """
    if not 0 <= transmittance <= 100:
        raise ValueError(f"Transmittance must be from 0 to 100 %Tc; got {transmittance}.")
    edges = [rule_set.limit(f"colour-{name}-min") for name in CLASSES]
    shown, wanted = colour.shown(transmittance), read(label_grade)
    if wanted is None or any(edge is None for edge in edges):
        return not_set(rule_set, "colour", stage, {"value": shown, "label": label_grade})
    limits = [edge for edge in edges if edge is not None]
    value = Decimal(str(transmittance))
    found = _class_of(value, limits)
    nearest = min(limits, key=lambda limit: abs(value - limit.number))
    values = {"value": shown, "class": NAMES[found], "label": label_grade}
    if wanted == PROCESSING:
        return of_limit("colour", stage, Outcome.PASS, "colour-any", nearest, values)
    fits = wanted == found
    own_edges = _edges_of(wanted, limits)
    decisive = min(own_edges, key=lambda limit: abs(value - limit.number))
    outcome = judged(fits, near=abs(value - decisive.number) <= BORDER)
    message = "colour-fits" if fits else "colour-differs"
    return of_limit("colour", stage, outcome, message, decisive, values)


def _class_of(value: Decimal, limits: Sequence[Limit]) -> str:
    for name, limit in zip(CLASSES, limits, strict=True):
        if value >= limit.number:
            return name
    return "very-dark"


def _edges_of(name: str, limits: Sequence[Limit]) -> Sequence[Limit]:
    """Return the lower edge of a class and that of the class above it, as far as there are any."""
    place = (*CLASSES, "very-dark").index(name)
    return limits[max(place - 1, 0) : place + 1]


def check_clarity(rule_set: RuleSet, stage: Stage, clarity: str, label_grade: str = "") -> Verdict:
    """Judge the clarity seen: ``clear`` fits Grade A, ``hazy`` is borderline, other words fail.

    Processing Grade asks none. With no clarity seen nothing passes.
    """
    limit = rule_set.limit("clarity")
    seen = clarity.strip().casefold()
    if limit is None or not seen:
        return not_set(rule_set, "clarity", stage)
    values = {"value": seen}
    if read(label_grade) == PROCESSING:
        return of_limit("clarity", stage, Outcome.PASS, "clarity-any", limit, values)
    passed = seen == limit.value
    outcome = judged(passed, near=seen in DOUBTFUL_CLARITY)
    message = "clarity-pass" if passed else "clarity-fail"
    return of_limit("clarity", stage, outcome, message, limit, values)


def check_defects(
    rule_set: RuleSet,
    stage: Stage,
    defects: Sequence[tuple[str, str]],
    label_grade: str = "",
) -> Verdict:
    """Judge (defect, intensity) pairs: none passes, a trace is a borderline pass, more fails.

    Fermented, mouldy, chemical and ropy fail at any intensity and in any grade; Processing Grade
    may have the others. An empty list means that none was found, not that nobody looked.
    """
    limit = rule_set.limit("defects")
    if limit is None:
        return not_set(rule_set, "defects", stage)
    listed = ", ".join(f"{name} ({intensity})" for name, intensity in defects) or "none"
    values = {"value": listed}
    if any(word in name.casefold() for name, _ in defects for word in NEVER):
        return of_limit("defects", stage, Outcome.FAIL, "defects-never", limit, values)
    if not defects:
        return of_limit("defects", stage, Outcome.PASS, "defects-none", limit, values)
    if read(label_grade) == PROCESSING:
        return of_limit("defects", stage, Outcome.PASS, "defects-any", limit, values)
    if all(intensity == "trace" for _, intensity in defects):
        outcome, message = Outcome.BORDERLINE_PASS, "defects-trace"
    else:
        outcome, message = Outcome.FAIL, "defects-fail"
    return of_limit("defects", stage, outcome, message, limit, values)

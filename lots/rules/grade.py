"""Colour class against the label's grade, and the clarity and defects a grade allows."""

from collections.abc import Sequence

from lots.physics import colour

from .rule_set import RuleSet
from .verdict import Outcome, Stage, Verdict

NAMES = {"golden": "Golden", "amber": "Amber", "dark": "Dark", "very-dark": "Very Dark"}
BORDER = 4.0  # Proctor Maple Research Center 2020: photometers read within about 4 %Tc


def check_colour(rules: RuleSet, stage: Stage, transmittance: float, label_grade: str) -> Verdict:
    """Judge whether a %Tc fits the class named on the label; nearness is a mark only."""
    limit = rules.limit("colour-golden-min")
    found = colour.grade_class(transmittance)
    wanted = label_grade.strip().lower().replace(" ", "-")
    fits = wanted.startswith(found) or found == wanted
    near = min(abs(transmittance - edge) for edge in (75.0, 50.0, 25.0)) <= BORDER
    if limit is None:
        outcome = Outcome.NOT_SET
    elif fits:
        outcome = Outcome.BORDERLINE_PASS if near else Outcome.PASS
    else:
        outcome = Outcome.FAIL
    return Verdict(
        "colour",
        stage,
        outcome,
        "colour-fits" if fits else "colour-differs",
        {
            "value": colour.shown(transmittance),
            "class": NAMES[found],
            "label": label_grade,
            "source": limit.source if limit else "",
        },
        label_grade,
        "class",
        limit.source if limit else rules.name,
        limit.mark if limit else "",
    )


def check_clarity(rules: RuleSet, stage: Stage, clarity: str, defects: Sequence[str]) -> Verdict:
    """Judge clarity and defects for Grade A: clear, and free of those that count as damage."""
    clean = clarity == "clear" and not defects
    return Verdict(
        "clarity",
        stage,
        Outcome.PASS if clean else Outcome.FAIL,
        "clarity-pass" if clean else "clarity-fail",
        {"clarity": clarity, "defects": ", ".join(defects) or "none", "source": SOURCE},
        "clear, no defect",
        "",
        SOURCE,
        "READ",
    )


SOURCE = "USDA grade standards section 52.5962(a); Canadian Grade Compendium Vol. 7, section 3"

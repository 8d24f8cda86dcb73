"""One sentence for each verdict, with its numbers and source."""

from .verdict import Outcome, Verdict

TEMPLATES = {
    "density-pass": "Density {value} °Brix lies within the limits; the nearest is {limit} °Brix",
    "density-low": "Density {value} °Brix is below the minimum of {limit} °Brix",
    "density-high": "Density {value} °Brix is above the maximum of {limit} °Brix",
    "density-not-set": "No density limit is set",
    "fill-pass": "Filled at {value} {unit}, at or above the minimum of {limit} {unit}",
    "fill-low": "Filled at {value} {unit}, below the minimum of {limit} {unit}",
    "fill-not-set": "No fill temperature is set",
    "colour-fits": "Colour {value} %Tc is {class}, as the label says ({label})",
    "colour-differs": "Colour {value} %Tc is {class}; the label says {label}",
    "clarity-pass": "Clarity {clarity}, defects {defects}",
    "clarity-fail": "Clarity {clarity}, defects {defects}: Grade A asks clear and none",
}


def sentence(verdict: Verdict) -> str:
    """Return the verdict in one sentence."""
    text = TEMPLATES[verdict.message].format(**verdict.values)
    if verdict.outcome in (Outcome.BORDERLINE_PASS, Outcome.BORDERLINE_FAIL):
        text += " (borderline: within the uncertainty of the reading)"
    return f"{text} ({verdict.source})."

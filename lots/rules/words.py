"""One sentence for each verdict, with its numbers and source."""

from .verdict import Outcome, Verdict

# A sentence says what was recorded and which limit it met; it never says what a food is.
TEMPLATES = {
    "density-pass": "Density {value} °Brix lies within {low} to {high} °Brix",
    "density-near": "Density {value} °Brix lies within {low} to {high} °Brix, close to {limit}",
    "density-low": "Density {value} °Brix is below the minimum of {limit} °Brix",
    "density-high": "Density {value} °Brix is above the maximum of {limit} °Brix",
    "density-not-set": "No complete density limit is set for this stage, so none was applied",
    "fill-temperature-pass": "Filled at {value} {unit}, at or above the {kind} minimum of "
    "{limit} {unit}",
    "fill-temperature-low": "Filled at {value} {unit}, below the {kind} minimum of {limit} {unit}",
    "fill-temperature-not-set": "No fill temperature is set, so none was applied",
    "colour-fits": "Colour {value} %Tc is {class}, as the label says ({label})",
    "colour-differs": "Colour {value} %Tc is {class}; the label says {label}",
    "colour-any": "Colour {value} %Tc is {class}; {label} names no colour class",
    "colour-not-set": "Colour {value} %Tc was not compared: no edges are set, or the label's words "
    "({label}) name no grade of the set",
    "clarity-pass": "Clarity seen: {value}",
    "clarity-any": "Clarity seen: {value}; Processing Grade asks none",
    "clarity-fail": "Clarity seen: {value}; Grade A asks {limit}",
    "clarity-not-set": "No clarity was seen or none is asked, so none was compared",
    "defects-none": "Defects found: none",
    "defects-trace": "Defects found: {value}; a trace asks for a second taster",
    "defects-any": "Defects found: {value}; Processing Grade may have them",
    "defects-fail": "Defects found: {value}; Grade A allows {limit}",
    "defects-never": "Defects found: {value}; no grade covers this one",
    "defects-not-set": "No rule on defects is set, so none was applied",
    "container-size-pass": "Processing Grade in {value} {size_unit}, at or above the minimum of "
    "{limit} {unit}",
    "container-size-small": "Processing Grade in {value} {size_unit}, below the minimum of "
    "{limit} {unit}",
    "container-size-not-set": "No container size is set for Processing Grade, so none was applied",
    "loss-pass": "Solids lost: {value} %, within the {limit} % usual for this step",
    "loss-high": "Solids lost: {value} %, above the {limit} % usual for this step",
    "loss-gain": "Solids out exceed solids in by {value} %: check the readings and quantities",
    "loss-not-set": "No loss band is set for this step or nothing was measured going in",
}
BORDERLINE = "; borderline, within the uncertainty of the reading"
# What the required chain of a lot still lacks, in words.
REQUIREMENTS = {
    "collected": "a sap collection behind it",
    "boiled": "a boil behind it",
    "filtered": "a filtration behind it",
    "receiving-decision": "a receiving decision",
    "density": "its own density reading",
    "grade": "its own grade reading",
    "fill-temperature": "a fill temperature",
    "paper-reference": "a reference to its paper",
    "lead-release": "a lead's release",
    "kind-of-goods": "a kind of goods",
}


def sentence(verdict: Verdict) -> str:
    """Return the verdict in one sentence, with its source; KeyError for an unknown message."""
    text = TEMPLATES[verdict.message].format(**verdict.values)
    if verdict.outcome in (Outcome.BORDERLINE_PASS, Outcome.BORDERLINE_FAIL):
        text += BORDERLINE
    return f"{text} ({verdict.source})."

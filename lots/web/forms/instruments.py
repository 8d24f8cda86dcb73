"""The form that registers an instrument."""

from django import forms

from lots.models import Instrument
from lots.recording import setup
from lots.recording.context import Context

KINDS = (
    "hydrometer", "refractometer", "thermometer", "scale", "colour meter", "pressure gauge",
    "flow meter", "other",
)  # fmt: skip
MARKED = {"": None, "60F": 15.56, "20C": 20.0}


class InstrumentForm(forms.Form):
    """A tool that readings are made with, under the tag written on it."""

    tag = forms.CharField(
        label="Tag", max_length=40, help_text="As it is written on the instrument, such as H-1."
    )
    kind = forms.ChoiceField(choices=[(one, one) for one in KINDS])
    marked = forms.ChoiceField(
        label="Marked for",
        required=False,
        choices=[("", "not marked"), ("60F", "60 °F (15.56 °C)"), ("20C", "68 °F (20 °C)")],
        help_text="The temperature its scale is true at, as printed on a hydrometer.",
    )
    compensates = forms.BooleanField(label="Corrects for temperature by itself", required=False)

    def record(self, context: Context) -> Instrument:
        """Register it."""
        data = self.cleaned_data
        return setup.add_instrument(
            context,
            tag=data["tag"],
            kind=data["kind"],
            reference_celsius=MARKED[data["marked"]],
            compensates=data["compensates"],
        )

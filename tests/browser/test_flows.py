"""A day of the crew at a phone, and the lead's decision, through the real forms."""

import pytest

pytestmark = pytest.mark.browser


def record(who, kind, **typed):
    who.goto(f"record/{kind}/")
    who.examine(f"record-{kind}")
    who.enter(**typed)
    who.press({"boil": "Open the boil", "container-fill": "Record fill"}.get(kind, "Record"))
    who.says("Recorded")


def act(who, title, button, **typed):
    who.follow(title)
    who.examine(title.lower().replace(" ", "-"))
    who.enter(**typed)
    who.press(button)
    who.says("Recorded")


def sap_to_syrup(who):
    """Record sap, a whole boil and its filtration."""
    record(who, "collection", woods="North woods", tank="Tank 1", amount_0="400", brix_0="2.0")
    who.examine("step-collection")
    record(who, "boil", evaporator="Evaporator")
    act(who, "Feed", "Record feed", source="Tank 1")
    act(
        who, "Draw-off", "Record draw-off",
        amount_0="8", brix_0="67.2", sample_temperature_0="60", into="Batch tank",
    )  # fmt: skip
    act(who, "Close the boil", "Close the boil", stays_0="5", brix_0="30")
    who.examine("step-boil")
    record(who, "filtration", source="Batch tank", into="Canner")


def fill(who, density):
    record(
        who, "container-fill", product="Amber quart", made="10", source="Canner", taken_0="2.5",
        fill_1_0="186", brix_0=density, sample_temperature_0="60", transmittance_0="62",
        into="Store",
    )  # fmt: skip


def test_a_day_from_the_woods_to_the_store(visit):
    crew = visit("recorder")
    crew.examine("today-recorder")
    sap_to_syrup(crew)
    fill(crew, "66.0")
    crew.says("on hold")
    crew.examine("step-container-fill")

"""A day of the crew at a phone, and the lead's decision, through the real forms."""

import pytest

from tests.browser.conftest import DESK, PHONE

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


def decide(lead, code):
    """See the failing density held, and sign its release."""
    lead.examine("today-lead")
    lead.page.locator("section", has_text="Needs you").get_by_role("link").first.click()
    lead.says("Density 66.00 °Brix is below the minimum of 66.9 °Brix")
    lead.says("on hold")
    lead.examine("lot-held")
    lead.enter(
        cause="The fill began too soon.", correction="Stopped the run.", prevention="Read twice.",
        evaluation="Sound, thin.",
    )  # fmt: skip
    lead.page.get_by_label("Reason for the decision").fill("To be sold as thin syrup.")
    lead.press("Sign release")
    lead.says("Decision signed.")
    lead.says("released")
    lead.examine("lot-released")
    assert code in lead.page.inner_text("h1")


def trace(lead, code):
    """Follow the jar back to the woods."""
    lead.goto("trace/")
    lead.examine("trace")
    lead.page.get_by_label("Lot code, code on the goods").fill(code)
    lead.press("Trace")
    lead.says("Sap from North woods.")
    lead.says("4 pieces shipped")
    lead.page.get_by_role("row", name="Sap").first.get_by_role("link").first.click()
    lead.page.wait_for_url("**/lots/**")
    lead.says("Nothing was drawn: this lot begins here.")
    lead.says("North woods")
    lead.examine("lot-of-sap")


def test_a_day_from_the_woods_to_a_sale(visit):
    crew = visit("recorder")
    crew.examine("today-recorder")
    sap_to_syrup(crew)
    fill(crew, "66.0")
    crew.says("on hold")
    crew.examine("step-container-fill")
    code = crew.page.locator("main .mono").nth(1).inner_text()
    lead = visit("lead")
    decide(lead, code)
    record(crew, "sale", lot_1=1, quantity_1_0="4", customer="Corner Shop (fictional)")
    crew.examine("step-sale")
    trace(lead, code)


PAGES = (
    "", "lots/", "vessels/", "trace/?q=nothing", "registers/places/", "people/", "rules/",
    "journal/", "record/blend/", "packets/", "season/", "instruments/", "settings/",
)  # fmt: skip
AT_THE_DESK = ("", "lots/", "people/", "season/")


@pytest.mark.parametrize("size", [PHONE, DESK], ids=["phone", "desk"])
def test_every_other_page(visit, served, size):
    house, _ = served
    for hour in range(12):
        house.collect("20", hours=hour / 6)
    jars = house.jars()
    owner = visit("owner", size)
    pages = PAGES if size == PHONE else AT_THE_DESK
    of_jars = f"lots/{jars.uuid}/"
    pages += (of_jars, of_jars + "chain/", f"trace/?q={jars.code}")
    for path in (*pages, f"steps/{jars.made_by.uuid}/"):
        owner.goto(path)
        for fold in owner.page.locator("main details > summary").all()[:2]:
            fold.click()
        owner.examine(f"{path.split('/')[0] or 'today'}-{path[-6:-1]}-{size['width']}")

"""Filtering and receiving on their screens: papers, temperatures, carriers, units, gauges."""

from decimal import Decimal

import pytest

from lots.models import DrawRole, Step
from lots.recording import receiving, setup
from lots.recording.measures import Typed
from tests.web.tools import errors, measure, typed, url

pytestmark = pytest.mark.django_db


@pytest.fixture
def recorder(client, house):
    client.force_login(house.recorder)
    return client


@pytest.fixture
def papers(house):
    """Fifty filter papers in the store."""
    item = setup.add_item(
        house.context(house.owner, -48), name="Press paper", kind="filter-paper", unit="piece"
    )
    step = receiving.record_receiving(
        house.context(hours=-24), at=house.at(-24), supplier=house.supplier, item=item,
        amount=Typed(Decimal("50"), "pieces"), place=house.places["Store"],
    )  # fmt: skip
    return step.made_lots.get()


@pytest.fixture
def batch(house):
    """Syrup in the batch tank."""
    house.collect()
    house.boil()
    return house.places["Batch tank"]


def filtering(house, batch, **changed):
    fields = {
        "source": batch.pk, "into": house.places["Canner"].pk, "filter_kind": "press",
        "clarity": "clear",
    }  # fmt: skip
    return typed("2026-04-02T17:30", **{**fields, **changed})


def test_a_filtering_names_its_papers_and_how_hot_the_syrup_was(recorder, house, batch, papers):
    form = filtering(
        house, batch, paper=papers.pk, **measure("paper_amount", "8", "pieces"),
        **measure("temperature", "205", "°F"),
    )  # fmt: skip

    assert recorder.post(url(house, "record", "filtration"), form).status_code == 302

    step = Step.objects.get(kind="filtration")
    assert step.draws.get(role=DrawRole.AID).quantity == 8
    reading = step.readings.get(kind="temperature")
    # 205 °F = 96.1111 °C (arithmetic).
    assert (reading.typed_value, reading.typed_unit) == ("205", "°F")
    assert reading.corrected == "96.1111"


@pytest.mark.parametrize(
    ("changed", "field", "words"),
    [
        ({"paper_amount_0": "2", "paper_amount_1": "lb"}, "paper_amount", "enter pieces"),
        ({"paper_amount_0": "2.5", "paper_amount_1": "pieces"}, "paper_amount", "whole pieces"),
        ({"paper_amount_0": "", "paper_amount_1": "pieces"}, "paper_amount", "how much"),
        ({"temperature_0": "2050", "temperature_1": "°F"}, "temperature", "not a temperature"),
        ({"filter_kind": "not filtered"}, "reason", "why"),
    ],
)
def test_a_slip_in_filtering_is_told_beside_its_field(
    recorder, house, batch, papers, changed, field, words
):
    given = {"paper": papers.pk, "paper_amount_0": "2", "paper_amount_1": "pieces", **changed}

    answer = recorder.post(url(house, "record", "filtration"), filtering(house, batch, **given))

    found = errors(answer)
    assert list(found) == [field]
    assert words in str(found[field])


def test_a_gauge_above_the_book_is_taken_once_it_is_confirmed(recorder, house, batch):
    page = url(house, "record", "filtration")
    # The batch tank holds the 8 US gal drawn off; 8.2 lies within the 5 % of the gauge.
    form = filtering(house, batch, **measure("taken", "8.2"))

    refused = recorder.post(page, form)
    assert list(errors(refused)) == ["taken"]
    assert 'name="difference"' in refused.content.decode()
    recorded = recorder.post(page, {**form, "difference": "1"})

    assert recorded.status_code == 302
    assert Step.objects.get(kind="filtration").adjustments.get().quantity > 0


def delivery(house, **changed):
    fields = {
        "supplier": house.supplier.pk, "item": house.items["bottle"].pk,
        "place": house.places["Store"].pk, "decision": "accept",
    }  # fmt: skip
    return typed("2026-04-02T12:00", **{**fields, **measure("amount", "500", "pieces"), **changed})


def test_a_delivery_names_who_carried_it(recorder, house):
    carrier = setup.add_partner(
        house.context(house.owner), name="Hill Freight (fictional)", kind="carrier"
    )

    answer = recorder.post(url(house, "record", "receiving"), delivery(house, carrier=carrier.pk))

    assert answer.status_code == 302
    assert Step.objects.get(kind="receiving").detail["carrier"] == "Hill Freight (fictional)"


def test_counted_goods_are_not_received_by_weight(recorder, house):
    form = delivery(house, **measure("amount", "500", "lb"))

    found = errors(recorder.post(url(house, "record", "receiving"), form))

    assert "enter pieces" in str(found["amount"])


def test_syrup_is_not_sold_by_the_piece(recorder, house):
    jars = house.jars()
    form = typed(lot_1=jars.pk, **measure("quantity_1", "2", "kg"))

    found = errors(recorder.post(url(house, "record", "sale"), form))

    assert "Amber quart is counted" in str(found["quantity_1"])


def test_the_line_of_a_sale_that_is_too_long_is_the_one_told(recorder, house):
    jars = house.jars()
    pieces = {**measure("quantity_1", "2", "pieces"), **measure("quantity_2", "50", "pieces")}
    form = typed("2026-04-02T19:00", lot_1=jars.pk, lot_2=jars.pk, **pieces)

    found = errors(recorder.post(url(house, "record", "sale"), form))

    assert "holds 18 pieces" in str(found)

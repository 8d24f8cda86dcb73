"""What a story says: how far clean breaks bound it, who got what, and what it leaves unsaid."""

import pytest
from django.db import connection
from django.test.utils import CaptureQueriesContext

from lots.models import Lot
from lots.recording import decisions, goods_out, setup, upkeep
from lots.recording._sources import FromLot
from lots.tracing import story
from tests.factories import pieces

pytestmark = pytest.mark.django_db


def clean(house, vessel, kind, hours):
    return upkeep.record_cleaning(
        house.context(hours=hours), at=house.at(hours), vessel=house.places[vessel],
        break_kind=kind,
    )  # fmt: skip


def sell(house, lot, number, hours=7, customer=True, document=""):
    return goods_out.record_sale(
        house.context(hours=hours), at=house.at(hours), sold=[FromLot(lot, pieces(number))],
        customer=house.customer if customer else None, document=document,
    )  # fmt: skip


def test_what_is_in_it_is_bounded_by_emptied_and_what_touched_it_by_washed_only(house):
    clean(house, "Evaporator", "washed", -3)
    clean(house, "Evaporator", "rinsed", -2)
    jars = house.jars()

    inside = story.tell(jars, "with-aids").bounded
    touched = story.tell(jars, "all").bounded
    assert [step.detail["break"] for step in inside.before] == ["rinsed"]
    assert [step.detail["break"] for step in touched.before] == ["washed"]
    assert [str(place) for place in touched.open] == ["Batch tank", "Canner", "Tank 1"]


def test_a_break_after_the_last_use_is_told_once_and_later_ones_are_not(house):
    jars = house.jars()
    after = clean(house, "Canner", "washed", 8)
    clean(house, "Canner", "emptied", 9)
    elsewhere = clean(house, "Tank 2", "washed", 8)

    told = story.tell(jars)
    assert told.bounded.breaks == [after]
    assert elsewhere not in told.bounded.breaks


def test_a_voided_cleaning_bounds_nothing(house):
    step = clean(house, "Evaporator", "washed", -3)
    jars = house.jars()
    decisions.void_step(house.context(house.lead, hours=7), step=step, reason="not done")
    assert story.tell(jars).bounds == []


def test_one_direction_leaves_the_other_out(house):
    jars = house.jars()
    sell(house, jars, 12)
    back = story.tell(jars, "all", "back")
    forward = story.tell(jars, "all", "forward")

    assert back.shipments == []
    assert back.woods == ["North woods"]
    assert forward.woods == []
    assert forward.suppliers == []
    assert forward.customers == [("Corner Shop (fictional)", 12, jars.code)]
    assert forward.back.steps == {jars.made_by_id}


def test_shipments_name_the_record_and_what_came_back(house):
    jars = house.jars()
    sale = sell(house, jars, 12, document="INV-7")
    goods_out.record_customer_return(
        house.context(hours=8), at=house.at(8), sale=sale, lot=jars, amount=pieces(2),
        into=house.places["Store"], reason="dented",
    )  # fmt: skip
    told = story.tell(jars)

    assert [(one.quantity, one.returned) for one in told.shipments] == [(12, False), (2, True)]
    assert told.shipments[0].step.document == "INV-7"
    assert told.accounting.returned == 2
    assert told.accounting.known == told.accounting.made
    back = Lot.objects.get(made_by__kind="customer-return")
    assert back.pk in told.held


def test_instruments_count_their_readings(house):
    tool = setup.add_instrument(house.context(house.owner), tag="H-1", kind="hydrometer")
    jars = house.jars()
    reading = jars.readings.filter(kind="brix").get()
    reading.instrument = tool
    reading.save(update_fields=["instrument"])
    [one] = story.tell(jars).instruments_used
    assert (one.tag, one.readings, one.last) == ("H-1", 1, reading.at)


def test_an_entry_that_is_not_posted_stands_in_every_story_it_touches(house):
    jars = house.jars()
    sap = Lot.objects.get(item__kind="sap")
    entry = decisions.keep_unposted(
        house.context(hours=8), kind="sale", happened_at=house.at(8), typed={}, reason="too many",
        lots=[jars],
    )  # fmt: skip
    assert story.tell(sap).unposted == [entry]
    assert story.tell(sap, "all", "back").unposted == []


@pytest.mark.engine
def test_a_story_takes_the_same_number_of_statements_whatever_its_size(house):
    jars = house.jars()
    with CaptureQueriesContext(
        connection,
    ) as small:
        story.tell(jars)
    for number in range(8):
        sell(house, jars, 1, hours=7 + number)
    with CaptureQueriesContext(connection) as large:
        story.tell(jars)
    assert len(large) == len(small) <= 14

"""Real cases of the gate: what comes in, goes out, comes back and stands elsewhere."""

from decimal import Decimal

import pytest

from lots.models import LotState
from lots.recording import decisions, goods_out, receiving, setup, upkeep
from lots.recording._sources import FromLot
from lots.recording.errors import NotEnough, NotReleased, OnHold, RecordingError
from lots.recording.measures import NOT_MEASURED, Typed
from lots.tracing import cone, find, story, verify
from tests.factories import brix, gallons, pieces

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


@pytest.fixture(autouse=True)
def _no_faults(house):
    yield
    house.facility.chain.refresh_from_db()
    assert list(verify.chain_faults(house.facility.chain)) == []
    assert list(verify.ledger_faults()) == []


def receive(house, hours=0, place="Drum 1", **more):
    step = receiving.record_receiving(
        house.context(hours=hours),
        at=house.at(hours),
        supplier=house.supplier,
        item=house.items["syrup"],
        amount=gallons("40"),
        place=house.places[place],
        brix=brix("67.2"),
        **more,
    )
    return step.made_lots.get()


def sell(house, lot, number, hours=7, customer=True):
    return goods_out.record_sale(
        house.context(hours=hours),
        at=house.at(hours),
        sold=[FromLot(lot, pieces(number))],
        customer=house.customer if customer else None,
    )


def test_a_rejected_drum_goes_back_to_its_producer_and_nowhere_else(house):
    """Rejected drum back to producer: return to supplier allowed."""
    drum = receive(house, decision="reject", decision_reason="sour", supplier_code="P-9")
    assert drum.state == LotState.REJECTED

    with pytest.raises(NotReleased):
        goods_out.record_sale(
            house.context(hours=1), at=house.at(1), sold=[FromLot(drum, gallons("1"))]
        )
    step = receiving.record_supplier_return(
        house.context(hours=1), at=house.at(1), lot=drum, amount=NOT_MEASURED, reason="sour"
    )

    drum.refresh_from_db()
    assert drum.remaining == 0
    assert step.partner == house.supplier
    assert list(find.lots_by_code(house.facility, "P-9")) == [drum]


def test_a_held_drum_may_go_back_too(house):
    """A held lot may be returned to its supplier."""
    drum = receive(house, decision="hold", decision_reason="smell")

    with pytest.raises(OnHold):
        goods_out.record_sale(
            house.context(hours=1), at=house.at(1), sold=[FromLot(drum, gallons("1"))]
        )
    receiving.record_supplier_return(
        house.context(hours=1), at=house.at(1), lot=drum, amount=NOT_MEASURED, reason="smell"
    )


def test_goods_at_a_shop_on_consignment_stay_ours_until_sold_there(house):
    """Consignment at a shop or market: a move; sold by day sheet."""
    jars = house.jars()
    shop = setup.add_place(house.context(house.owner, 6.5), name="Shop shelf", kind="room")
    upkeep.record_move(
        house.context(hours=7), at=house.at(7), lot=jars,
        come_from=house.places["Store"], to=shop, amount=pieces(8),
    )  # fmt: skip
    goods_out.record_sale(
        house.context(hours=8),
        at=house.at(8),
        sold=[FromLot(jars, pieces(3), place=shop)],
        customer=house.customer,
    )

    jars.refresh_from_db()
    account = story.account(jars)
    assert account.in_stock == {"Store": 12, "Shop shelf": 5}
    assert (account.shipped, jars.remaining) == (3, 17)
    with pytest.raises(NotEnough):
        goods_out.record_sale(
            house.context(hours=8), at=house.at(8), sold=[FromLot(jars, pieces(6), place=shop)]
        )


def test_counter_sales_are_one_sheet_of_several_lots(house):
    """Counter sales: day sheet per product and lot."""
    jars = house.jars()
    part = upkeep.record_split(
        house.context(hours=6.5), at=house.at(6.5), lot=jars, amount=pieces(5), reason="shelf"
    ).made_lots.get()
    sheet = goods_out.record_sale(
        house.context(hours=9),
        at=house.at(9),
        sold=[FromLot(jars, pieces(2)), FromLot(part, pieces(3))],
        document="day sheet 2 April",
    )

    assert sheet.draws.count() == 2
    told = story.tell(jars)
    assert ("over the counter", 2, jars.code) in told.customers
    assert ("over the counter", 3, part.code) in told.customers


def test_a_sheet_with_one_bad_line_is_not_half_written(house):
    """Counter sales: a sheet is whole or absent."""
    jars = house.jars()
    lines = [FromLot(jars, pieces(2)), FromLot(jars, pieces(19))]

    with pytest.raises(NotEnough):
        goods_out.record_sale(house.context(hours=9), at=house.at(9), sold=lines)

    jars.refresh_from_db()
    assert (jars.shipped, jars.remaining) == (0, 20)


def test_what_comes_back_is_found_by_the_same_code_and_the_recall_sees_both(house):
    """Customer return: a new held lot of role returned, named by its sale line."""
    jars = house.jars()
    sale = sell(house, jars, 10)
    back = goods_out.record_customer_return(
        house.context(hours=30), at=house.at(30), sale=sale, lot=jars, amount=pieces(4),
        into=house.places["Store"], reason="recall",
    ).made_lots.get()  # fmt: skip

    line = back.made_by.draws.get()
    assert (line.role, line.returns.step, line.quantity) == ("returned", sale, 4)
    assert set(find.lots_by_code(house.facility, jars.printed_code.text)) == {jars, back}
    assert jars.pk in cone.back(back.made_by_id).lots
    assert back.made_by_id in cone.forward(jars.pk).steps
    other = sell(house, jars, 5, hours=31)
    with pytest.raises(RecordingError, match="4 came back"):
        goods_out.record_customer_return(
            house.context(hours=32), at=house.at(32), sale=sale, lot=jars, amount=pieces(7),
            into=house.places["Store"], reason="recall",
        )  # fmt: skip
    assert other.draws.get().quantity == 5


@pytest.mark.parametrize("reason", goods_out.REMOVALS)
def test_every_way_out_that_is_not_a_sale_is_accounted(house, reason):
    """Samples, tasting, gift, breakage, spill, heel, destruction: removed, never sold."""
    jars = house.jars()
    goods_out.record_removal(
        house.context(hours=8), at=house.at(8), lot=jars, reason=reason, amount=pieces(1)
    )

    account = story.account(jars)
    assert (account.removed, account.shipped, account.stock_total) == (1, 0, 19)
    assert account.unexplained == 0


def test_a_laboratory_sample_is_taken_of_held_goods(house):
    """A held lot may still be sampled and destroyed."""
    jars = house.jars(heat="170")
    goods_out.record_removal(
        house.context(hours=8), at=house.at(8), lot=jars, reason="laboratory sample",
        amount=pieces(1),
    )  # fmt: skip
    jars.refresh_from_db()
    goods_out.record_removal(house.context(hours=9), at=house.at(9), lot=jars, reason="destruction")

    jars.refresh_from_db()
    assert jars.remaining == 0


def test_received_syrup_needs_its_own_readings_before_it_is_released(house):
    """A packer's delivery: the decision alone releases nothing."""
    drum = receive(house)

    assert drum.goods_kind == "received-syrup"
    assert drum.state == LotState.WAITING
    assert drum.checks.filter(rule="density").exists()


def test_the_aid_never_blocks_and_the_difference_is_booked(house):
    """Materials: what is drawn above the book is an adjustment in the same record."""
    aid = house.receive_aid()
    house.collect()
    house.boil()
    upkeep.record_count(
        house.context(house.lead, 4.5), at=house.at(4.5), lot=aid, place=house.places["Store"],
        counted=Typed(Decimal("0.5"), "lb"), reason="counted",
    )  # fmt: skip
    house.filter(aid=aid)

    aid.refresh_from_db()
    assert aid.remaining == 0
    assert aid.drawn == aid.made + aid.adjusted


def test_paper_pages_typed_next_day_are_marked_late_and_stand(house):
    """Late paper pages: recorded as late, with the page they were read from."""
    house.collect(hours=0)
    jars_in_book = house.context(hours=40)
    step = goods_out.record_removal(
        jars_in_book,
        at=house.at(1),
        lot=house.collect("10", hours=0.5),
        reason="spill",
        note="read from paper page 4",
    )

    assert step.late
    assert step.recorded_at == house.at(40)


def test_an_act_that_cannot_stand_is_kept_until_a_lead_settles_it(house):
    """Unposted entry: kept with its reason and the lots it touches."""
    jars = house.jars()
    kept = decisions.keep_unposted(
        house.context(hours=9), kind="sale", happened_at=house.at(7),
        typed={"quantity": "25", "lot": jars.code}, reason="The book has 20.", lots=[jars],
    )  # fmt: skip

    assert list(jars.unposted.filter(settled_at=None)) == [kept]
    with pytest.raises(RecordingError):
        decisions.settle_unposted(
            house.context(hours=10), entry=kept, settled_as="voided", reason="typed twice"
        )
    decisions.settle_unposted(
        house.context(house.lead, 10), entry=kept, settled_as="voided", reason="typed twice"
    )
    kept.refresh_from_db()
    assert (kept.settled_as, kept.settled_by) == ("voided", house.lead)

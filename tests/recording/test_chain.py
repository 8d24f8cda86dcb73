"""The whole chain from sap to sale, and what each record refuses."""

from decimal import Decimal
from uuid import uuid4

import pytest

from lots.models import Draw, Hold, JournalEntry, Lot, LotState, Step
from lots.recording import decisions, goods_out, sap, upkeep
from lots.recording._door import AlreadyRecorded
from lots.recording._sources import FromLot, FromVessel
from lots.recording.context import Context
from lots.recording.errors import (
    NotAllowed,
    NotEnough,
    NotReleased,
    OnHold,
    RecordingError,
    SentBefore,
    StillNeeded,
    WrongTime,
)
from lots.recording.measures import Typed
from lots.tracing import story, verify
from tests.factories import brix, fahrenheit, gallons, pieces

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


def no_faults(house):
    house.facility.chain.refresh_from_db()
    assert list(verify.chain_faults(house.facility.chain)) == []
    assert list(verify.ledger_faults()) == []


def test_a_whole_chain_is_released_and_sold(house):
    jars = house.jars()
    jars.refresh_from_db()

    goods_out.record_sale(
        house.context(hours=7),
        at=house.at(7),
        sold=[FromLot(jars, pieces(12))],
        customer=house.customer,
    )

    jars.refresh_from_db()
    assert jars.state == LotState.RELEASED
    assert (jars.remaining, jars.shipped) == (8, 12)
    assert jars.goods_kind == "own-syrup"
    house.facility.chain.refresh_from_db()
    no_faults(house)


def test_jars_trace_back_to_woods_and_filter_aid_supplier_and_forward_to_the_customer(house):
    jars = house.jars()
    goods_out.record_sale(
        house.context(hours=7),
        at=house.at(7),
        sold=[FromLot(jars, pieces(12))],
        customer=house.customer,
    )
    jars.refresh_from_db()

    told = story.tell(jars)

    assert told.woods == ["North woods"]
    assert told.suppliers == ["Aid Supply (fictional)"]
    assert told.customers == [("Corner Shop (fictional)", 12, jars.code)]
    assert told.accounting.in_stock == {"Store": 8}
    assert told.accounting.unexplained == 0


def test_light_syrup_in_jars_is_held_until_a_lead_releases_it(house):
    # 66.4 °Brix at 60 °F is under Vermont's 66.9 (Vermont Maple Regulations, section III; READ-2).
    jars = house.jars(density="66.4")
    hold = Hold.objects.get(lot=jars)
    assert "66.40 °Brix is below the minimum of 66.9" in hold.reason

    with pytest.raises(OnHold):
        goods_out.record_sale(
            house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(1))]
        )
    lead = house.context(house.lead, hours=8)
    shown = decisions.shown_hash(Lot.objects.get(pk=jars.pk))
    with pytest.raises(RecordingError, match="corrective action first"):
        decisions.decide_hold(
            lead, hold=hold, decision="release", reason="re-read at 67.0", shown=shown
        )
    decisions.complete_action(
        lead,
        action=hold.actions.get(),
        cause="hydrometer read hot",
        correction="read again",
        prevention="cup rule",
        evaluation="no hazard found",
    )
    lot = decisions.decide_hold(
        lead, hold=hold, decision="release", reason="re-read at 67.0", shown=shown
    )

    assert lot.state == LotState.RELEASED
    assert Hold.objects.get(lot=jars).decision == "release"


def test_a_recorder_may_not_release(house):
    jars = house.jars(heat="170")
    hold = Hold.objects.get(lot=jars)

    with pytest.raises(NotAllowed):
        decisions.decide_hold(
            house.context(hours=8), hold=hold, decision="release", reason="x", shown="y"
        )


def test_a_decision_on_a_changed_record_is_refused(house):
    jars = house.jars(heat="170")
    hold = Hold.objects.get(lot=jars)

    with pytest.raises(RecordingError, match="changed since"):
        decisions.decide_hold(
            house.context(house.lead, 8), hold=hold, decision="reject", reason="x", shown="old"
        )


def test_more_than_the_tank_holds_is_refused_and_nothing_is_written(house):
    house.collect("100")
    before = (Step.objects.count(), Draw.objects.count(), JournalEntry.objects.count())

    with pytest.raises(NotEnough, match="Tank 1 holds"):
        sap.record_concentration(
            house.context(hours=1),
            at=house.at(1),
            ended_at=house.at(1),
            machine=house.places["RO"],
            sources=[FromVessel(house.places["Tank 1"], gallons("150"))],
            into=house.places["Tank 2"],
            item=house.items["concentrate"],
            brix=brix("8"),
        )

    after = (Step.objects.count(), Draw.objects.count(), JournalEntry.objects.count())
    assert after == before


def test_emptying_a_tank_takes_it_to_exactly_zero(house):
    first = house.collect("100")
    second = house.collect("33.3", hours=1)

    house.boil()

    first.refresh_from_db()
    second.refresh_from_db()
    assert (first.remaining, second.remaining) == (0, 0)
    assert (first.solids_remaining, second.solids_remaining) == (0, 0)
    no_faults(house)


def test_the_pans_carry_over_into_the_next_boil(house):
    house.collect()
    first = house.boil(hours=4)
    house.collect("200", hours=20)

    second = house.boil(hours=28, into="Drum 1", out="4")

    carried = second.draws.get(role="carry-over")
    assert carried.from_step_id == first.pk
    assert carried.quantity
    assert carried.lot.remaining == 0


def test_a_sale_needs_released_goods(house):
    house.collect()
    step = house.boil()
    lot = step.made_lots.get(item=house.items["syrup"])

    with pytest.raises(NotReleased):
        goods_out.record_sale(
            house.context(hours=7), at=house.at(7), sold=[FromLot(lot, gallons("1"))]
        )


def test_the_same_form_twice_is_one_record(house):
    form = uuid4()
    content = {"amount": "10"}
    context = Context(house.facility, house.recorder, house.at(), client=(form, content))
    fields = {
        "at": house.at(),
        "woods": house.places["North woods"],
        "tank": house.places["Tank 1"],
        "item": house.items["sap"],
        "amount": gallons("10"),
    }
    step = sap.record_collection(context, **fields)

    with pytest.raises(AlreadyRecorded) as again:
        sap.record_collection(context, **fields)
    changed = Context(house.facility, house.recorder, house.at(), client=(form, {"amount": "11"}))
    with pytest.raises(SentBefore):
        sap.record_collection(changed, **fields)

    assert again.value.step == step
    assert Lot.objects.filter(item=house.items["sap"]).count() == 1


def test_the_future_is_refused(house):
    with pytest.raises(WrongTime):
        sap.record_collection(
            house.context(),
            at=house.at(1),
            woods=house.places["North woods"],
            tank=house.places["Tank 1"],
            item=house.items["sap"],
            amount=gallons("10"),
        )


@pytest.mark.parametrize("heat", ["300", "-80"])
def test_an_impossible_fill_temperature_is_refused(house, heat):
    with pytest.raises(RecordingError):
        house.jars(heat=heat)


def test_brix_over_a_hundred_is_refused(house):
    with pytest.raises(RecordingError, match="cannot be corrected"):
        house.jars(density="120")


def test_an_amount_not_measured_needs_a_reason_and_keeps_its_place_in_the_chain(house):
    with pytest.raises(RecordingError, match="not measured"):
        sap.record_collection(
            house.context(),
            at=house.at(),
            woods=house.places["North woods"],
            tank=house.places["Tank 1"],
            item=house.items["sap"],
        )
    step = sap.record_collection(
        house.context(),
        at=house.at(),
        woods=house.places["North woods"],
        tank=house.places["Tank 1"],
        item=house.items["sap"],
        not_measured_reason="gauge frozen",
    )
    boiled = house.boil()

    assert step.made_lots.get().remaining is None
    assert boiled.draws.get(lot__made_by=step).quantity is None
    no_faults(house)


def test_a_void_gives_back_what_it_drew_and_names_what_depends_on_it(house):
    house.collect()
    boiled = house.boil()
    pressed = house.filter()
    lead = house.context(house.lead, hours=9)

    with pytest.raises(StillNeeded):
        decisions.void_step(lead, step=boiled, reason="wrong tank")
    decisions.void_step(lead, step=pressed.made_by, reason="wrong press")

    pressed.refresh_from_db()
    assert pressed.state == LotState.VOID
    assert Draw.objects.filter(step=pressed.made_by, ended_at=None).count() == 0
    syrup = boiled.made_lots.get(item=house.items["syrup"])
    assert syrup.remaining == syrup.made
    no_faults(house)


def test_a_return_makes_a_held_lot_with_the_same_code_and_never_more_than_was_sold(house):
    jars = house.jars()
    sale = goods_out.record_sale(
        house.context(hours=7),
        at=house.at(7),
        sold=[FromLot(jars, pieces(5))],
        customer=house.customer,
    )
    common = {
        "at": house.at(30), "sale": sale, "lot": jars, "into": house.places["Store"],
        "reason": "leaking cap",
    }  # fmt: skip

    with pytest.raises(RecordingError, match="5 of"):
        goods_out.record_customer_return(house.context(hours=30), amount=pieces(6), **common)
    step = goods_out.record_customer_return(house.context(hours=30), amount=pieces(2), **common)

    back = step.made_lots.get()
    assert back.printed_code == jars.printed_code
    assert back.holds.filter(ended_at=None).exists()
    jars.refresh_from_db()
    assert (jars.returned, jars.remaining) == (2, 15)
    no_faults(house)


def test_a_held_lot_can_be_reworked_to_bulk(house):
    jars = house.jars(heat="170")

    step = upkeep.record_rework(
        house.context(hours=9),
        at=house.at(9),
        lot=jars,
        amount=pieces(20),
        into=house.places["Drum 2"],
        item=house.items["syrup"],
    )

    bulk = step.made_lots.get()
    assert bulk.made == jars.piece_mg * 20
    assert bulk.solids_made == jars.piece_solids_mg * 20


def test_holding_a_lot_holds_what_was_made_from_it(house):
    aid = house.receive_aid()
    house.collect()
    boiled = house.boil()
    house.filter(aid=aid)
    jars = house.fill()

    held = decisions.place_hold(
        house.context(house.lead, 8),
        lot=boiled.made_lots.get(item=house.items["syrup"]),
        reason="thermometer in doubt",
    )

    assert jars.pk in {hold.lot_id for hold in held}


def test_another_facilitys_lot_is_refused(house):
    from tests.factories import sugarhouse

    other = sugarhouse("other-place")
    jars = other.jars()

    with pytest.raises(RecordingError, match="receive it first"):
        goods_out.record_sale(
            house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(1))]
        )


def test_a_move_changes_only_where_goods_stand(house):
    jars = house.jars()
    upkeep.record_move(
        house.context(hours=8),
        at=house.at(8),
        lot=jars,
        come_from=house.places["Store"],
        to=house.places["Drum 2"],
        amount=Typed(Decimal(5), "pieces"),
    )

    jars.refresh_from_db()
    assert story.account(jars).in_stock == {"Store": 15, "Drum 2": 5}
    assert jars.remaining == 20
    assert fahrenheit("186").unit == "°F"


def test_late_sap_is_carried_into_the_boil_that_drew_from_its_tank(house):
    house.collect("100", hours=1)
    boiled = house.boil(hours=6)

    late = sap.record_collection(
        house.context(hours=30),
        at=house.at(2),
        woods=house.places["South woods"],
        tank=house.places["Tank 1"],
        item=house.items["sap"],
        amount=gallons("50"),
    )

    assert boiled.draws.filter(lot__made_by=late, role="carry-over").exists()

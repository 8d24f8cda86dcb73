"""Real cases of the sugarbush and the evaporator, each as the records represent it."""

import pytest

from lots.models import DrawRole, Lot, LotState
from lots.recording import boil, goods_out, sap, syrup, upkeep
from lots.recording._sources import FromLot, FromVessel
from lots.recording.errors import RecordingError, WouldLoop
from lots.tracing import cone, verify
from tests.cases.tools import feed, open_boil, pass_on, syrup_of
from tests.factories import brix, gallons

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


@pytest.fixture(autouse=True)
def _no_faults(house):
    yield
    house.facility.chain.refresh_from_db()
    assert list(verify.chain_faults(house.facility.chain)) == []
    assert list(verify.ledger_faults()) == []


def draw_off(house, running, hours, amount, into="Batch tank", at_brix="67"):
    return boil.draw_off(
        house.context(hours=hours),
        boil=running,
        item=house.items["syrup"],
        draw=boil.DrawOff(house.at(hours), house.places[into], gallons(amount), brix(at_brix)),
    )


def close(house, running, hours, stays="5"):
    return boil.close_boil(
        house.context(hours=hours),
        boil=running,
        at=house.at(hours),
        contents=house.items["contents"],
        stays=gallons(stays),
        brix=brix("30"),
    )


def test_continuous_evaporator_late_sap_of_the_segment_is_behind_all_its_syrup(house):
    """Continuous evaporator, gradient pans: each vessel's draw-offs one lot, pans one lot."""
    early = house.collect("200")
    running = open_boil(house, 1)
    feed(house, running, 1)
    first = draw_off(house, running, 2, "3", into="Drum 1")
    late = house.collect("200", hours=3)
    feed(house, running, 3)
    second = draw_off(house, running, 4, "3", into="Drum 2")
    close(house, running, 5)

    assert first.pk != second.pk
    assert [lot.made_at for lot in (first, second)] == [house.at(2), house.at(4)]
    assert {early.pk, late.pk} <= cone.back(first.made_by_id).lots
    pans = running.made_lots.get(item=house.items["contents"])
    assert pans.remaining == pans.made
    house.collect("100", hours=20)
    assert open_boil(house, 21).draws.get(role=DrawRole.CARRY_OVER).lot == pans


def test_draw_offs_join_yesterdays_heel_and_the_press_takes_both_to_exactly_zero(house):
    """Draw-offs into one batch tank with yesterday's heel."""
    house.collect("400")
    heel = syrup_of(house, house.boil(hours=4))
    pass_on(house, 5, FromVessel(house.places["Batch tank"], gallons("5")), "Canner")
    house.collect("300", hours=20)
    today = syrup_of(house, house.boil(hours=24, out="5"))

    pressed = pass_on(house, 25, FromVessel(house.places["Batch tank"]), "Drum 1")

    drawn = {draw.lot_id: draw.quantity for draw in pressed.draws.exclude(role="residue")}
    assert set(drawn) == {heel.pk, today.pk}
    heel.refresh_from_db()
    today.refresh_from_db()
    assert (heel.remaining, today.remaining) == (0, 0)
    assert (heel.solids_remaining, today.solids_remaining) == (0, 0)
    assert pressed.made_lots.get().made == sum(drawn.values())


def test_a_light_draw_off_goes_back_to_the_pan_as_an_event(house):
    """Light draw-off back in pan."""
    house.collect()
    running = open_boil(house, 1)
    feed(house, running, 1)
    light = draw_off(house, running, 2, "4", at_brix="60")
    whole = light.made
    boil.put_back(
        house.context(hours=2.1), boil=running, lot=light, at=house.at(2.1), amount=gallons("1")
    )

    light.refresh_from_db()
    assert running.events.filter(kind="put-back").count() == 1
    assert light.made == light.remaining == pytest.approx(whole * 0.75, rel=1e-6)
    assert light.stock.get().quantity == light.remaining
    assert Lot.objects.filter(made_by=running).count() == 1
    assert not light.holds.exists()


def test_press_rinse_goes_back_into_the_next_boil_never_into_the_one_behind_it(house):
    """Press rinse back to float box: the running boil is closed, segment 2 takes it."""
    house.collect("200")
    running = open_boil(house, 1)
    feed(house, running, 1)
    draw_off(house, running, 2, "4")
    rinse = pass_on(house, 2.5, FromVessel(house.places["Batch tank"], gallons("1")), "Drum 1")
    back = FromVessel(house.places["Drum 1"])

    with pytest.raises(WouldLoop):
        feed(house, running, 3, back)
    close(house, running, 3)
    second = open_boil(house, 3)
    feed(house, second, 3.1, back)

    assert running.pk in cone.back(second.pk).steps
    assert rinse.pk in cone.back(second.pk).steps
    assert second.pk not in cone.back(running.pk).steps


def concentrate(house, hours, tank, into, at_brix="8"):
    return sap.record_concentration(
        house.context(hours=hours),
        at=house.at(hours),
        ended_at=house.at(hours),
        machine=house.places["RO"],
        sources=[FromVessel(house.places[tank])],
        into=house.places[into],
        item=house.items["concentrate"],
        brix=brix(at_brix),
        permeate=gallons("100"),
    )


def test_ro_into_its_own_tank_and_a_second_pass(house):
    """RO recirculating into its own tank; two passes; permeate is a field, never a draw."""
    fresh = house.collect("400")
    first = concentrate(house, 1, "Tank 1", "Tank 1")
    second = concentrate(house, 2, "Tank 1", "Tank 2", at_brix="15")

    made = first.made_lots.get()
    assert first.draws.get(role="ingredient").lot == fresh
    assert second.draws.get(role="ingredient").lot == made
    assert second.made_lots.get().solids_made == made.solids_made == fresh.solids_made
    assert Lot.objects.count() == 3
    assert first.detail["permeate"] == "100"


def test_the_gathering_tank_the_truck_and_the_head_tank_are_transfers(house):
    """Gathering tank → truck → head tank."""
    gathered = house.collect("300", tank="Tank 2")
    moved = syrup.record_mixture(
        house.context(hours=1),
        kind="transfer",
        at=house.at(1),
        sources=[FromVessel(house.places["Tank 2"])],
        into=house.places["Tank 1"],
        item=house.items["sap"],
    )

    head = moved.made_lots.get()
    assert (head.made, head.solids_made) == (gathered.made, gathered.solids_made)
    assert gathered.pk in cone.back(house.boil().pk).lots


def test_a_tank_of_two_woods_is_drawn_in_proportion(house):
    """Sap tanker, several farms: one vessel with one lot a farm."""
    first = house.collect("300")
    second = house.collect("100", hours=0.5)
    running = open_boil(house, 1)
    feed(house, running, 1, FromVessel(house.places["Tank 1"], gallons("100")))

    drawn = {draw.lot_id: draw.quantity for draw in running.draws.all()}
    assert drawn[first.pk] / drawn[second.pk] == pytest.approx(3)
    assert sum(drawn.values()) * 4 == pytest.approx(first.made + second.made, rel=1e-4)


def test_old_paper_without_a_volume_keeps_its_place_and_zero_is_not_invented(house):
    """Missing volumes on old paper: "not measured", with a reason."""
    step = sap.record_collection(
        house.context(hours=48),
        at=house.at(0),
        woods=house.places["North woods"],
        tank=house.places["Tank 1"],
        item=house.items["sap"],
        not_measured_reason="page 12: not written down",
        note="read from paper page 12",
    )
    boiled = house.boil(hours=49)

    lot = step.made_lots.get()
    assert (lot.made, lot.remaining, lot.typed_value) == (None, None, "")
    assert step.late
    assert lot.pk in cone.back(boiled.pk).lots


def test_a_wash_of_the_canner_is_on_the_story_and_its_agent_reaches_the_next_run(house):
    """Canner washed: a break of the vessel, and the agent's lot is drawn by the cleaning."""
    aid = house.receive_aid()
    step = upkeep.record_cleaning(
        house.context(hours=1),
        at=house.at(1),
        vessel=house.places["Canner"],
        break_kind="washed",
        agent=aid,
        amount=gallons("0"),
        strength="1 %",
    )

    assert step.draws.get().role == DrawRole.CLEANING
    with pytest.raises(RecordingError):
        upkeep.record_cleaning(
            house.context(hours=1),
            at=house.at(1),
            vessel=house.places["Canner"],
            break_kind="wiped",
        )


def test_more_lots_wait_open_until_the_boil_closes(house):
    """Label yes, ship no: what a running boil makes cannot be sold."""
    house.collect()
    running = open_boil(house, 1)
    feed(house, running, 1)
    lot = draw_off(house, running, 2, "4", into="Drum 1")

    assert lot.state == LotState.OPEN
    with pytest.raises(RecordingError, match="open"):
        goods_out.record_sale(
            house.context(hours=2), at=house.at(2), sold=[FromLot(lot, gallons("1"))]
        )
    close(house, running, 3)
    lot.refresh_from_db()
    assert lot.state == LotState.WAITING

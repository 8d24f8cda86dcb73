"""Nobody writes beyond the role at that facility, and every write goes through one door."""

import pytest

from lots.models import JournalEntry, Membership
from lots.recording import boil, decisions, goods_out, receiving, sap, setup, syrup, upkeep
from lots.recording._sources import FromLot, FromVessel
from lots.recording.errors import NotAllowed
from lots.recording.measures import NOT_MEASURED, Typed
from lots.rules.roles import Role
from tests.factories import brix, gallons, pieces, sugarhouse

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


def recorders(house, jars, context):
    """Return one call of each act that a recorder may do."""
    at, places, items = house.at(8), house.places, house.items
    return [
        lambda: sap.record_collection(
            context, at=at, woods=places["North woods"], tank=places["Tank 1"],
            item=items["sap"], amount=gallons("10"),
        ),
        lambda: sap.record_concentration(
            context, at=at, ended_at=at, machine=places["RO"], item=items["concentrate"],
            sources=[FromVessel(places["Tank 1"])], into=places["Tank 2"], brix=brix("8"),
        ),
        lambda: boil.open_boil(context, at=at, evaporator=places["Evaporator"]),
        lambda: receiving.record_receiving(
            context, at=at, supplier=house.supplier, item=items["aid"],
            amount=Typed(1, "lb"), place=places["Store"],
        ),
        lambda: receiving.record_opening_stock(
            context, at=at, item=items["quart"], amount=pieces(1), place=places["Store"],
            document="p. 1",
        ),
        lambda: syrup.record_grade_reading(context, at=at, lot=jars, brix=brix("67")),
        lambda: goods_out.record_sale(context, at=at, sold=[FromLot(jars, pieces(1))]),
        lambda: goods_out.record_removal(
            context, at=at, lot=jars, reason="gift", amount=pieces(1)
        ),
        lambda: upkeep.record_move(
            context, at=at, lot=jars, come_from=places["Store"], to=places["Drum 2"],
            amount=pieces(1),
        ),
        lambda: upkeep.record_split(context, at=at, lot=jars, amount=pieces(1), reason="x"),
        lambda: upkeep.record_cleaning(
            context, at=at, vessel=places["Canner"], break_kind="washed"
        ),
        lambda: setup.add_place(context, name="New tank", kind="tank"),
        lambda: decisions.keep_unposted(
            context, kind="sale", happened_at=at, typed={}, reason="x", lots=[jars]
        ),
    ]  # fmt: skip


def nothing_is_written(acts):
    before = JournalEntry.objects.count()
    for act in acts:
        with pytest.raises(NotAllowed):
            act()
    assert JournalEntry.objects.count() == before


def test_an_inspector_writes_nothing(house):
    jars = house.jars()

    nothing_is_written(recorders(house, jars, house.context(house.inspector, hours=8)))


def test_another_facilitys_owner_writes_nothing_here(house):
    jars = house.jars()
    stranger = sugarhouse("other-place").owner

    nothing_is_written(recorders(house, jars, house.context(stranger, hours=8)))


def test_a_person_who_left_writes_nothing_any_more(house):
    jars = house.jars()
    member = Membership.objects.get(facility=house.facility, user=house.recorder)
    setup.change_person(house.context(house.owner, 7), member=member, active=False)

    nothing_is_written(recorders(house, jars, house.context(house.recorder, hours=8)))


def test_a_log_in_that_was_disabled_writes_nothing(house):
    jars = house.jars()
    house.recorder.is_active = False
    house.recorder.save()

    nothing_is_written(recorders(house, jars, house.context(house.recorder, hours=8)))


def lead_acts(house, jars, context):
    hold = jars.holds.get()
    shown = decisions.shown_hash(jars)
    return [
        lambda: decisions.place_hold(context, lot=jars, reason="x"),
        lambda: decisions.decide_hold(
            context, hold=hold, decision="release", reason="x", shown=shown
        ),
        lambda: decisions.release_lot(context, lot=jars, reason="x", shown=shown),
        lambda: decisions.complete_action(
            context, action=hold.actions.get(), cause="a", correction="b", prevention="c",
            evaluation="d",
        ),
        lambda: upkeep.record_count(
            context, at=house.at(8), lot=jars, place=house.places["Store"], counted=pieces(1),
            reason="x",
        ),
    ]  # fmt: skip


def test_a_recorder_takes_no_leads_decision(house):
    jars = house.jars(heat="170")

    nothing_is_written(lead_acts(house, jars, house.context(hours=8)))


def test_a_lead_keeps_no_people_and_no_settings(house):
    context = house.context(house.lead, hours=1)

    nothing_is_written(
        [
            lambda: setup.change_facility(context, rule_set="maine"),
            lambda: setup.add_person(
                context, username="friend", password="pass-word-1", role=Role.OWNER
            ),
        ]
    )


def test_each_entry_names_the_person_and_the_act(house):
    jars = house.jars()
    step = goods_out.record_removal(
        house.context(hours=8), at=house.at(8), lot=jars, reason="gift", amount=NOT_MEASURED
    )

    assert JournalEntry.objects.last().label.startswith("Removal")
    assert step.recorded_by == house.recorder
    assert f'"actor":"{house.recorder.username}"' in JournalEntry.objects.last().body

"""Acts that tempt the ledger: voids, late acts, held sources, other facilities, bad amounts."""

import json
from decimal import Decimal

import pytest
from django.apps import apps

from lots.models import Hold, JournalEntry, Lot, LotState
from lots.recording import (
    boil,
    container_fill,
    decisions,
    goods_out,
    sap,
    syrup,
    upkeep,
)
from lots.recording._sources import FromLot, FromVessel
from lots.recording.errors import RecordingError
from lots.recording.measures import Typed
from lots.tracing import images, verify
from tests.cases.tools import feed, open_boil
from tests.factories import brix, fahrenheit, gallons, pieces, sugarhouse

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


def faults(house):
    house.facility.chain.refresh_from_db()
    return (
        list(verify.chain_faults(house.facility.chain))
        + list(verify.ledger_faults())
        + list(verify.image_faults())
    )


def unjournaled(house):
    """Rows whose last after-image in the journal differs from what the tables hold."""
    last = {}
    for entry in JournalEntry.objects.order_by("chain", "seq"):
        for image in json.loads(entry.body)["rows"]:
            if "uuid" in image:
                last[image["table"], image["uuid"]] = image
    wrong = []
    for model in apps.get_app_config("lots").get_models():
        names = {f.name for f in model._meta.fields}
        if "uuid" not in names:
            continue
        for image in images.after_images(model.objects.all()):
            image = json.loads(json.dumps(image))
            found = last.get((image["table"], image["uuid"]))
            if found is None:
                wrong.append((image["table"], "never journaled", image))
            elif found != image:
                diff = {k: (found.get(k), v) for k, v in image.items() if found.get(k) != v}
                wrong.append((image["table"], image.get("code"), diff))
    return wrong


def lead_shown(house, hold):
    return decisions.shown_hash(Lot.objects.get(pk=hold.lot_id))


def decide(house, hold, decision, hours=9):
    for action in hold.actions.filter(completed_at=None):
        decisions.complete_action(
            house.context(house.lead, hours),
            action=action,
            cause="a",
            correction="b",
            prevention="c",
            evaluation="d",
        )
    return decisions.decide_hold(
        house.context(house.lead, hours),
        hold=hold,
        decision=decision,
        reason="seen",
        shown=lead_shown(house, hold),
    )


def test_late_goods_from_held_inherit(house):
    aid = house.receive_aid()
    house.collect()
    house.boil()
    pressed = house.filter(aid=aid)
    decisions.place_hold(house.context(house.lead, 5.5), lot=pressed, reason="thermometer")
    run = container_fill.Run(
        product=house.items["quart"],
        made=20,
        into=house.places["Store"],
        fill_temperatures=[fahrenheit("186")],
        brix=brix("67.2"),
        transmittance=Typed(Decimal(62), "%Tc"),
    )
    step = container_fill.record_container_fill(
        house.context(hours=30),
        at=house.at(6),
        sources=[FromVessel(house.places["Canner"], gallons("5"))],
        run=run,
    )
    jars = step.made_lots.get()
    assert jars.holds.filter(ended_at=None).exists(), jars.state
    assert jars.state != LotState.RELEASED


def test_release_while_open_behind(house):
    aid = house.receive_aid()
    house.collect()
    running = open_boil(house, 1)
    feed(house, running, 1)
    boil.draw_off(
        house.context(hours=3),
        boil=running,
        item=house.items["syrup"],
        draw=boil.DrawOff(house.at(3), house.places["Batch tank"], gallons("8"), brix("67.2")),
    )
    house.filter(aid=aid)
    jars = house.fill()
    jars.refresh_from_db()
    assert jars.state == LotState.WAITING
    with pytest.raises(RecordingError):
        decisions.release_lot(
            house.context(house.lead, 7), lot=jars, reason="x", shown=decisions.shown_hash(jars)
        )


def recorders_acts(house, other, jars):
    """What a recorder here might try with another facility's jars."""
    rec, at = house.context(hours=8), house.at(8)
    here, there = house.places, other.places
    return {
        "move": lambda: upkeep.record_move(
            rec, at=at, lot=jars, come_from=there["Store"], to=here["Store"], amount=pieces(3)
        ),
        "grade": lambda: syrup.record_grade_reading(
            rec, at=at, lot=jars, transmittance=Typed(Decimal(50), "%Tc")
        ),
        "removal": lambda: goods_out.record_removal(
            rec, at=at, lot=jars, reason="gift", amount=pieces(1)
        ),
        "split": lambda: upkeep.record_split(rec, at=at, lot=jars, amount=pieces(1), reason="x"),
        "rework": lambda: upkeep.record_rework(
            rec, at=at, lot=jars, amount=pieces(1), into=here["Drum 1"], item=house.items["syrup"]
        ),
        "sap into their tank": lambda: sap.record_collection(
            rec, at=at, woods=here["North woods"], tank=there["Tank 1"], item=house.items["sap"],
            amount=gallons("10"),
        ),
    }  # fmt: skip


def leads_acts(house, other, jars):
    """What a lead here might try with another facility's jars."""
    lead, at = house.context(house.lead, 8), house.at(8)
    kept = decisions.keep_unposted(
        other.context(hours=8), kind="sale", happened_at=at, typed={}, reason="r", lots=[jars]
    )
    hold = Hold.objects.get(lot=jars)
    words = dict.fromkeys(("cause", "correction", "prevention", "evaluation"), "a")
    return {
        "count": lambda: upkeep.record_count(
            lead, at=at, lot=jars, place=other.places["Store"], counted=pieces(3), reason="x"
        ),
        "hold": lambda: decisions.place_hold(lead, lot=jars, reason="x"),
        "release": lambda: decisions.release_lot(
            lead, lot=jars, reason="x", shown=decisions.shown_hash(Lot.objects.get(pk=jars.pk))
        ),
        "decide": lambda: decide(house, hold, "reject"),
        "action": lambda: decisions.complete_action(lead, action=hold.actions.get(), **words),
        "unposted": lambda: decisions.settle_unposted(
            lead, entry=kept, settled_as="voided", reason="x"
        ),
    }


@pytest.mark.parametrize("acts", [recorders_acts, leads_acts])
def test_another_facilitys_rows_are_refused(house, acts):
    other = sugarhouse("other-place")
    jars = other.jars(heat="170")
    for act in acts(house, other, jars).values():
        with pytest.raises(RecordingError):
            act()


def test_a_return_of_another_facilitys_sale_is_refused(house):
    other = sugarhouse("other-place")
    jars = other.jars()
    sale = goods_out.record_sale(
        other.context(hours=7), at=other.at(7), sold=[FromLot(jars, pieces(5))]
    )
    with pytest.raises(RecordingError):
        goods_out.record_customer_return(
            house.context(hours=8), at=house.at(8), sale=sale, lot=jars, amount=pieces(1),
            into=house.places["Store"], reason="x",
        )  # fmt: skip


def test_settle_twice(house):
    jars = house.jars()
    kept = decisions.keep_unposted(
        house.context(hours=8),
        kind="sale",
        happened_at=house.at(7),
        typed={},
        reason="r",
        lots=[jars],
    )
    decisions.settle_unposted(
        house.context(house.lead, 9), entry=kept, settled_as="voided", reason="x"
    )
    with pytest.raises(RecordingError):
        decisions.settle_unposted(
            house.context(house.lead, 9), entry=kept, settled_as="posted", reason="x"
        )


def test_journal_images_whole_chain(house):
    jars = house.jars()
    goods_out.record_sale(
        house.context(hours=7),
        at=house.at(7),
        sold=[FromLot(jars, pieces(5))],
        customer=house.customer,
    )
    assert unjournaled(house) == []


def test_journal_images_return(house):
    jars = house.jars()
    sale = goods_out.record_sale(
        house.context(hours=7),
        at=house.at(7),
        sold=[FromLot(jars, pieces(5))],
        customer=house.customer,
    )
    goods_out.record_customer_return(
        house.context(hours=8),
        at=house.at(8),
        sale=sale,
        lot=jars,
        amount=pieces(2),
        into=house.places["Store"],
        reason="x",
    )
    assert unjournaled(house) == []


def test_journal_images_return_void(house):
    jars = house.jars()
    sale = goods_out.record_sale(
        house.context(hours=7),
        at=house.at(7),
        sold=[FromLot(jars, pieces(5))],
        customer=house.customer,
    )
    back = goods_out.record_customer_return(
        house.context(hours=8),
        at=house.at(8),
        sale=sale,
        lot=jars,
        amount=pieces(2),
        into=house.places["Store"],
        reason="x",
    )
    decisions.void_step(house.context(house.lead, 9), step=back, reason="no")
    jars.refresh_from_db()
    assert unjournaled(house) == []

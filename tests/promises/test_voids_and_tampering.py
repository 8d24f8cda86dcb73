"""Acts that tempt the ledger: voids, late acts, held sources, other facilities, bad amounts."""

import contextlib
import json

import pytest
from django.apps import apps

from lots.models import JournalEntry, Lot, LotState, Reading, Stock
from lots.recording import (
    boil,
    decisions,
    goods_out,
    receiving,
    syrup,
    upkeep,
)
from lots.recording._sources import FromLot, FromVessel
from lots.recording.errors import RecordingError
from lots.tracing import images, verify
from tests.cases.tools import feed, open_boil, syrup_of
from tests.factories import brix, fahrenheit, gallons, pieces
from tests.promises.test_tampering import unguarded

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


def test_made_raised_with_stock(house):
    jars = house.jars()
    with unguarded():
        Lot.objects.filter(pk=jars.pk).update(made=21)
        Stock.objects.filter(lot=jars).update(quantity=21)
    assert faults(house)


def test_reading_changed(house):
    jars = house.jars()
    with unguarded():
        Reading.objects.filter(lot=jars, kind="brix").update(corrected="70.0000", typed_value="70")
    assert faults(house)


def test_hold_ended_by_hand(house):
    jars = house.jars(heat="170")
    with unguarded():
        Lot.objects.filter(pk=jars.pk).update(state="released")
    assert faults(house)


def test_label_column(house):
    house.jars()
    e = JournalEntry.objects.last()
    with unguarded():
        JournalEntry.objects.filter(pk=e.pk).update(label="something else", action="x")
    assert faults(house)


def test_rejected_stays_rejected(house):
    jars = house.jars()
    (a,) = decisions.place_hold(house.context(house.lead, 8), lot=jars, reason="one")
    (b,) = decisions.place_hold(house.context(house.lead, 8), lot=jars, reason="two")
    decide(house, a, "reject")
    lot = decide(house, b, "release")
    assert lot.state == LotState.REJECTED


def test_void_stays_void(house):
    jars = house.jars()
    (a,) = decisions.place_hold(house.context(house.lead, 8), lot=jars, reason="one")
    decisions.void_step(house.context(house.lead, 8.1), step=jars.made_by, reason="wrong")
    with contextlib.suppress(RecordingError):
        decide(house, a, "release")
    jars.refresh_from_db()
    assert jars.state == LotState.VOID
    assert not faults(house)


def test_void_drum_removal_without_place(house):
    house.collect()
    house.boil()
    s = syrup.record_drum_fill(
        house.context(hours=5),
        at=house.at(5),
        sources=[FromVessel(house.places["Batch tank"])],
        drums=[syrup.Drum(house.places["Drum 1"], gallons("7.9"), fahrenheit("186"))],
        item=house.items["syrup"],
        brix=brix("67.2"),
    )
    lot = s.made_lots.get()
    r = goods_out.record_removal(
        house.context(hours=6), at=house.at(6), lot=lot, reason="tasting", amount=gallons("1")
    )
    decisions.void_step(house.context(house.lead, 7), step=r, reason="no")
    assert faults(house) == []
    assert lot.stock.get().place.name == "Drum 1"


def test_void_removal_goes_back_where_it_stood(house):
    house.collect()
    lot = syrup_of(house, house.boil())
    r = goods_out.record_removal(
        house.context(hours=6), at=house.at(6), lot=lot, reason="tasting", amount=gallons("1")
    )
    decisions.void_step(house.context(house.lead, 7), step=r, reason="no")
    assert {row.place.name for row in lot.stock.all()} == {"Batch tank"}


def test_void_removal_after_move(house):
    jars = house.jars()
    upkeep.record_move(
        house.context(hours=7),
        at=house.at(7),
        lot=jars,
        come_from=house.places["Store"],
        to=house.places["Drum 2"],
        amount=pieces(20),
    )
    r = goods_out.record_removal(
        house.context(hours=8), at=house.at(8), lot=jars, reason="gift", amount=pieces(2)
    )
    decisions.void_step(house.context(house.lead, 9), step=r, reason="no")
    assert {row.place.name for row in jars.stock.all()} == {"Drum 2"}


def test_void_sale_with_return(house):
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
    with pytest.raises(RecordingError):
        decisions.void_step(house.context(house.lead, 9), step=sale, reason="no")


def test_void_count(house):
    jars = house.jars()
    c = upkeep.record_count(
        house.context(house.lead, 7),
        at=house.at(7),
        lot=jars,
        place=house.places["Store"],
        counted=pieces(15),
        reason="x",
    )
    decisions.void_step(house.context(house.lead, 8), step=c, reason="no")
    jars.refresh_from_db()
    assert jars.remaining == 20


def test_void_move(house):
    jars = house.jars()
    m = upkeep.record_move(
        house.context(hours=7),
        at=house.at(7),
        lot=jars,
        come_from=house.places["Store"],
        to=house.places["Drum 2"],
        amount=pieces(20),
    )
    try:
        decisions.void_step(house.context(house.lead, 8), step=m, reason="no")
    except RecordingError:
        return
    assert {row.place.name for row in jars.stock.all()} == {"Store"}


def test_void_gives_back_gauge_difference(house):
    sap_lot = house.collect("100")
    made = sap_lot.made
    running = open_boil(house, 1)
    feed(
        house,
        running,
        1,
        FromVessel(house.places["Tank 1"], gallons("103"), accept_difference=True),
    )
    boil.close_boil(
        house.context(hours=2),
        boil=running,
        at=house.at(2),
        contents=house.items["contents"],
        emptied=True,
    )
    decisions.void_step(house.context(house.lead, 3), step=running, reason="no")
    sap_lot.refresh_from_db()
    assert sap_lot.remaining == made


def test_internal_code_taken_by_hand(house):
    receiving.record_opening_stock(
        house.context(hours=0),
        at=house.at(0),
        item=house.items["quart"],
        amount=pieces(12),
        place=house.places["Store"],
        document="p3",
        code="S26092-1",
    )
    house.collect(hours=1)

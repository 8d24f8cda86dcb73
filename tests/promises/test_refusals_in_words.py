"""Refusals in words: bad amounts, wrong times, twins, stale books."""

import json
from contextlib import contextmanager

import pytest
from django.apps import apps

from lots.models import JournalEntry, Lot, LotState
from lots.recording import (
    container_fill,
    decisions,
    goods_out,
    receiving,
    setup,
    syrup,
    upkeep,
)
from lots.recording._sources import FromLot, FromVessel
from lots.recording.context import Context
from lots.recording.errors import OnHold, RecordingError
from lots.tracing import images, verify
from tests.cases.tools import pass_on, syrup_of
from tests.factories import brix, gallons, pieces

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


def test_voided_run_reentered_with_its_code(house):
    jars = house.jars()
    text = jars.printed_code.text
    decisions.void_step(house.context(house.lead, 7), step=jars.made_by, reason="count wrong")
    run = container_fill.Run(
        product=house.items["quart"], made=19, into=house.places["Store"], printed_code=text
    )
    step = container_fill.record_container_fill(
        house.context(hours=8),
        at=house.at(6),
        sources=[FromVessel(house.places["Canner"], gallons("5"))],
        run=run,
    )
    assert step.made_lots.get().printed_code == jars.printed_code


def test_twin_place_refused_in_words(house):
    with pytest.raises(RecordingError):
        setup.add_place(house.context(house.owner), name="Tank 1", kind="tank")
    setup.add_instrument(house.context(house.owner), tag="H1", kind="hydrometer")
    with pytest.raises(RecordingError):
        setup.add_instrument(house.context(house.owner), tag="H1", kind="hydrometer")


def test_held_ways(house):
    jars = house.jars(heat="170")
    with pytest.raises(OnHold):
        upkeep.record_split(
            house.context(hours=7), at=house.at(7), lot=jars, amount=pieces(1), reason="x"
        )


def test_held_split_late_keeps_hold(house):
    jars = house.jars(heat="170")
    part = upkeep.record_split(
        house.context(hours=30), at=house.at(7), lot=jars, amount=pieces(1), reason="x"
    ).made_lots.get()
    assert part.holds.filter(ended_at=None).exists()


def test_held_rework_bulk_inherits(house):
    jars = house.jars(heat="170")
    bulk = upkeep.record_rework(
        house.context(hours=9),
        at=house.at(9),
        lot=jars,
        amount=pieces(20),
        into=house.places["Drum 2"],
        item=house.items["syrup"],
    ).made_lots.get()
    assert bulk.state != LotState.RELEASED


def test_sample_of_void_or_overdraw_negative(house):
    jars = house.jars()
    for n in (-3, 0):
        with pytest.raises(RecordingError):
            goods_out.record_removal(
                house.context(hours=9), at=house.at(9), lot=jars, reason="gift", amount=pieces(n)
            )
        with pytest.raises(RecordingError):
            goods_out.record_sale(
                house.context(hours=9), at=house.at(9), sold=[FromLot(jars, pieces(n))]
            )


def test_negative_move_split_rework_count(house):
    jars = house.jars()
    for act in (
        lambda: upkeep.record_move(
            house.context(hours=7),
            at=house.at(7),
            lot=jars,
            come_from=house.places["Store"],
            to=house.places["Drum 2"],
            amount=pieces(-5),
        ),
        lambda: upkeep.record_split(
            house.context(hours=7), at=house.at(7), lot=jars, amount=pieces(-5), reason="x"
        ),
        lambda: upkeep.record_split(
            house.context(hours=7), at=house.at(7), lot=jars, amount=pieces(0), reason="x"
        ),
        lambda: upkeep.record_rework(
            house.context(hours=7),
            at=house.at(7),
            lot=jars,
            amount=pieces(-5),
            into=house.places["Drum 1"],
            item=house.items["syrup"],
        ),
        lambda: upkeep.record_count(
            house.context(house.lead, 7),
            at=house.at(7),
            lot=jars,
            place=house.places["Store"],
            counted=pieces(-5),
            reason="x",
        ),
        lambda: receiving.record_supplier_return(
            house.context(hours=7), at=house.at(7), lot=jars, amount=pieces(-5), reason="x"
        ),
    ):
        with pytest.raises(RecordingError):
            act()
    assert faults(house) == []


def test_move_of_rejected_or_void(house):
    jars = house.jars()
    decisions.void_step(house.context(house.lead, 7), step=jars.made_by, reason="x")
    with pytest.raises(RecordingError):
        upkeep.record_count(
            house.context(house.lead, 8),
            at=house.at(8),
            lot=jars,
            place=house.places["Store"],
            counted=pieces(5),
            reason="x",
        )


def test_split_void_lot(house):
    jars = house.jars()
    decisions.void_step(house.context(house.lead, 7), step=jars.made_by, reason="x")
    jars.refresh_from_db()
    with pytest.raises(RecordingError):
        goods_out.record_removal(
            house.context(hours=8), at=house.at(8), lot=jars, reason="gift", amount=pieces(1)
        )


def test_release_a_not_measured_fill(house):
    """no readings"""
    aid = house.receive_aid()
    house.collect()
    house.boil()
    house.filter(aid=aid)
    run = container_fill.Run(product=house.items["quart"], made=20, into=house.places["Store"])
    jars = container_fill.record_container_fill(
        house.context(hours=6),
        at=house.at(6),
        sources=[FromVessel(house.places["Canner"], gallons("5"))],
        run=run,
    ).made_lots.get()
    assert jars.state == LotState.WAITING


def test_put_back_below_zero_and_reading_of_released(house):
    """a later failing reading on a released lot must hold it"""
    jars = house.jars()
    jars.refresh_from_db()
    syrup.record_grade_reading(house.context(hours=8), at=house.at(8), lot=jars, brix=brix("66.0"))
    assert jars.holds.filter(ended_at=None).exists()


def test_count_from_stale_book(house):
    """two counts at once"""

    jars = house.jars()

    class Late(Context):
        @contextmanager
        def open(self, *a, **k):
            upkeep.record_count(
                house.context(house.lead, 7),
                at=house.at(7),
                lot=jars,
                place=house.places["Store"],
                counted=pieces(18),
                reason="x",
            )
            with Context(self.facility, self.by, self.now).open(*a, **k) as w:
                yield w

    c = house.context(house.lead, 7)
    upkeep.record_count(
        Late(c.facility, c.by, c.now),
        at=house.at(7),
        lot=jars,
        place=house.places["Store"],
        counted=pieces(18),
        reason="x",
    )
    jars.refresh_from_db()
    assert jars.remaining == 18


def test_move_vessel_of_liquid_partly_and_solids(house):
    house.collect()
    lot = syrup_of(house, house.boil())
    lot.refresh_from_db()
    upkeep.record_move(
        house.context(hours=7),
        at=house.at(7),
        lot=lot,
        come_from=house.places["Batch tank"],
        to=house.places["Drum 1"],
        amount=gallons("2"),
    )
    assert faults(house) == []
    pass_on(house, 8, FromVessel(house.places["Drum 1"]), "Canner", "transfer")
    assert faults(house) == []


def test_opening_stock_void(house):
    s = receiving.record_opening_stock(
        house.context(hours=0),
        at=house.at(0),
        item=house.items["quart"],
        amount=pieces(12),
        place=house.places["Store"],
        document="p3",
        code="OLD-1",
    )
    decisions.void_step(house.context(house.lead, 1), step=s, reason="x")
    with pytest.raises(RecordingError):
        receiving.record_opening_stock(
            house.context(hours=2),
            at=house.at(0),
            item=house.items["quart"],
            amount=pieces(13),
            place=house.places["Store"],
            document="p3",
            code="OLD-1",
        )


def test_late_fill_before_boil_of_syrup(house):
    """a fill typed with a time before its syrup existed"""
    house.collect()
    house.boil(hours=4)
    house.filter(hours=5)
    run = container_fill.Run(product=house.items["quart"], made=20, into=house.places["Store"])
    with pytest.raises(RecordingError):
        container_fill.record_container_fill(
            house.context(hours=6),
            at=house.at(-10),
            sources=[FromVessel(house.places["Canner"], gallons("5"))],
            run=run,
        )

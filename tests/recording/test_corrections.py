"""Corrections: old beside new; undo within two minutes."""

import json
from dataclasses import replace

import pytest

from lots.models import JournalEntry, Lot, StepKind
from lots.recording import amend, decisions, goods_out, setup, syrup
from lots.recording._sources import FromLot, FromVessel
from lots.recording.context import Context
from lots.recording.errors import GaugeDifference, NotAllowed, NotEnough, RecordingError
from lots.tracing import verify
from tests.factories import gallons, pieces

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


def test_a_correction_keeps_the_old_value_and_its_reason_in_the_journal(house):
    step = house.collect().made_by

    amend.amend_step(
        house.context(house.lead, 1), step=step, field="note", new="South side", reason="misheard"
    )

    step.refresh_from_db()
    assert step.note == "South side"
    kept = step.amendments.get()
    assert (kept.old, kept.new, kept.by) == ("", "South side", house.lead)
    entry = JournalEntry.objects.filter(chain=house.facility.chain).last()
    assert json.loads(entry.body)["reason"] == "misheard"


def test_a_quantity_is_not_corrected_in_place(house):
    with pytest.raises(RecordingError, match="Void the record"):
        amend.amend_step(
            house.context(house.lead, 1), step=house.collect().made_by, field="made", new="1",
            reason="x",
        )  # fmt: skip


def test_a_recorder_undoes_an_own_record_within_two_minutes_only(house):
    first, second = house.collect().made_by, house.collect(hours=1).made_by

    decisions.void_step(house.context(hours=0.02), step=first, reason="wrong tank")
    with pytest.raises(NotAllowed):
        decisions.void_step(house.context(hours=2), step=second, reason="wrong tank")
    other = Context(house.facility, house.inspector, now=house.at(1.01))
    with pytest.raises(NotAllowed):
        decisions.void_step(other, step=second, reason="wrong tank")

    first.refresh_from_db()
    assert first.voided_at is not None


def test_a_corrected_amount_divides_what_drew_on_it_anew(house):
    first = house.collect("100")
    second = house.collect("100", hours=1)
    boiled = house.boil(hours=6)

    amend.amend_amount(
        house.context(house.lead, 8), lot=first, amount=gallons("60"), reason="misread the dipstick"
    )

    first.refresh_from_db()
    assert (first.typed_value, first.remaining) == ("60", 0)
    live = boiled.draws.filter(ended_at=None, lot__in=[first, second])
    assert {draw.lot_id: draw.quantity for draw in live} == {
        first.pk: first.made,
        second.pk: second.made,
    }
    assert first.made_by.amendments.get().old == "100 US gal"
    assert list(verify.ledger_faults()) == []
    assert list(verify.image_faults()) == []


def test_a_count_of_jars_is_not_corrected_below_what_was_sold(house):
    jars = house.jars()
    goods_out.record_sale(house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(12))])
    with pytest.raises(RecordingError, match="More than that was drawn"):
        amend.amend_amount(
            house.context(house.lead, 8), lot=jars, amount=pieces(10), reason="miscounted"
        )
    amend.amend_amount(
        house.context(house.lead, 8), lot=jars, amount=pieces(19), reason="miscounted"
    )
    jars.refresh_from_db()
    assert jars.remaining == 7


def test_an_official_detention_ends_only_with_the_authoritys_reference(house):
    jars = house.jars()
    (hold,) = decisions.place_hold(
        house.context(house.lead, 8), lot=jars, reason="detained", official=True
    )
    lead = house.context(house.lead, 9)
    decisions.complete_action(
        lead, action=hold.actions.get(), cause="a", correction="b", prevention="c", evaluation="d"
    )
    shown = decisions.shown_hash(Lot.objects.get(pk=jars.pk))
    said = {"hold": hold, "decision": "release", "reason": "released", "shown": shown}
    with pytest.raises(RecordingError, match="its reference"):
        decisions.decide_hold(lead, **said)

    lot = decisions.decide_hold(lead, **said, official_release="VT-2026-17")

    assert lot.state == "released"
    assert "VT-2026-17" in lot.holds.get().decision_reason


def test_a_partner_changes_and_an_items_kind_stays_once_it_has_lots(house):
    context = house.context(hours=1)
    changed = setup.change_row(context, house.customer, phone="802-555-0199")
    assert changed.phone == "802-555-0199"
    house.receive_aid()
    with pytest.raises(RecordingError, match="its kind stays"):
        setup.change_row(context, house.items["aid"], kind="cleaner")
    with pytest.raises(RecordingError, match="registered already"):
        setup.change_row(context, house.items["aid"], name="Sap")
    assert list(verify.image_faults()) == []


def test_a_gauge_difference_is_taken_when_confirmed_and_no_more_than_its_tolerance(house):
    house.collect("100")
    tank, into = house.places["Tank 1"], house.places["Tank 2"]

    def take(amount, **confirmed):
        context = replace(house.context(hours=1), **confirmed)
        return syrup.record_mixture(
            context, kind=StepKind.TRANSFER, at=house.at(1), item=house.items["sap"], into=into,
            sources=[FromVessel(tank, gallons(amount))],
        )  # fmt: skip

    with pytest.raises(GaugeDifference, match="within the 5 %"):
        take("103")
    with pytest.raises(NotEnough, match="more than the 5 %"):
        take("110", accept_differences=True)
    step = take("103", accept_differences=True)

    assert step.adjustments.get().quantity > 0
    assert list(verify.ledger_faults()) == []

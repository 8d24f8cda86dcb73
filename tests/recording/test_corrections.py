"""Corrections: old beside new; undo within two minutes."""

import json

import pytest

from lots.models import JournalEntry
from lots.recording import amend, decisions
from lots.recording.context import Context
from lots.recording.errors import NotAllowed, RecordingError

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

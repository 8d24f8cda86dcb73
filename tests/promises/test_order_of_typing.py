"""Past acts typed in any order, re-divisions confirmed, give the same ledger."""

import random
from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import settings as hypothesis_settings
from hypothesis import strategies as st
from hypothesis.extra.django import TestCase

from lots.models import Draw, DrawRole, Lot, StepKind
from lots.recording import amend, boil, sap, syrup
from lots.recording._sources import FromVessel
from lots.recording.context import Context
from lots.recording.errors import NotEnough, RecordingError, WouldRedivide
from lots.recording.measures import DensityReading, Typed
from lots.tracing import cone, verify
from tests.conftest import EXAMPLES
from tests.factories import brix, gallons, sugarhouse

LATE = 100  # hours: everything is typed days afterwards


def confirmed(house):
    return Context(house.facility, house.recorder, now=house.at(LATE), redivide=True)


def sap_in(house, hours, amount, tank):
    return sap.record_collection(
        confirmed(house), at=house.at(hours), woods=house.places["North woods"],
        tank=house.places[tank], item=house.items["sap"], amount=gallons(amount),
        brix=DensityReading(Decimal("2.0"), device="refractometer"), note=f"sap {hours}",
    )  # fmt: skip


def passed(house, hours, come_from, into, amount=""):
    taken = gallons(amount) if amount else Typed(None)
    return syrup.record_mixture(
        confirmed(house), kind=StepKind.TRANSFER, at=house.at(hours),
        sources=[FromVessel(house.places[come_from], taken)], into=house.places[into],
        item=house.items["sap"], note=f"transfer {hours}",
    )  # fmt: skip


def boiled(house, hours, tank):
    return boil.record_boil(
        confirmed(house), at=house.at(hours), ended_at=house.at(hours + 1),
        evaporator=house.places["Evaporator"], sources=[FromVessel(house.places[tank])],
        draw_offs=[boil.DrawOff(house.at(hours + 0.5), house.places["Batch tank"],
                                gallons("4"), brix("67.2"))],
        syrup=house.items["syrup"], contents=house.items["contents"], emptied=True,
        people=f"boil {hours}",
    )  # fmt: skip


def acts(house):
    return [
        lambda: sap_in(house, 0, "100", "Tank 1"),
        lambda: sap_in(house, 1, "50", "Tank 1"),
        lambda: passed(house, 2, "Tank 1", "Tank 2", "60"),
        lambda: sap_in(house, 3, "33.3", "Tank 1"),
        lambda: passed(house, 4, "Tank 1", "Tank 2"),
        lambda: boiled(house, 5, "Tank 2"),
        lambda: sap_in(house, 7, "80", "Tank 2"),
        lambda: boiled(house, 8, "Tank 2"),
    ]


def type_all(house, order):
    """Type the acts in an order; what the book refuses now is typed again later, as by a person."""
    waiting = [acts(house)[number] for number in order]
    for _ in range(len(waiting) + 1):
        left = []
        for act in waiting:
            try:
                act()
            except NotEnough:
                left.append(act)
        waiting = left
        if not waiting:
            return
    raise AssertionError("some acts never became possible")


def name(step):
    return step.note or step.people


def ledger(house):
    """Return the live draws and lots by the acts' own names: codes and order of typing aside."""
    draws = {
        (name(draw.from_step), name(draw.step), draw.role, draw.quantity, draw.solids)
        for draw in Draw.objects.filter(facility=house.facility, ended_at=None)
        .exclude(role=DrawRole.RESIDUE)
        .select_related("from_step", "step")
    }
    lots = {
        (name(lot.made_by), lot.item.name, lot.made, lot.adjusted, lot.remaining, lot.solids_made)
        for lot in Lot.objects.filter(facility=house.facility).select_related("made_by", "item")
    }
    return draws, lots


class OrderOfTyping(TestCase):
    @classmethod
    def setUpTestData(cls):
        cls.mixed = sugarhouse("mixed")
        straight = sugarhouse("straight")
        type_all(straight, range(8))
        cls.straight = ledger(straight)

    @hypothesis_settings(max_examples=max(12, EXAMPLES // 4))
    @given(st.integers(1, 10_000))
    def test_any_order_gives_the_same_live_draws_and_totals(self, seed):
        order = list(range(8))
        random.Random(seed).shuffle(order)

        type_all(self.mixed, order)

        assert ledger(self.mixed) == self.straight, order
        assert list(verify.ledger_faults()) == []


@pytest.mark.django_db
@pytest.mark.engine
def test_a_late_draw_names_what_it_would_divide_anew(house):
    sap_in(house, 0, "100", "Tank 1")
    boiled(house, 5, "Tank 1")
    context = Context(house.facility, house.recorder, now=house.at(LATE))

    with pytest.raises(WouldRedivide, match="Boil 2026-04-02"):
        syrup.record_mixture(
            context, kind=StepKind.TRANSFER, at=house.at(2), item=house.items["sap"],
            sources=[FromVessel(house.places["Tank 1"], gallons("40"))],
            into=house.places["Tank 2"],
        )  # fmt: skip


@pytest.mark.django_db
@pytest.mark.engine
def test_late_sap_is_carried_over_until_its_division_is_confirmed(house):
    sap_in(house, 0, "100", "Tank 1")
    boil_step = boiled(house, 5, "Tank 1")
    late = sap.record_collection(
        Context(house.facility, house.recorder, now=house.at(LATE)), at=house.at(1),
        woods=house.places["South woods"], tank=house.places["Tank 1"],
        item=house.items["sap"], amount=gallons("50"), brix=DensityReading(Decimal("2.0")),
    )  # fmt: skip
    lot = late.made_lots.get()
    assert lot.pk in cone.back(boil_step.pk).lots
    assert [take.step for take in amend.waiting_for_division(late)] == [boil_step]

    amend.divide_anew(Context(house.facility, house.recorder, now=house.at(LATE)), step=late)

    lot.refresh_from_db()
    assert lot.remaining == 0
    live = boil_step.draws.filter(ended_at=None, lot=lot)
    assert [draw.role for draw in live] == ["ingredient"]
    assert amend.waiting_for_division(late) == []
    with pytest.raises(RecordingError):
        amend.divide_anew(Context(house.facility, house.recorder, now=house.at(LATE)), step=late)
    assert list(verify.ledger_faults()) == []
    assert list(verify.image_faults()) == []

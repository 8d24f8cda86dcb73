"""A held lot goes nowhere it may not; nothing is sold without its chain, checks or a signature."""

import itertools
from decimal import Decimal

import pytest

from lots.models import Check, Draw, LotState, StepKind
from lots.recording import container_fill, decisions, goods_out, sap, syrup, upkeep
from lots.recording._sources import FromLot, FromVessel
from lots.recording.errors import NotReleased, OnHold, RecordingError
from lots.recording.measures import DensityReading, Typed
from lots.rules import rule_set
from tests.factories import brix, fahrenheit, gallons, pieces

pytestmark = [pytest.mark.django_db, pytest.mark.engine]

WHOLE = {
    "fill_temperatures": [fahrenheit("186")],
    "brix": brix("67.2"),
    "transmittance": Typed(Decimal(62), "%Tc"),
}


def fill(house, vessel="Canner", **readings):
    run = container_fill.Run(
        product=house.items["quart"], made=20, into=house.places["Store"], **readings
    )
    step = container_fill.record_container_fill(
        house.context(hours=6),
        at=house.at(6),
        sources=[FromVessel(house.places[vessel], gallons("5"))],
        run=run,
    )
    return step.made_lots.get()


def pressed(house):
    house.collect()
    house.boil()
    return house.filter()


def cannot_be_sold(house, jars):
    with pytest.raises((NotReleased, OnHold)):
        goods_out.record_sale(
            house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(1))]
        )
    # Nor the day after, typed as a past act.
    with pytest.raises((NotReleased, OnHold)):
        goods_out.record_sale(
            house.context(hours=40), at=house.at(7), sold=[FromLot(jars, pieces(1))]
        )


@pytest.mark.parametrize("left_out", sorted(WHOLE))
def test_a_reading_left_out_is_never_a_pass(house, left_out):
    pressed(house)

    jars = fill(house, **{key: value for key, value in WHOLE.items() if key != left_out})

    assert jars.state == LotState.WAITING
    cannot_be_sold(house, jars)


def test_syrup_that_was_never_filtered_is_not_released(house):
    house.collect()
    house.boil()

    jars = fill(house, vessel="Batch tank", **WHOLE)

    assert jars.state == LotState.WAITING
    cannot_be_sold(house, jars)


def test_a_facility_that_asks_for_a_person_releases_nothing_by_itself(house):
    house.facility.release_needs_person = True
    house.facility.save()
    pressed(house)
    jars = fill(house, **WHOLE)

    assert jars.state == LotState.WAITING
    cannot_be_sold(house, jars)
    decisions.release_lot(
        house.context(house.lead, 7), lot=jars, reason="seen", shown=decisions.shown_hash(jars)
    )
    goods_out.record_sale(house.context(hours=8), at=house.at(8), sold=[FromLot(jars, pieces(1))])


def test_held_syrup_is_not_filled_blended_or_split(house):
    lot = pressed(house)
    decisions.place_hold(house.context(house.lead, 5.5), lot=lot, reason="smell")

    with pytest.raises(OnHold):
        fill(house, **WHOLE)
    for kind in (StepKind.BLEND, StepKind.TRANSFER, StepKind.REHEAT):
        with pytest.raises(OnHold):
            syrup.record_mixture(
                house.context(hours=6), kind=kind, at=house.at(6), item=house.items["syrup"],
                sources=[FromVessel(house.places["Canner"])], into=house.places["Drum 1"],
            )  # fmt: skip
    assert not Draw.objects.filter(lot=lot).exists()


def test_held_jars_may_be_moved_apart_and_stay_held(house):
    jars = house.jars(heat="170")
    upkeep.record_move(
        house.context(hours=7), at=house.at(7), lot=jars, come_from=house.places["Store"],
        to=house.places["Drum 2"], amount=pieces(20),
    )  # fmt: skip

    assert jars.holds.filter(ended_at=None).count() == 1
    cannot_be_sold(house, jars)


def test_an_official_detention_does_not_end_by_our_own_word(house):
    jars = house.jars()
    (hold,) = decisions.place_hold(
        house.context(house.lead, 7), lot=jars, reason="inspector", official=True
    )
    shown = decisions.shown_hash(jars)

    with pytest.raises(RecordingError, match="official"):
        decisions.decide_hold(
            house.context(house.owner, 8), hold=hold, decision="release", reason="x", shown=shown
        )
    cannot_be_sold(house, jars)


def test_one_of_two_holds_released_leaves_the_lot_held(house):
    jars = house.jars()
    lead = house.context(house.lead, 8)
    (first,) = decisions.place_hold(lead, lot=jars, reason="one")
    (second,) = decisions.place_hold(lead, lot=jars, reason="two")
    parts = {"cause": "a", "correction": "b", "prevention": "c", "evaluation": "d"}
    decisions.complete_action(lead, action=first.actions.get(), **parts)
    decisions.decide_hold(
        lead, hold=first, decision="release", reason="x", shown=decisions.shown_hash(jars)
    )

    assert list(jars.holds.filter(ended_at=None)) == [second]
    cannot_be_sold(house, jars)


def test_every_check_names_limit_source_mark_and_the_very_rules_it_used(house):
    house.jars(heat="170", density="66.4")
    rules = rule_set.load("vermont")

    checks = list(Check.objects.all())
    assert {check.outcome for check in checks} >= {"fail"}
    for check in checks:
        assert check.source
        assert check.mark
        assert check.rule_set_hash == rules.sha256
        assert check.rule_set == "vermont"


def live_ledger(house):
    """Return draws and lots without codes, ids and the order of the journal."""
    draws = Draw.objects.filter(facility=house.facility, ended_at=None)
    return sorted(
        (
            str(draw.lot.made_at), draw.lot.typed_value, str(draw.step.started_at), draw.step.kind,
            draw.role, draw.quantity, draw.solids, draw.lot.remaining, draw.lot.solids_remaining,
        )
        for draw in draws.select_related("lot", "step")
    )  # fmt: skip


def test_rounds_typed_in_any_order_give_the_same_ledger(db):
    from tests.factories import sugarhouse

    rounds = [("120", 0.5), ("33.3", 1.0), ("250", 1.5)]
    found = []
    for number, order in enumerate(itertools.permutations(rounds)):
        house = sugarhouse(f"place-{number}")
        for typed, (amount, hours) in enumerate(order):
            sap.record_collection(
                house.context(hours=2 + typed / 10), at=house.at(hours),
                woods=house.places["North woods"], tank=house.places["Tank 1"],
                item=house.items["sap"], amount=gallons(amount),
                brix=DensityReading(Decimal("2.0"), device="refractometer"),
            )  # fmt: skip
        sap.record_concentration(
            house.context(hours=3), at=house.at(3), ended_at=house.at(3),
            machine=house.places["RO"], into=house.places["Tank 2"],
            sources=[FromVessel(house.places["Tank 1"], gallons("101"))],
            item=house.items["concentrate"], brix=brix("8"),
        )  # fmt: skip
        found.append(live_ledger(house))

    assert all(one == found[0] for one in found)
    assert len(found[0]) == 3

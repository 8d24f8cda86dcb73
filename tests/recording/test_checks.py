"""What the checks find, which lots they hold, and when a second reading settles a doubt."""

from decimal import Decimal

import pytest

from lots.models import Check, Lot, LotState
from lots.recording import decisions, goods_out, syrup
from lots.recording._sources import FromLot, FromVessel
from lots.recording.errors import NotReleased, RecordingError
from lots.recording.measures import DensityReading, Liquid, Typed
from tests.factories import brix, fahrenheit, gallons

pytestmark = pytest.mark.django_db


def grade(house, lot, hours=8, **fields):
    return syrup.record_grade_reading(
        house.context(house.lead, hours), at=house.at(hours), lot=lot, **fields
    )


def test_a_borderline_pass_waits_for_a_second_reading(house):
    # 66.9 is Vermont's minimum (Vermont Maple Regulations, section III; READ-2).
    jars = house.jars(density="67.0")
    assert jars.checks.get(rule="density").outcome == "borderline-pass"
    jars.refresh_from_db()
    assert jars.state == LotState.WAITING

    grade(house, jars, brix=brix("67.0"))

    jars.refresh_from_db()
    assert jars.state == LotState.RELEASED


def test_one_cool_jar_in_a_run_holds_it_whatever_came_after(house):
    jars = house.jars(heat="170")
    grade(house, jars, transmittance=Typed(Decimal("62"), "%Tc"))
    assert Lot.objects.get(pk=jars.pk).state == LotState.WAITING


def test_cloudy_syrup_and_a_strong_defect_hold_packed_goods(house):
    jars = house.jars()
    grade(house, jars, clarity="cloudy", defects=[("buddy", "strong")])

    found = dict(Check.objects.filter(lot=jars).values_list("rule", "outcome"))
    assert found["clarity"] == "fail"
    assert found["defects"] == "fail"
    assert jars.holds.filter(ended_at=None).count() == 2


def test_solids_out_above_solids_in_are_named_but_not_refused(house):
    house.collect("100")
    boiled = house.boil(out="20")

    check = Check.objects.get(step=boiled, rule="loss")
    assert check.outcome == "fail"
    assert "exceed solids in" in check.sentence
    assert not boiled.made_lots.filter(holds__isnull=False).exists()


def test_processing_grade_in_a_small_container_is_held(house):
    # USDA grade standards section 52.5962(b): Processing Grade in 5 gal or larger only (READ).
    house.items["quart"].label_grade = "Processing Grade"
    house.items["quart"].save()
    jars = house.jars()
    assert jars.checks.get(rule="container-size").outcome == "fail"


def test_a_light_drum_is_not_sold_in_bulk(house):
    # New York asks 66.0 % (1 NYCRR 270.1(b)(1); READ) of what is sold, bulk included.
    house.collect()
    house.boil()
    house.filter()
    step = syrup.record_drum_fill(
        house.context(hours=6),
        at=house.at(6),
        sources=[FromVessel(house.places["Canner"])],
        drums=[syrup.Drum(house.places["Drum 1"], gallons("7"), fahrenheit("188"))],
        item=house.items["syrup"],
        brix=brix("60.0"),
        transmittance=Typed(Decimal("62"), "%Tc"),
    )
    drum = step.made_lots.get()
    lead = house.context(house.lead, 7)
    decisions.release_lot(
        lead, lot=drum, reason="kept for blending", shown=decisions.shown_hash(drum)
    )

    with pytest.raises(NotReleased, match="below the minimum"):
        goods_out.record_sale(lead, at=house.at(7), sold=[FromLot(drum, gallons("7"))])


def test_cold_water_read_below_nought_is_no_sugar():
    reading = DensityReading(Decimal("0.2"), device="refractometer", sample=Typed(Decimal(5), "°C"))
    assert reading.true_brix() == 0.0
    assert Liquid(gallons("10"), reading.true_brix()).solids() == 0


@pytest.mark.parametrize("number", ["-1", "86", "120"])
def test_an_impossible_density_is_refused(number):
    with pytest.raises(RecordingError, match="cannot be corrected"):
        DensityReading(Decimal(number), compensates=True).true_brix()


def test_a_frozen_or_boiling_amount_that_cannot_be_weighed_is_refused_in_words():
    with pytest.raises(RecordingError, match="cannot be weighed"):
        Liquid(gallons("10"), 2.0, Typed(Decimal(-20), "°C")).milligrams()

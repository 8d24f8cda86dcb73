"""Residue: what an emptied vessel hands on until it is washed."""

import pytest

from lots.recording import upkeep
from lots.tracing import cone

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


def press_twice(house, between=None):
    house.collect()
    house.boil(hours=4)
    first = house.filter(hours=5)
    house.fill(hours=6, made=32)
    house.collect("300", hours=20)
    house.boil(hours=24)
    if between:
        upkeep.record_cleaning(
            house.context(hours=24.5),
            at=house.at(24.5),
            vessel=house.places["Canner"],
            break_kind=between,
        )
    return first, house.filter(hours=25)


@pytest.mark.parametrize("between", [None, "emptied", "rinsed"])
def test_a_hazard_reaches_the_next_run_on_a_vessel_that_was_not_washed(house, between):
    first, second = press_twice(house, between)

    # The canner still holds syrup of the first run unless it was emptied by the fill.
    behind = cone.back(second.made_by_id, "all")
    assert first.pk in behind.lots


def test_composition_leaves_residue_out(house):
    house.collect()
    boiled = house.boil(hours=4)
    syrup = boiled.made_lots.get(item=house.items["syrup"])
    house.filter(hours=5)
    house.collect("300", hours=20)
    later = house.boil(hours=24)

    draw = later.draws.get(role="residue", lot=syrup)
    assert draw.quantity == 0
    assert syrup.pk not in cone.back(later.pk, "composition").lots
    assert syrup.pk in cone.back(later.pk, "all").lots


def test_a_wash_ends_it(house):
    house.collect()
    boiled = house.boil(hours=4)
    syrup = boiled.made_lots.get(item=house.items["syrup"])
    house.filter(hours=5)
    upkeep.record_cleaning(
        house.context(hours=10),
        at=house.at(10),
        vessel=house.places["Batch tank"],
        break_kind="washed",
    )
    house.collect("300", hours=20)
    later = house.boil(hours=24)

    assert not later.draws.filter(role="residue", lot=syrup).exists()

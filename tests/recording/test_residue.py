"""Residue: what an emptied vessel hands on until it is washed."""

import pytest

from lots.models import Lot, StepKind, Stock
from lots.recording import syrup, upkeep
from lots.recording._sources import FromVessel
from lots.tracing import cone
from tests.factories import gallons

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


def test_rounding_never_ends_a_trace_while_the_vessel_is_not_emptied(house):
    """A heel of 1 mg of a lot rounds to nothing, but stays carried over until "emptied"."""
    first = house.collect("100")
    tank, other = house.places["Tank 1"], house.places["Tank 2"]

    def pass_on(hours, **source):
        return syrup.record_mixture(
            house.context(hours=hours), kind=StepKind.TRANSFER, at=house.at(hours), into=other,
            sources=[FromVessel(tank, **source)], item=house.items["sap"],
        )  # fmt: skip

    Stock.objects.filter(lot=first).update(quantity=1)
    Lot.objects.filter(pk=first.pk).update(made=1, solids_made=0)
    house.collect("100", hours=1)
    half = pass_on(2, amount=gallons("60"))
    more = pass_on(3, amount=gallons("30"))
    last = pass_on(4)
    house.collect("100", hours=5)
    after = pass_on(6)

    roles = [
        step.draws.filter(lot=first).values_list("role", "quantity").first()
        for step in (half, more, last, after)
    ]
    assert roles[0] == ("ingredient", 1)
    assert roles[1] == ("carry-over", 0)
    assert roles[2] == ("carry-over", 0)
    assert roles[3] is None

"""Real cases of the bottling room and the store, each as the records represent it."""

from datetime import date

import pytest

from lots.models import GoodsKind, LotState
from lots.recording import container_fill, decisions, goods_out, receiving, syrup, upkeep
from lots.recording._sources import FromLot, FromVessel
from lots.recording.errors import CodeTaken, NotEnough, OnHold
from lots.recording.measures import Typed
from lots.tracing import cone, find, story, verify
from tests.cases.tools import pass_on, syrup_of
from tests.factories import brix, fahrenheit, gallons, pieces

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


@pytest.fixture(autouse=True)
def _no_faults(house):
    yield
    house.facility.chain.refresh_from_db()
    assert list(verify.chain_faults(house.facility.chain)) == []
    assert list(verify.ledger_faults()) == []


def two_drums(house):
    house.collect("400")
    first = syrup_of(house, house.boil(hours=4, into="Drum 1"))
    house.collect("400", hours=20)
    second = syrup_of(house, house.boil(hours=24, into="Drum 2"))
    return first, second


def run(house, made=20, **more):
    return container_fill.Run(
        product=house.items["quart"],
        made=made,
        into=house.places["Store"],
        fill_temperatures=[fahrenheit("186")],
        brix=brix("67.2"),
        transmittance=Typed(62, "%Tc"),
        **more,
    )


def fill(house, hours, sources, **more):
    step = container_fill.record_container_fill(
        house.context(hours=hours), at=house.at(hours), sources=sources, run=run(house, **more)
    )
    return step.made_lots.get()


def test_a_canner_refilled_while_half_full_gives_jars_of_both(house):
    """Canner refilled while half full: a transfer into it; the fill draws in proportion."""
    first, second = two_drums(house)
    pass_on(house, 25, FromVessel(house.places["Drum 1"], gallons("4")), "Canner", "transfer")
    before = fill(house, 25.5, [FromVessel(house.places["Canner"], gallons("2"))], made=8)
    pass_on(house, 26, FromVessel(house.places["Drum 2"], gallons("2")), "Canner", "transfer")
    after = fill(house, 26.5, [FromVessel(house.places["Canner"], gallons("2"))], made=8)

    assert second.pk not in cone.back(before.made_by_id).lots
    assert {first.pk, second.pk} <= cone.back(after.made_by_id).lots
    parts = list(after.made_by.draws.values_list("quantity", flat=True))
    assert len(parts) == 2
    assert abs(parts[0] - parts[1]) * 100 < parts[0]


def test_one_run_of_two_drums_is_one_lot_and_a_changed_code_still_shows_the_canners_mix(house):
    """Run spans two drums, code not changed / changed."""
    first, second = two_drums(house)
    drums = [FromVessel(house.places["Drum 1"], gallons("4")), FromVessel(house.places["Drum 2"])]
    pass_on(house, 25, drums, "Canner", "transfer")
    one = fill(house, 26, [FromVessel(house.places["Canner"], gallons("5"))], made=20)
    other = fill(house, 27, [FromVessel(house.places["Canner"], gallons("5"))], made=20)

    assert one.printed_code.text != other.printed_code.text
    for jars in (one, other):
        assert {first.pk, second.pk} <= cone.back(jars.made_by_id).lots


def test_a_drum_topped_up_is_a_new_lot_of_both_and_its_heel_goes_to_zero(house):
    """Drum topped up, part drum, heel."""
    first, second = two_drums(house)
    drums = [
        FromVessel(house.places["Drum 1"]),
        FromVessel(house.places["Drum 2"], gallons("1")),
    ]
    topped = pass_on(house, 25, drums, "Drum 1", "transfer").made_lots.get()

    first.refresh_from_db()
    second.refresh_from_db()
    assert topped.code not in (first.code, second.code)
    assert first.remaining == 0
    assert 0 < second.remaining < second.made
    assert topped.stock.get().place == house.places["Drum 1"]
    goods_out.record_removal(
        house.context(hours=26), at=house.at(26), lot=second, reason="heel left"
    )
    second.refresh_from_db()
    assert (second.remaining, second.solids_remaining) == (0, 0)


def test_a_blend_of_two_grades_carries_no_class_until_the_blend_itself_is_read(house):
    """Mixed-grade blend: class only from a reading of the blend."""
    first, second = two_drums(house)
    for lot, colour in ((first, 80), (second, 40)):
        syrup.record_grade_reading(
            house.context(hours=24.5),
            at=house.at(24.5),
            lot=lot,
            transmittance=Typed(colour, "%Tc"),
        )
    drums = [FromVessel(house.places["Drum 1"]), FromVessel(house.places["Drum 2"])]
    blend = pass_on(house, 25, drums, "Batch tank", "blend").made_lots.get()

    assert not blend.readings.filter(kind="transmittance").exists()
    syrup.record_grade_reading(
        house.context(hours=26), at=house.at(26), lot=blend, transmittance=Typed(60, "%Tc")
    )
    assert blend.readings.get(kind="transmittance").corrected


def test_a_re_heat_leaves_the_old_readings_on_the_old_lot(house):
    """Re-heat, re-filter: old readings stay but cannot support a label."""
    first, _ = two_drums(house)
    syrup.record_grade_reading(
        house.context(hours=24.5), at=house.at(24.5), lot=first, transmittance=Typed(62, "%Tc")
    )
    heated = pass_on(house, 25, FromVessel(house.places["Drum 1"]), "Canner", "reheat")

    hot = heated.made_lots.get()
    assert first.readings.filter(kind="transmittance").count() == 1
    assert not hot.readings.filter(kind="transmittance").exists()
    assert first.pk in cone.back(heated.pk).lots


def test_forty_of_four_hundred_jars_are_split_off_and_held_under_the_same_printed_code(house):
    """Bad temperature for 40 of 400 jars."""
    house.collect("4000")
    house.boil(out="110")
    house.filter()
    jars = house.fill(made=400)
    step = upkeep.record_split(
        house.context(hours=7),
        at=house.at(7),
        lot=jars,
        amount=pieces(40),
        reason="fill temperature 170 °F from 10:15 to 10:30",
        held=True,
    )

    part = step.made_lots.get()
    jars.refresh_from_db()
    assert (jars.remaining, part.remaining) == (360, 40)
    assert part.printed_code == jars.printed_code
    assert set(find.lots_by_code(house.facility, jars.printed_code.text)) == {jars, part}
    with pytest.raises(OnHold):
        goods_out.record_sale(
            house.context(hours=7), at=house.at(7), sold=[FromLot(part, pieces(1))]
        )
    goods_out.record_sale(house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(360))])


def test_rejects_poured_back_are_a_count_of_the_run_never_a_lot(house):
    """Rejects poured back on the line: counts in the run, not lots; bottles are used up."""
    house.collect()
    house.boil()
    house.filter()
    bottles = receiving.record_receiving(
        house.context(hours=5),
        at=house.at(5),
        supplier=house.supplier,
        item=house.items["bottle"],
        amount=pieces(100),
        place=house.places["Store"],
    ).made_lots.get()
    canner = [FromVessel(house.places["Canner"], gallons("5"))]
    jars = fill(
        house, 6, canner, made=20, rejected=3, packaging=[container_fill.Packaging(bottles)]
    )

    bottles.refresh_from_db()
    assert (jars.made, jars.made_by.made_lots.count()) == (20, 1)
    assert bottles.drawn == 23
    assert jars.made_by.detail["rejected"] == 3


def test_jugs_opened_back_to_bulk_bring_their_mass_and_solids(house):
    """Jugs opened back to bulk: rework draws pieces × mass and solids a piece."""
    jars = house.jars()
    step = upkeep.record_rework(
        house.context(hours=9),
        at=house.at(9),
        lot=jars,
        amount=pieces(4),
        into=house.places["Drum 2"],
        item=house.items["syrup"],
    )

    bulk = step.made_lots.get()
    jars.refresh_from_db()
    assert jars.remaining == 16
    assert (bulk.made, bulk.solids_made) == (jars.piece_mg * 4, jars.piece_solids_mg * 4)
    assert jars.pk in cone.back(step.pk).lots


def test_a_private_label_brings_its_own_code_and_shares_no_name_with_another_product(house):
    """Private label: the code is unique for its product, the same text may be on another."""
    from lots.recording import setup

    house.collect()
    house.boil()
    house.filter()
    owner = setup.add_partner(house.context(house.owner, 5), name="Brand", kind="brand-owner")
    label = setup.add_item(
        house.context(house.owner, 5), name="Brand quart", kind="packed", unit="piece",
        size_value="1", size_unit="qt", label_grade="Amber", brand_owner=owner,
    )  # fmt: skip
    canner = [FromVessel(house.places["Canner"], gallons("1"))]
    fill(house, 6, canner, made=4, printed_code="BR-7")
    house.items["quart"] = label

    assert fill(house, 6, canner, made=4, printed_code="br-7").printed_code.text == "BR-7"
    with pytest.raises(CodeTaken):
        fill(house, 6, canner, made=4, printed_code="BR-7")


def test_stock_on_day_one_waits_for_a_leads_release_and_then_sells(house):
    """Stock on day one: opening stock with its paper reference."""
    step = receiving.record_opening_stock(
        house.context(hours=0),
        at=house.at(0),
        item=house.items["quart"],
        amount=pieces(12),
        place=house.places["Store"],
        document="notebook 2025, page 3",
        code="OLD-1",
    )
    old = step.made_lots.get()
    assert (old.state, old.goods_kind) == (LotState.WAITING, GoodsKind.OPENING_STOCK)

    decisions.release_lot(
        house.context(house.lead, hours=1),
        lot=old,
        reason="paper checked",
        shown=decisions.shown_hash(old),
    )
    goods_out.record_sale(house.context(hours=2), at=house.at(2), sold=[FromLot(old, pieces(12))])
    old.refresh_from_db()
    assert old.remaining == 0
    assert story.account(old).unexplained == 0


def test_best_before_stands_on_the_run_and_stays_on_its_split(house):
    """Split runs keep the date that is on the jar."""
    house.collect()
    house.boil()
    house.filter()
    canner = [FromVessel(house.places["Canner"], gallons("5"))]
    jars = fill(house, 6, canner, made=20, best_before=date(2028, 4, 2))
    part = upkeep.record_split(
        house.context(hours=7), at=house.at(7), lot=jars, amount=pieces(5), reason="by time"
    ).made_lots.get()

    assert part.best_before_date == date(2028, 4, 2)
    with pytest.raises(NotEnough):
        upkeep.record_split(
            house.context(hours=7), at=house.at(7), lot=jars, amount=pieces(16), reason="by time"
        )

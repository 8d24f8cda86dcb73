"""A record is whole or absent; codes are taken once; no lot becomes its own ancestor."""

import pytest
from django.db import DatabaseError, transaction

from lots.models import (
    ClientEntry,
    Counter,
    Draw,
    JournalEntry,
    Lot,
    PrintedCode,
    Reading,
    Step,
    StepEvent,
    Stock,
)
from lots.recording import boil, container_fill, decisions, upkeep
from lots.recording._sources import FromLot, FromVessel
from lots.recording.errors import CodeTaken, NotEnough, RecordingError, WouldLoop
from lots.tracing import cone
from tests.cases.tools import feed, open_boil, pass_on, syrup_of
from tests.factories import brix, fahrenheit, gallons, pieces

pytestmark = [pytest.mark.django_db, pytest.mark.engine]
TABLES = (
    Step, StepEvent, Lot, Draw, Stock, Reading, PrintedCode, Counter, JournalEntry, ClientEntry,
)  # fmt: skip


def everything():
    """Return all rows of the ledger's tables, value by value."""
    return {table: list(table.objects.order_by("pk").values()) for table in TABLES}


def test_a_boil_whose_last_draw_off_cannot_stand_leaves_no_row_at_all(house):
    house.collect()
    before = everything()
    bad = boil.DrawOff(house.at(3), house.places["Batch tank"], gallons("3"), brix("120"))
    good = boil.DrawOff(house.at(2), house.places["Batch tank"], gallons("3"), brix("67"))

    with pytest.raises(RecordingError):
        boil.record_boil(
            house.context(hours=4),
            at=house.at(1),
            ended_at=house.at(4),
            evaporator=house.places["Evaporator"],
            sources=[FromVessel(house.places["Tank 1"])],
            draw_offs=[good, bad],
            syrup=house.items["syrup"],
            contents=house.items["contents"],
        )

    assert everything() == before


def test_a_fill_refused_at_its_last_temperature_takes_no_code_and_no_syrup(house):
    house.collect()
    house.boil()
    house.filter()
    before = everything()
    run = container_fill.Run(
        product=house.items["quart"],
        made=20,
        into=house.places["Store"],
        printed_code="KEPT-1",
        fill_temperatures=[fahrenheit("186"), fahrenheit("280")],
    )

    with pytest.raises(RecordingError):
        container_fill.record_container_fill(
            house.context(hours=6),
            at=house.at(6),
            sources=[FromVessel(house.places["Canner"], gallons("5"))],
            run=run,
        )

    assert everything() == before


def test_a_refused_overdraw_of_the_second_source_gives_back_the_first(house):
    house.collect()
    lot = syrup_of(house, house.boil(into="Drum 1"))
    before = everything()

    with pytest.raises(NotEnough):
        pass_on(
            house, 5,
            [FromVessel(house.places["Drum 1"]), FromLot(lot, gallons("1"))], "Batch tank", "blend",
        )  # fmt: skip

    assert everything() == before


def test_syrup_never_goes_back_into_the_boil_it_came_from_however_far_it_went(house):
    house.collect("200")
    running = open_boil(house, 1)
    feed(house, running, 1)
    boil.draw_off(
        house.context(hours=2),
        boil=running,
        item=house.items["syrup"],
        draw=boil.DrawOff(house.at(2), house.places["Batch tank"], gallons("4"), brix("67")),
    )
    pass_on(house, 2.1, FromVessel(house.places["Batch tank"]), "Canner")
    pass_on(house, 2.2, FromVessel(house.places["Canner"]), "Drum 1", "reheat")
    pass_on(house, 2.3, FromVessel(house.places["Drum 1"]), "Drum 2", "transfer")

    with pytest.raises(WouldLoop):
        feed(house, running, 3, FromVessel(house.places["Drum 2"]))

    assert running.pk not in {link.from_step for link in cone.back(running.pk).links}


def test_a_voided_runs_code_is_never_given_to_the_next_run(house):
    jars = house.jars()
    decisions.void_step(house.context(house.lead, hours=7), step=jars.made_by, reason="recount")

    again = house.fill(hours=8)

    assert again.code != jars.code
    assert again.printed_code.text != jars.printed_code.text
    jars.refresh_from_db()
    assert (jars.code, jars.printed_code.text) != (again.code, again.printed_code.text)


def test_a_pattern_goes_round_what_was_typed_by_hand(house):
    house.jars()
    typed = PrintedCode.objects.get().text[:-1] + "B"
    canner = FromVessel(house.places["Canner"], gallons("1"))
    run = container_fill.Run(
        product=house.items["quart"], made=4, into=house.places["Store"], printed_code=typed
    )
    container_fill.record_container_fill(
        house.context(hours=6), at=house.at(6), sources=[canner], run=run
    )

    following = house.fill(hours=7, made=4).printed_code.text

    assert following not in {typed, typed[:-1] + "A"}
    with pytest.raises(CodeTaken):
        container_fill.open_container_fill(
            house.context(hours=8), at=house.at(8), product=house.items["quart"], printed_code=typed
        )


@pytest.mark.parametrize("column", ["code", "item_id", "made_by_id", "uuid", "facility_id"])
def test_what_names_a_lot_never_changes_even_by_query(house, column):
    first = house.collect()
    second = house.collect(hours=1)
    other = {"code": "X", "item_id": house.items["syrup"].pk, "facility_id": 99}

    value = other.get(column, getattr(second, column))
    with pytest.raises(DatabaseError), transaction.atomic():
        Lot.objects.filter(pk=first.pk).update(**{column: value})


@pytest.mark.parametrize("table", TABLES[:3] + (Draw, Reading, PrintedCode, JournalEntry))
def test_no_row_of_the_ledger_is_deleted_even_by_query(house, table):
    house.jars()

    with pytest.raises(DatabaseError, match="never deleted"), transaction.atomic():
        table.objects.all()._raw_delete(table.objects.db)


def test_an_ended_draw_is_not_brought_back(house):
    house.collect()
    boiled = house.boil()
    decisions.void_step(house.context(house.lead, hours=5), step=boiled, reason="wrong day")
    draw = Draw.objects.filter(step=boiled).first()

    with pytest.raises(DatabaseError), transaction.atomic():
        Draw.objects.filter(pk=draw.pk).update(ended_at=None, ended_by=None)


def test_only_what_is_recorded_as_counted_makes_goods_from_nothing(house):
    jars = house.jars()
    with pytest.raises(RecordingError):
        upkeep.record_count(
            house.context(hours=7), at=house.at(7), lot=jars, place=house.places["Store"],
            counted=pieces(30), reason="found more",
        )  # fmt: skip
    upkeep.record_count(
        house.context(house.lead, 7), at=house.at(7), lot=jars, place=house.places["Store"],
        counted=pieces(30), reason="found more",
    )  # fmt: skip

    jars.refresh_from_db()
    assert (jars.made, jars.adjusted, jars.remaining) == (20, 10, 30)
    assert jars.code in JournalEntry.objects.last().body

"""The chain verifies, and whoever edits the database behind the program's back is named."""

from contextlib import contextmanager

import pytest
from django.core.management import CommandError, call_command
from django.db import connection

from lots.db import guards
from lots.models import Draw, JournalEntry, Lot, Stock
from lots.recording.journal import digest_of
from lots.tracing import verify

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


@contextmanager
def unguarded():
    """Do what the database's owner could: drop the triggers, edit, put them back."""
    guards.remove()
    try:
        yield
    finally:
        if connection.vendor == "postgresql":
            # PostgreSQL refuses to alter a table with deferred checks still pending.
            with connection.cursor() as cursor:
                cursor.execute("SET CONSTRAINTS ALL IMMEDIATE")
        guards.install()


def chain_faults(house):
    house.facility.chain.refresh_from_db()
    return list(verify.chain_faults(house.facility.chain))


def middle_entry(house):
    house.facility.chain.refresh_from_db()
    return JournalEntry.objects.get(chain=house.facility.chain, seq=house.facility.chain.seq // 2)


def test_an_untouched_book_verifies(house):
    house.jars()

    call_command("verify")


def test_a_changed_journal_text_is_named_by_its_entry(house):
    house.jars()
    entry = middle_entry(house)
    with unguarded():
        JournalEntry.objects.filter(pk=entry.pk).update(body=entry.body.replace("a", "b", 1))

    (fault,) = chain_faults(house)

    assert fault == (
        f"{entry.chain.name}, entry {entry.seq}: its text was changed after it was written."
    )


def test_a_changed_text_with_its_own_digest_made_anew_is_named_by_the_next_entry(house):
    house.jars()
    entry = middle_entry(house)
    body = entry.body.replace("a", "b", 1)
    with unguarded():
        JournalEntry.objects.filter(pk=entry.pk).update(
            body=body, digest=digest_of(entry.previous, body)
        )

    (fault,) = chain_faults(house)

    assert f"entry {entry.seq + 1}: does not follow" in fault


def test_a_missing_entry_is_named(house):
    house.jars()
    entry = middle_entry(house)
    with unguarded():
        JournalEntry.objects.filter(pk=entry.pk).delete()

    (fault,) = chain_faults(house)

    assert f"entry {entry.seq} is missing" in fault


def test_a_last_entry_cut_off_is_seen_in_the_head(house):
    house.jars()
    house.facility.chain.refresh_from_db()
    last = house.facility.chain.seq
    with unguarded():
        JournalEntry.objects.filter(chain=house.facility.chain, seq=last).delete()

    assert chain_faults(house) == [
        f"{house.facility.chain.name}: the head does not match the last entry."
    ]


@pytest.mark.parametrize(
    ("column", "words"),
    [("drawn", "drawn is stored as"), ("solids_drawn", "solids drawn is stored as")],
)
def test_a_changed_quantity_of_a_lot_is_named_by_its_code(house, column, words):
    sap = house.collect()
    house.boil()
    sap.refresh_from_db()
    with unguarded():
        Lot.objects.filter(pk=sap.pk).update(**{column: getattr(sap, column) - 1})

    fault = next(verify.ledger_faults())

    assert sap.code in fault
    assert words in fault
    with pytest.raises(CommandError, match=sap.code):
        call_command("verify")


def test_a_changed_draw_is_named_by_its_lot(house):
    sap = house.collect()
    house.boil()
    with unguarded():
        draw = Draw.objects.get(lot=sap)
        Draw.objects.filter(pk=draw.pk).update(quantity=draw.quantity - 1)

    assert f"Lot {sap.code}: drawn" in next(verify.ledger_faults())


def test_stock_that_walked_off_is_named_by_its_lot(house):
    jars = house.jars()
    Stock.objects.filter(lot=jars).update(quantity=19)

    (fault,) = verify.ledger_faults()

    assert fault == f"Lot {jars.code}: stock by place is stored as 20, its records give 19."


def test_a_made_quantity_raised_by_hand_is_named(house):
    jars = house.jars()
    with unguarded():
        Lot.objects.filter(pk=jars.pk).update(made=21)

    assert f"Lot {jars.code}" in next(verify.ledger_faults())


def test_a_draw_turned_to_another_maker_is_named(house):
    sap = house.collect()
    boiled = house.boil()
    house.filter()
    with unguarded():
        draw = Draw.objects.get(lot=sap)
        Draw.objects.filter(pk=draw.pk).update(
            from_step=boiled.made_lots.first().draws.first().step
        )

    assert f"Draw {draw.uuid}: does not come from its lot's maker." in verify.ledger_faults()


@pytest.mark.parametrize("name", ["guard_lots_draw_update", "guard_lots_journalentry_delete"])
def test_verify_refuses_to_vouch_for_a_book_without_its_guards(house, name):
    table = name.removeprefix("guard_").rsplit("_", 1)[0]
    on = "" if connection.vendor == "sqlite" else f" ON {table}"
    with connection.cursor() as cursor:
        cursor.execute(f"DROP TRIGGER {name}{on}")

    with pytest.raises(CommandError, match=name):
        call_command("verify")

"""What the database itself refuses, whoever asks."""

import pytest
from django.db import DatabaseError, connection, transaction

from lots.db.checks import guards_present
from lots.db.guards import missing_guards
from lots.models import Lot

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


def test_no_guard_is_missing(house):
    assert missing_guards() == []


def test_the_database_refuses_to_change_or_delete_the_ledger(house):
    house.collect()
    house.boil()
    for sql in (
        "UPDATE lots_draw SET quantity = 1",
        "DELETE FROM lots_draw",
        "UPDATE lots_journalentry SET body = 'x'",
        "DELETE FROM lots_journalentry",
        "UPDATE lots_lot SET code = 'x' || id",
        "UPDATE lots_draw SET from_step_id = step_id",
    ):
        with pytest.raises(DatabaseError), transaction.atomic(), connection.cursor() as cursor:
            cursor.execute(sql)


def test_a_replaced_journal_row_is_refused_on_sqlite(house):
    if connection.vendor != "sqlite":
        pytest.skip("REPLACE is SQLite's own")
    with pytest.raises(DatabaseError), transaction.atomic(), connection.cursor() as cursor:
        cursor.execute(
            "INSERT OR REPLACE INTO lots_journalentry "
            "SELECT id, seq, previous, digest, 'forged', action, label, recorded_at, chain_id "
            "FROM lots_journalentry WHERE seq = 1"
        )


def test_overdraw_is_refused_by_the_database_itself(house):
    lot = house.collect()
    with pytest.raises(DatabaseError), transaction.atomic():
        Lot.objects.filter(pk=lot.pk).update(drawn=lot.made + 1)


def test_a_missing_guard_is_named_by_the_database_check(house):
    assert guards_present(databases=["default"]) == []
    table = "" if connection.vendor == "sqlite" else " ON lots_draw"
    with connection.cursor() as cursor:
        cursor.execute(f"DROP TRIGGER guard_lots_draw_update{table}")

    fault = guards_present(databases=["default"])[0]

    assert "guard_lots_draw_update" in fault.msg

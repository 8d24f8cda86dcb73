"""Real transactions, seen by other connections; the guards step aside only for the flush.

On SQLite the tests' database lives in memory, where threads would meet another kind of lock than
users do: here it is copied to a file first, and the file is thrown away.
"""

import pytest
from django.db import connection, connections

from lots.db import guards
from tests import factories


@pytest.fixture
def _guards_come_back(django_db_setup, django_db_blocker):
    """Torn down after the flush, because it is asked for before it."""
    yield
    with django_db_blocker.unblock():
        guards.install()


@pytest.fixture
def _flushed(_guards_come_back, transactional_db):
    yield
    guards.remove()


@pytest.fixture
def _in_a_file(tmp_path, _flushed):
    if connection.vendor != "sqlite":
        yield
        return
    path = tmp_path / "book.sqlite3"
    with connection.cursor() as cursor:
        cursor.execute("VACUUM INTO %s", [str(path)])
    in_memory, given = connections["default"], connections.databases["default"]
    name = given["NAME"]
    given["NAME"] = str(path)
    del connections["default"]
    yield
    connections["default"].close()
    given["NAME"] = name
    connections["default"] = in_memory


@pytest.fixture
def book(_in_a_file):
    """A sugarhouse whose records every thread sees."""
    assert guards.missing_guards() == []
    return factories.sugarhouse()

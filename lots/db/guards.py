"""Install the triggers after each migrate, and tell which of them are missing."""

from typing import Any

from django.db import connections

from . import triggers


def install(using: str = "default") -> None:
    """Create the triggers anew, harmless to repeat."""
    connection = connections[using]
    statements = (
        triggers.sqlite_statements()
        if connection.vendor == "sqlite"
        else triggers.postgresql_statements()
    )
    with connection.cursor() as cursor:
        for statement in statements:
            cursor.execute(statement)


def remove(using: str = "default") -> None:
    """Drop the triggers: only for tests, which must empty the tables between them."""
    connection = connections[using]
    tables = {rule[0]: rule[1] for rule in triggers._rules()}
    with connection.cursor() as cursor:
        for name, table in tables.items():
            on = "" if connection.vendor == "sqlite" else f" ON {table}"
            cursor.execute(f"DROP TRIGGER IF EXISTS {name}{on}")
        if connection.vendor == "postgresql":
            for table in triggers.KEPT_TABLES:
                cursor.execute(f"DROP TRIGGER IF EXISTS guard_{table}_truncate ON {table}")


def missing_guards(using: str = "default") -> list[str]:
    """Return the triggers the database lacks; a server refuses to run while any is missing."""
    connection = connections[using]
    wanted = set(triggers.names())
    with connection.cursor() as cursor:
        if connection.vendor == "sqlite":
            cursor.execute("SELECT name FROM sqlite_master WHERE type = 'trigger'")
            found = {row[0] for row in cursor.fetchall()}
            cursor.execute("PRAGMA recursive_triggers")
            if cursor.fetchone()[0] != 1:
                found.discard("guard_lots_journalentry_delete")
        else:
            wanted |= {f"guard_{table}_truncate" for table in triggers.KEPT_TABLES}
            cursor.execute("SELECT tgname FROM pg_trigger WHERE tgenabled <> 'D'")
            found = {row[0] for row in cursor.fetchall()}
    return sorted(wanted - found)


def install_after_migrate(sender: Any, using: str = "default", **kwargs: Any) -> None:
    """Receive post_migrate: install once every table of the ledger exists."""
    tables = set(connections[using].introspection.table_names())
    if set(triggers.KEPT_TABLES) <= tables:
        install(using)

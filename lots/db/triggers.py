"""The trigger SQL of both engines: what the database itself refuses, whoever asks.

Triggers cannot stop the owner of the database from disabling them or from editing the file with
another program; saved chain heads can show that it happened.
"""

KEPT_TABLES = (
    "lots_journalentry",
    "lots_draw",
    "lots_lot",
    "lots_step",
    "lots_stepevent",
    "lots_reading",
    "lots_check",
    "lots_hold",
    "lots_printedcode",
    "lots_amendment",
    "lots_adjustment",
    "lots_vesseltake",
)
NEVER_UPDATED = ("lots_journalentry", "lots_check", "lots_printedcode", "lots_amendment")

LOT_FIXED = ("uuid", "facility_id", "code", "item_id", "made_by_id")
DRAW_FIXED = (
    "uuid",
    "facility_id",
    "lot_id",
    "from_step_id",
    "step_id",
    "role",
    "quantity",
    "solids",
    "returns_id",
    "from_place_id",
    "asked_id",
    "recorded_at",
)

DRAW_INSERT_WRONG = """
    (SELECT made_by_id FROM lots_lot WHERE id = NEW.lot_id) IS DISTINCT FROM NEW.from_step_id
    OR NEW.from_step_id = NEW.step_id
    OR (SELECT facility_id FROM lots_step WHERE id = NEW.step_id) IS DISTINCT FROM NEW.facility_id
    OR (NEW.role <> 'between-facilities' AND
        (SELECT facility_id FROM lots_lot WHERE id = NEW.lot_id) IS DISTINCT FROM NEW.facility_id)
"""


def _changed(columns: tuple[str, ...]) -> str:
    return " OR ".join(f"NEW.{name} IS DISTINCT FROM OLD.{name}" for name in columns)


def _rules() -> list[tuple[str, str, str, str, str]]:
    """Return (name, table, moment, condition, message) for each row trigger."""
    rules = [
        (f"guard_{table}_delete", table, "DELETE", "TRUE", f"{table} rows are never deleted")
        for table in KEPT_TABLES
    ]
    rules += [
        (f"guard_{table}_update", table, "UPDATE", "TRUE", f"{table} rows are never changed")
        for table in NEVER_UPDATED
    ]
    rules += [
        (
            "guard_lots_lot_update",
            "lots_lot",
            "UPDATE",
            _changed(LOT_FIXED),
            "a lot's code, item and maker never change",
        ),
        (
            "guard_lots_draw_update",
            "lots_draw",
            "UPDATE",
            f"OLD.ended_at IS NOT NULL OR NEW.ended_at IS NULL OR {_changed(DRAW_FIXED)}",
            "a draw is ended once and never changed",
        ),
        (
            "guard_lots_draw_insert",
            "lots_draw",
            "INSERT",
            DRAW_INSERT_WRONG,
            "a draw must come from its lot's maker, inside one facility, never from its own step",
        ),
    ]
    return rules


def names() -> list[str]:
    """Return the name of every row trigger that must exist."""
    return [rule[0] for rule in _rules()]


def sqlite_statements() -> list[str]:
    """Return the statements that (re-)create the triggers on SQLite."""
    statements = []
    for name, table, moment, condition, message in _rules():
        text = message.replace("'", "''")
        # SQLite 3.38 and older spell the null-tolerant comparison only as IS NOT.
        wrong = condition.replace("IS DISTINCT FROM", "IS NOT").replace("TRUE", "1")
        statements += [
            f"DROP TRIGGER IF EXISTS {name}",
            (
                f"CREATE TRIGGER {name} BEFORE {moment} ON {table} WHEN {wrong} "
                f"BEGIN SELECT RAISE(ABORT, '{text}'); END"
            ),
        ]
    return statements


def postgresql_statements() -> list[str]:
    """Return the statements that (re-)create the triggers on PostgreSQL."""
    statements = []
    for name, table, moment, condition, message in _rules():
        text = message.replace("'", "''")
        statements += [
            (
                f"CREATE OR REPLACE FUNCTION {name}() RETURNS trigger LANGUAGE plpgsql AS $body$ "
                f"BEGIN IF {condition} THEN RAISE EXCEPTION '{text}' "
                f"USING ERRCODE = 'integrity_constraint_violation'; END IF; "
                f"RETURN {'OLD' if moment == 'DELETE' else 'NEW'}; END $body$"
            ),
            f"DROP TRIGGER IF EXISTS {name} ON {table}",
            (
                f"CREATE TRIGGER {name} BEFORE {moment} ON {table} "
                f"FOR EACH ROW EXECUTE FUNCTION {name}()"
            ),
        ]
    statements.append(
        "CREATE OR REPLACE FUNCTION guard_truncate() RETURNS trigger LANGUAGE plpgsql AS $body$ "
        "BEGIN RAISE EXCEPTION 'the ledger is never truncated' "
        "USING ERRCODE = 'integrity_constraint_violation'; END $body$"
    )
    for table in KEPT_TABLES:
        statements += [
            f"DROP TRIGGER IF EXISTS guard_{table}_truncate ON {table}",
            (
                f"CREATE TRIGGER guard_{table}_truncate BEFORE TRUNCATE ON {table} "
                "FOR EACH STATEMENT EXECUTE FUNCTION guard_truncate()"
            ),
        ]
    return statements

"""What is behind a lot and ahead of it: one recursive statement over the graph of steps.

The recursive term joins draws on their live key and nothing else; a second condition there makes
SQLite scan the whole table. Role choices stand as CASE in the select list. Backward, the lots are
those of draws whose step is in the cone, never "made by a step in the cone" (that would bring
sister lots); forward, the lots are those made by steps in the cone.
"""

from collections.abc import Iterable
from dataclasses import dataclass

from django.db import connection

_MATTER = ("ingredient", "carry-over", "returned", "between-facilities")
_OUT = ("shipped", "removed")
_AROUND = ("aid", "packaging", "cleaning")
FOLLOW = {
    "composition": (*_MATTER, *_OUT),
    "with-aids": (*_MATTER, *_OUT, *_AROUND),
    "all": (*_MATTER, *_OUT, *_AROUND, "residue"),
}


@dataclass(frozen=True)
class Link:
    """One live draw inside a cone."""

    lot: int
    from_step: int
    step: int
    role: str
    quantity: int | None
    solids: int | None


@dataclass(frozen=True)
class Cone:
    """The steps and draws of one trace."""

    steps: frozenset[int]
    links: tuple[Link, ...]

    @property
    def lots(self) -> frozenset[int]:
        """Return the lots drawn inside the cone."""
        return frozenset(link.lot for link in self.links)


def _cast() -> str:
    return "CAST(%s AS bigint)"


def _roles(follow: str, column: str) -> str:
    allowed = ", ".join(f"'{role}'" for role in FOLLOW[follow])
    return f"CASE WHEN d.role IN ({allowed}) THEN d.{column} END"


def _join() -> str:
    return "CROSS JOIN" if connection.vendor == "sqlite" else "JOIN"


def back_sql(follow: str = "all") -> str:
    """Return the trace-back statement: steps behind a step, then their draws."""
    return f"""
        WITH RECURSIVE cone(step) AS (
            SELECT {_cast()}
            UNION
            SELECT {_roles(follow, "from_step_id")}
            FROM cone JOIN lots_draw d ON d.live_step = cone.step
        )
        SELECT d.lot_id, d.from_step_id, d.step_id, d.role, d.quantity, d.solids
        FROM cone {_join()} lots_draw d ON d.live_step = cone.step
    """


def forward_sql(follow: str = "all") -> str:
    """Return the trace-forward statement: a lot's draws, the steps ahead, the draws between."""
    return f"""
        WITH RECURSIVE cone(step) AS (
            SELECT {_roles(follow, "step_id")} FROM lots_draw d WHERE d.live_lot = {_cast()}
            UNION
            SELECT {_roles(follow, "step_id")}
            FROM cone JOIN lots_draw d ON d.live_from = cone.step
        )
        SELECT d.lot_id, d.from_step_id, d.step_id, d.role, d.quantity, d.solids
        FROM cone {_join()} lots_draw d ON d.live_from = cone.step
        UNION ALL
        SELECT d.lot_id, d.from_step_id, d.step_id, d.role, d.quantity, d.solids
        FROM lots_draw d WHERE d.live_lot = {_cast()}
    """


def _run(sql: str, *keys: int) -> list[Link]:
    with connection.cursor() as cursor:
        cursor.execute(sql, keys)
        return [Link(*row) for row in cursor.fetchall()]


def back(step: int, follow: str = "all") -> Cone:
    """Return everything behind a step: the maker of the lot asked for."""
    allowed = set(FOLLOW[follow])
    links = tuple(link for link in _run(back_sql(follow), step) if link.role in allowed)
    steps = {step} | {link.from_step for link in links}
    return Cone(frozenset(steps), links)


def forward(lot: int, follow: str = "all") -> Cone:
    """Return everything ahead of one lot: its sisters' fates stay out."""
    allowed = set(FOLLOW[follow])
    links = tuple(link for link in _run(forward_sql(follow), lot, lot) if link.role in allowed)
    return Cone(frozenset(link.step for link in links), links)


def reaches(start_step: int, target_step: int) -> bool:
    """Whether ``target_step`` lies ahead of ``start_step``: a draw from it would close a loop."""
    if start_step == target_step:
        return True
    sql = f"""
        WITH RECURSIVE cone(step) AS (
            SELECT {_cast()}
            UNION
            SELECT d.step_id FROM cone JOIN lots_draw d ON d.live_from = cone.step
        )
        SELECT 1 FROM cone WHERE step = {_cast()}
    """
    with connection.cursor() as cursor:
        cursor.execute(sql, [start_step, target_step])
        return cursor.fetchone() is not None


def plan(statement: str, *keys: int) -> Iterable[str]:
    """Return the engine's plan for a statement, a line a row: for the test that asserts it."""
    explain = "EXPLAIN QUERY PLAN " if connection.vendor == "sqlite" else "EXPLAIN "
    with connection.cursor() as cursor:
        cursor.execute(explain + statement, keys)
        return [str(row[-1]) for row in cursor.fetchall()]

"""How long a record is kept: the years each law asks for, and from which day."""

from dataclasses import dataclass
from datetime import date


@dataclass(frozen=True)
class Retention:
    """One rule: whole years from a day named by the law."""

    key: str
    jurisdiction: str
    years: int
    starts: str
    source: str
    mark: str


RETENTION = (
    Retention("us-records", "US", 2, "the day the record was prepared", "21 CFR 117.315", "MEMORY"),
    Retention("us-trace", "US", 2, "the day the record was made", "21 CFR 1.360", "MEMORY"),
    Retention("us-organic", "US", 5, "the day the record was made", "7 CFR 205.103", "READ"),
    Retention("ca-trace", "CA", 2, "the day the food was provided or sold", "SFCR 90(3)", "READ"),
    Retention("ca-complaint", "CA", 2, "the day the actions were completed", "SFCR 83", "READ"),
    Retention("ca-recall", "CA", 2, "the day the recall was initiated", "SFCR 84", "READ"),
    Retention("ca-simulation", "CA", 2, "the day it was completed", "SFCR 84", "READ"),
)


def keep_until(start: date, years: int) -> date:
    """Return the same day some years later; 29 February becomes 28 February in a common year."""
    try:
        return start.replace(year=start.year + years)
    except ValueError:
        return start.replace(year=start.year + years, day=28)


def latest(jurisdiction: str, start: date, *, organic: bool = False) -> tuple[date, Retention]:
    """Return the last day to keep a record and the rule that sets it, for US… or CA….

    A record that starts several periods on one day is kept for the longest. Raises ValueError for
    a jurisdiction without a rule.
    """
    country = jurisdiction.partition("-")[0]
    rows = [
        row
        for row in RETENTION
        if row.jurisdiction == country and (organic or row.key != "us-organic")
    ]
    if not rows:
        raise ValueError(f"No retention is set for {jurisdiction}.")
    longest = max(rows, key=lambda row: row.years)
    return keep_until(start, longest.years), longest

"""Rule sets: each jurisdiction's limits as data, with source, mark and date."""

import hashlib
import tomllib
from dataclasses import dataclass
from functools import cache
from pathlib import Path

SETS = Path(__file__).parent / "sets"
KEYS = ("us-federal", "vermont", "new-york", "maine", "wisconsin", "canada")


@dataclass(frozen=True)
class Limit:
    """One limit: its value as printed by the source, unit, source and how it was obtained."""

    value: str
    unit: str
    source: str
    mark: str
    reference: str = ""


@dataclass(frozen=True)
class RuleSet:
    """A jurisdiction's limits, keyed by the hash of their data."""

    key: str
    name: str
    jurisdiction: str
    effective_from: str
    limits: dict[str, Limit]
    sha256: str

    def limit(self, name: str) -> Limit | None:
        """Return a limit, or ``None`` where the set holds none: then the check is not set."""
        return self.limits.get(name)


@cache
def load(key: str) -> RuleSet:
    """Return a shipped rule set; raises KeyError for an unknown key."""
    if key not in KEYS:
        raise KeyError(f"There is no rule set {key}.")
    raw = (SETS / f"{key}.toml").read_bytes()
    data = tomllib.loads(raw.decode())
    return RuleSet(
        key=key,
        name=data["name"],
        jurisdiction=data["jurisdiction"],
        effective_from=data["effective_from"],
        limits={name: Limit(**row) for name, row in data["limits"].items()},
        sha256=hashlib.sha256(raw).hexdigest(),
    )

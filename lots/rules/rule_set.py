"""Rule sets: each jurisdiction's limits as data, with source, mark and date."""

import hashlib
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from pathlib import Path
from types import MappingProxyType
from typing import Any

SETS = Path(__file__).parent / "sets"
KEYS = ("us-federal", "vermont", "new-york", "maine", "wisconsin", "canada")
# How a figure was obtained: the passage read, a quotation of it read, remembered, or computed.
MARKS = ("READ", "READ-2", "MEMORY", "DERIVED")
# What stands behind a figure, so that a habit of the trade is never shown as law.
BASES = ("law", "grade standard", "guidance", "common practice")


@dataclass(frozen=True)
class Limit:
    """One limit: its value as printed by the source, unit, source and how it was obtained.

    ``reference`` is the temperature at which the source states the limit. It belongs to the
    instruments of that source; a true °Brix is never shifted by it.
    """

    value: str
    unit: str
    source: str
    mark: str
    basis: str
    jurisdiction: str
    effective_from: str
    reference: str = ""

    def __post_init__(self) -> None:
        """Refuse a row that does not say where its figure comes from."""
        if self.mark not in MARKS or self.basis not in BASES or not self.source:
            raise ValueError(f"A limit of {self.value} {self.unit} lacks source, mark or basis.")

    @property
    def number(self) -> Decimal:
        """Return the value as a number; raises decimal.InvalidOperation for a word."""
        return Decimal(self.value)

    @property
    def cited(self) -> str:
        """Return the source, with the reference temperature as the source states it."""
        return f"{self.source}, stated at {self.reference}" if self.reference else self.source


@dataclass(frozen=True)
class RuleSet:
    """A jurisdiction's limits, and the hash of the bytes they were read from."""

    key: str
    name: str
    jurisdiction: str
    effective_from: str
    limits: Mapping[str, Limit]
    sha256: str

    def limit(self, name: str, stage: str = "") -> Limit | None:
        """Return a limit, or ``None`` where the set holds none: then the check is not set.

        A limit that differs by stage is asked for with its stage.
        """
        return self.limits.get(f"{name} {stage}".strip())


@cache
def load(key: str) -> RuleSet:
    """Return a shipped rule set; raises KeyError for an unknown key."""
    if key not in KEYS:
        raise KeyError(f"There is no rule set {key}.")
    return parse(key, (SETS / f"{key}.toml").read_bytes())


def parse(key: str, raw: bytes) -> RuleSet:
    """Return the rule set of some TOML; raises ValueError for a row that is wrong or twice there.

    A row without its own jurisdiction or date has those of the set.
    """
    data = tomllib.loads(raw.decode())
    defaults = {name: data[name] for name in ("jurisdiction", "effective_from")}
    limits: dict[str, Limit] = {}
    for row in data["limit"]:
        for name in _names(row):
            if name in limits:
                raise ValueError(f"{key} sets {name} twice.")
            rest = {k: v for k, v in row.items() if k not in ("name", "stages")}
            limits[name] = Limit(**(defaults | rest))
    return RuleSet(
        key=key,
        name=data["name"],
        limits=MappingProxyType(limits),
        sha256=hashlib.sha256(raw).hexdigest(),
        **defaults,
    )


def _names(row: Mapping[str, Any]) -> list[str]:
    stages = row.get("stages")
    return [f"{row['name']} {stage}" for stage in stages] if stages else [row["name"]]

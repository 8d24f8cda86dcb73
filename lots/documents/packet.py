"""A packet as plain data: a bounded set of records that renders the same way everywhere."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime
from zoneinfo import ZoneInfo

from lots.models import Facility, Lot
from lots.rules import rule_set
from lots.rules.regulators import REGULATORS

from . import packet_sheets as sheets
from .packet_sheets import Sheet

CAUTION = (
    "This packet says what was recorded and which checks passed. It does not say that a food is "
    "safe; the regulator's rules and decisions stand above it."
)


@dataclass(frozen=True)
class Packet:
    """A packet: who, what, when, the chain head, and a sheet for each kind of record."""

    facility: str
    address: str
    fictional: bool
    made_at: str
    chain_head: str
    chain_seq: int
    lots: tuple[str, ...]
    regulators: tuple[tuple[str, str], ...]
    caution: str
    sheets: tuple[Sheet, ...]


def build(facility: Facility, lots: Sequence[Lot], at: datetime) -> Packet:
    """Collect the records of some lots: what is behind each and where it went."""
    zone = ZoneInfo(facility.zone)
    material = sheets.gather(lots, zone)
    rules = rule_set.load(facility.rule_set)
    facility.chain.refresh_from_db()
    return Packet(
        facility=facility.name,
        address=facility.address,
        fictional=facility.fictional,
        made_at=f"{at.astimezone(zone):%Y-%m-%d %H:%M %Z}",
        chain_head=facility.chain.head,
        chain_seq=facility.chain.seq,
        lots=tuple(_name(lot) for lot in lots),
        regulators=REGULATORS.get(rules.jurisdiction, REGULATORS["US"]),
        caution=CAUTION,
        sheets=(
            sheets.lots_sheet(material),
            sheets.checks_sheet(material),
            sheets.readings_sheet(material),
            sheets.holds_sheet(material),
            sheets.corrections_sheet(material),
            sheets.sales_sheet(material),
            sheets.suppliers_sheet(material),
            sheets.draws_sheet(material, "Trace back", back=True),
            sheets.draws_sheet(material, "Trace forward", back=False),
            sheets.cleaning_sheet(material),
            sheets.records_sheet(material),
            sheets.unposted_sheet(material),
            sheets.events_sheet(material),
            sheets.readings_behind_sheet(material),
        ),
    )


def _name(lot: Lot) -> str:
    printed = f" ({lot.printed_code.text})" if lot.printed_code else ""
    return f"{lot.code}{printed} {lot.item.name}"

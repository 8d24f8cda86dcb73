"""A packet as plain data: a bounded set of records that renders the same way everywhere."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime
from zoneinfo import ZoneInfo

from lots.models import Facility, Lot, Step
from lots.quantities.rounding import fixed
from lots.rules import rule_set
from lots.rules.regulators import REGULATORS
from lots.tracing import story

CAUTION = (
    "This packet says what was recorded and which checks passed. It does not say that a food is "
    "safe; the regulator's rules and decisions stand above it."
)
Row = tuple[str, ...]


@dataclass(frozen=True)
class Sheet:
    """One kind of record: its heads and rows, all text."""

    title: str
    heads: Row
    rows: tuple[Row, ...]


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
    stories = [story.tell(lot) for lot in lots]
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
            _lots(lots, stories, zone),
            _readings(lots, zone),
            _checks(lots),
            _holds(lots, zone),
            _draws("Trace back", stories, True, zone),
            _draws("Trace forward", stories, False, zone),
            _steps(stories, zone),
        ),
    )


def _name(lot: Lot) -> str:
    printed = f" ({lot.printed_code.text})" if lot.printed_code else ""
    return f"{lot.code}{printed} {lot.item.name}"


def amount(lot: Lot, quantity: int | None) -> str:
    """Return a ledger quantity with its unit."""
    if quantity is None:
        return "not measured"
    if lot.item.unit == "piece":
        return f"{quantity} pieces"
    return f"{fixed(quantity / 1_000_000, 3)} kg"


def _when(moment: datetime | None, zone: ZoneInfo) -> str:
    return f"{moment.astimezone(zone):%Y-%m-%d %H:%M}" if moment else ""


def _lots(lots: Sequence[Lot], stories: Sequence[story.Story], zone: ZoneInfo) -> Sheet:
    rows = []
    for lot, told in zip(lots, stories, strict=True):
        account = told.accounting
        values = (lot.made, account.shipped, account.stock_total, account.removed, account.used)
        rows.append(
            (
                lot.code,
                lot.printed_code.text if lot.printed_code else "",
                lot.item.name,
                lot.get_state_display(),
                _when(lot.made_at, zone),
                *(amount(lot, value) for value in values),
                amount(lot, account.unexplained),
            )
        )
    heads = (
        "Lot", "Code on goods", "Item", "State", "Made at", "Made", "Shipped", "In stock",
        "Removed", "Used", "Unexplained",
    )  # fmt: skip
    return Sheet("Lots", heads, tuple(rows))


def _readings(lots: Sequence[Lot], zone: ZoneInfo) -> Sheet:
    rows = [
        (
            lot.code,
            reading.get_kind_display(),
            f"{reading.typed_value} {reading.typed_unit}".strip(),
            f"{reading.sample_typed} {reading.sample_unit}".strip(),
            f"{reading.corrected} {reading.corrected_unit}".strip(),
            reading.method,
            _when(reading.at, zone),
        )
        for lot in lots
        for reading in lot.readings.order_by("at", "pk")
    ]
    heads = ("Lot", "Reading", "As read", "Sample at", "Corrected", "Method", "When")
    return Sheet("Readings", heads, tuple(rows))


def _checks(lots: Sequence[Lot]) -> Sheet:
    rows = [
        (lot.code, check.rule, check.stage, check.outcome, check.sentence, check.mark)
        for lot in lots
        for check in lot.checks.order_by("pk")
    ]
    return Sheet("Checks", ("Lot", "Rule", "Stage", "Verdict", "Finding", "Mark"), tuple(rows))


def _holds(lots: Sequence[Lot], zone: ZoneInfo) -> Sheet:
    rows = []
    for lot in lots:
        for hold in lot.holds.select_related("placed_by", "ended_by").order_by("pk"):
            action = hold.actions.first()
            done = action if action and action.completed_at else None
            rows.append(
                (
                    lot.code,
                    hold.reason,
                    f"{hold.placed_by} {_when(hold.placed_at, zone)}",
                    f"{hold.decision} {hold.decision_reason}".strip() or "open",
                    f"{hold.ended_by or ''} {_when(hold.ended_at, zone)}".strip(),
                    f"{done.cause} {done.correction} {done.prevention}" if done else "open",
                )
            )
    heads = ("Lot", "Reason", "Placed", "Decision", "Signed", "Corrective action")
    return Sheet("Holds", heads, tuple(rows))


def _draws(title: str, stories: Sequence[story.Story], back: bool, zone: ZoneInfo) -> Sheet:
    rows = []
    for told in stories:
        links = told.back.links if back else told.forward.links
        for link in sorted(links, key=lambda one: (told.steps[one.step].started_at, one.lot)):
            lot, step = told.lots[link.lot], told.steps[link.step]
            rows.append(
                (
                    told.lot.code,
                    lot.code,
                    lot.item.name,
                    lot.supplier_code,
                    link.role,
                    amount(lot, link.quantity),
                    step.get_kind_display(),
                    str(step.partner or ""),
                    step.document,
                    _when(step.started_at, zone),
                )
            )
    heads = (
        "Traced lot", "Drawn lot", "Item", "Supplier's code", "As", "Amount", "Into", "Partner",
        "Document", "When",
    )  # fmt: skip
    return Sheet(title, heads, tuple(rows))


def _steps(stories: Sequence[story.Story], zone: ZoneInfo) -> Sheet:
    steps: dict[int, Step] = {}
    for told in stories:
        steps |= told.steps
    rows = [
        (
            step.get_kind_display(),
            str(step.place or ""),
            str(step.partner or ""),
            _when(step.started_at, zone),
            _when(step.ended_at, zone),
            str(step.recorded_by),
            _when(step.recorded_at, zone),
            "late entry" if step.late else "",
            step.note,
        )
        for step in sorted(steps.values(), key=lambda step: (step.started_at, step.pk))
    ]
    heads = (
        "Record", "Place", "Partner", "Started", "Ended", "Recorded by", "Recorded at", "Late",
        "Note",
    )  # fmt: skip
    return Sheet("Records", heads, tuple(rows))

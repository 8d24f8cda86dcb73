"""The sheets of a packet: one a kind of record, every cell text."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import datetime
from zoneinfo import ZoneInfo

from lots.models import (
    Amendment,
    Draw,
    DrawRole,
    Lot,
    Partner,
    Reading,
    Step,
    StepEvent,
    StepKind,
    UnpostedEntry,
)
from lots.quantities.rounding import fixed
from lots.tracing import story

from . import details

Row = tuple[str, ...]
WIDE = frozenset({"Finding", "Details", "Deviation", "What was done", "Why not posted"})


@dataclass(frozen=True)
class Sheet:
    """One kind of record: its heads and rows, all text.

    A sheet that is not for paper stands in the spreadsheet; the paper says how long it is.
    """

    title: str
    heads: Row
    rows: tuple[Row, ...]
    paper: bool = True

    @property
    def wide(self) -> frozenset[str]:
        """Return the heads of columns that hold sentences: paper gives them more room."""
        return WIDE.intersection(self.heads)


@dataclass(frozen=True)
class Material:
    """What the sheets are made from: the lots asked for, their stories and every step in them."""

    lots: Sequence[Lot]
    stories: Sequence[story.Story]
    steps: dict[int, Step]
    zone: ZoneInfo

    def when(self, moment: datetime | None) -> str:
        """Return a time by the facility's clock."""
        return f"{moment.astimezone(self.zone):%Y-%m-%d %H:%M}" if moment else ""

    def step(self, step: Step) -> str:
        """Return what a record is and when it began, by the facility's clock."""
        return step.in_words(str(self.zone))


def gather(lots: Sequence[Lot], zone: ZoneInfo) -> Material:
    """Trace the lots and collect every step behind and ahead of them."""
    stories = [story.tell(lot) for lot in lots]
    steps: dict[int, Step] = {}
    for told in stories:
        steps |= told.steps
    return Material(lots, stories, steps, zone)


def amount(lot: Lot, quantity: int | None) -> str:
    """Return a ledger quantity with its unit."""
    if quantity is None:
        return "not measured"
    if lot.item.unit == "piece":
        return f"{quantity} pieces"
    return f"{fixed(quantity / 1_000_000, 3)} kg"


def lots_sheet(material: Material) -> Sheet:
    """Return the lots with their accounting."""
    rows = []
    for lot, told in zip(material.lots, material.stories, strict=True):
        account = told.accounting
        values = (
            lot.made,
            account.adjusted,
            account.shipped,
            account.returned,
            account.stock_total,
            account.removed,
            account.used,
            account.unexplained,
        )
        rows.append(
            (
                lot.code,
                lot.printed_code.text if lot.printed_code else "",
                lot.item.name,
                lot.get_state_display(),
                material.when(lot.made_at),
                *(amount(lot, value) for value in values),
            )
        )
    heads = (
        "Lot", "Code on goods", "Item", "State", "Made at", "Made", "Adjusted", "Shipped",
        "Returned", "In stock", "Removed", "Used", "Unexplained",
    )  # fmt: skip
    return Sheet("Lots", heads, tuple(rows))


def _reading_rows(material: Material, readings: Iterable[Reading]) -> tuple[Row, ...]:
    return tuple(
        (
            reading.lot.code if reading.lot else "",
            material.step(reading.step),
            reading.get_kind_display(),
            f"{reading.typed_value} {reading.typed_unit}".strip(),
            f"{reading.sample_typed} {reading.sample_unit}".strip(),
            f"{reading.corrected} {reading.corrected_unit}".strip(),
            reading.method,
            reading.instrument.tag if reading.instrument else "",
            material.when(reading.at),
        )
        for reading in readings
    )


READING_HEADS = (
    "Lot", "Record", "Reading", "As read", "Sample at", "Corrected", "Method", "Instrument", "When",
)  # fmt: skip


def readings_sheet(material: Material) -> Sheet:
    """Return the readings of the lots asked for."""
    found = Reading.objects.filter(lot__in=material.lots)
    found = found.select_related("lot", "step", "instrument").order_by("at", "pk")
    return Sheet("Readings", READING_HEADS, _reading_rows(material, found))


def readings_behind_sheet(material: Material) -> Sheet:
    """Return every reading of the steps behind and ahead: for the spreadsheet."""
    found = Reading.objects.filter(step__in=material.steps).exclude(lot__in=material.lots)
    found = found.select_related("lot", "step", "instrument").order_by("at", "pk")
    return Sheet("Readings behind", READING_HEADS, _reading_rows(material, found), paper=False)


def checks_sheet(material: Material) -> Sheet:
    """Return the checks with their limits and sources."""
    rows = [
        (
            lot.code,
            check.rule,
            check.stage,
            check.outcome,
            check.sentence,
            f"{check.limit} {check.unit}".strip(),
            check.rule_set,
            check.mark,
        )
        for lot in material.lots
        for check in lot.checks.order_by("pk")
    ]
    heads = ("Lot", "Rule", "Stage", "Verdict", "Finding", "Limit", "Rule set", "Mark")
    return Sheet("Checks", heads, tuple(rows))


def holds_sheet(material: Material) -> Sheet:
    """Return holds with their decisions and corrective actions."""
    rows = []
    for lot in material.lots:
        for hold in lot.holds.select_related("placed_by", "ended_by").order_by("pk"):
            action = hold.actions.select_related("completed_by").first()
            done = action if action and action.completed_at else None
            parts = (
                (done.cause, done.correction, done.prevention, done.evaluation)
                if done
                else ("open", "", "", "")
            )
            rows.append(
                (
                    lot.code,
                    hold.reason,
                    f"{hold.placed_by} {material.when(hold.placed_at)}",
                    *parts,
                    f"{done.completed_by} {material.when(done.completed_at)}" if done else "",
                    f"{hold.decision} {hold.decision_reason}".strip() or "open",
                    f"{hold.ended_by or ''} {material.when(hold.ended_at)}".strip(),
                )
            )
    heads = (
        "Lot", "Deviation", "Held", "Cause", "Correction", "Prevention", "Evaluation",
        "Completed", "Decision", "Signed",
    )  # fmt: skip
    return Sheet("Holds and actions", heads, tuple(rows))


def corrections_sheet(material: Material) -> Sheet:
    """Return what was corrected, divided anew or voided: old and new."""
    rows = [
        (
            material.step(one.step), one.field, one.old, one.new, one.reason, str(one.by),
            material.when(one.at),
        )
        for one in Amendment.objects.filter(step__in=material.steps)
        .select_related("step", "by")
        .order_by("at", "pk")
    ]  # fmt: skip
    ended = Draw.objects.filter(step__in=material.steps, ended_at__isnull=False)
    rows += [
        (
            material.step(draw.step), f"draw of {draw.lot.code}", amount(draw.lot, draw.quantity),
            "ended; see the trace for what stands", "", str(draw.ended_by),
            material.when(draw.ended_at),
        )
        for draw in ended.select_related("step", "lot__item", "ended_by").order_by("pk")
    ]  # fmt: skip
    heads = ("Record", "What", "Old", "New", "Why", "By", "When")
    return Sheet("Corrections", heads, tuple(rows))


def draws_sheet(material: Material, title: str, *, back: bool) -> Sheet:
    """Return the trace one way."""
    rows = []
    for told in material.stories:
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
                    str(step.place or step.partner or ""),
                    material.when(step.started_at),
                )
            )
    heads = (
        "Traced lot", "Drawn lot", "Item", "Supplier's code", "As", "Amount", "Into", "Where",
        "When",
    )  # fmt: skip
    return Sheet(title, heads, tuple(rows))


def _contact(partner: Partner | None) -> Row:
    if partner is None:
        return ("over the counter", "", "", "")
    return (partner.name, partner.address, partner.phone, partner.email)


def sales_sheet(material: Material) -> Sheet:
    """Return who got what, when, by which document and carrier."""
    rows = []
    for told in material.stories:
        for link in told.forward.links:
            if link.role != DrawRole.SHIPPED:
                continue
            lot, step = told.lots[link.lot], told.steps[link.step]
            rows.append(
                (
                    material.when(step.started_at),
                    *_contact(step.partner),
                    step.document,
                    str(step.detail.get("carrier", "")),
                    lot.code,
                    lot.printed_code.text if lot.printed_code else "",
                    lot.item.name,
                    amount(lot, link.quantity),
                )
            )
    heads = (
        "When", "Customer", "Address", "Phone", "E-mail", "Document", "Carrier", "Lot",
        "Code on goods", "Item", "Quantity",
    )  # fmt: skip
    return Sheet("Sales", heads, tuple(sorted(set(rows))))


def suppliers_sheet(material: Material) -> Sheet:
    """Return what came from whom."""
    received = [step for step in material.steps.values() if step.kind == StepKind.RECEIVING]
    rows = [
        (
            material.when(step.started_at), *_contact(step.partner), step.document, lot.code,
            lot.supplier_code, lot.item.name, amount(lot, lot.made), details.sentence(step),
        )
        for step in sorted(received, key=lambda step: (step.started_at, step.pk))
        for lot in step.made_lots.select_related("item").order_by("pk")
    ]  # fmt: skip
    heads = (
        "When", "Supplier", "Address", "Phone", "E-mail", "Document", "Lot", "Supplier's code",
        "Item", "Quantity", "Details",
    )  # fmt: skip
    return Sheet("Received", heads, tuple(rows))


def records_sheet(material: Material) -> Sheet:
    """Return every record behind and ahead, with what was typed in it."""
    rows = [
        (
            step.get_kind_display(),
            str(step.place or ""),
            str(step.partner or ""),
            material.when(step.started_at),
            material.when(step.ended_at),
            str(step.recorded_by),
            material.when(step.recorded_at),
            "late entry" if step.late else "",
            "; ".join(part for part in (details.sentence(step), step.people, step.note) if part),
        )
        for step in sorted(material.steps.values(), key=lambda step: (step.started_at, step.pk))
    ]
    heads = (
        "Record", "Place", "Partner", "Started", "Ended", "Recorded by", "Recorded at", "Late",
        "Details",
    )  # fmt: skip
    return Sheet("Records", heads, tuple(rows))


def events_sheet(material: Material) -> Sheet:
    """Return the feeds, draw-offs and put-backs inside running steps."""
    found = StepEvent.objects.filter(step__in=material.steps).select_related("step", "recorded_by")
    rows = [
        (
            material.step(event.step), event.kind, material.when(event.at),
            "; ".join(f"{key}: {value}" for key, value in sorted(event.detail.items()) if value),
            str(event.recorded_by),
        )
        for event in found.order_by("at", "pk")
    ]  # fmt: skip
    heads = ("Record", "Event", "When", "Details", "Recorded by")
    return Sheet("Events", heads, tuple(rows), paper=False)


def cleaning_sheet(material: Material) -> Sheet:
    """Return the cleanings of the vessels involved."""
    places = {step.place_id for step in material.steps.values() if step.place_id}
    found = Step.objects.filter(kind=StepKind.CLEANING, place__in=places, voided_at=None)
    rows = [
        (
            str(step.place), material.when(step.started_at), details.sentence(step),
            str(step.recorded_by),
        )
        for step in found.select_related("place", "recorded_by").order_by("started_at", "pk")
    ]  # fmt: skip
    return Sheet("Cleaning", ("Vessel", "When", "What was done", "Recorded by"), tuple(rows))


def unposted_sheet(material: Material) -> Sheet:
    """Return the entries that touch these lots and could not be posted."""
    touched = {pk for told in material.stories for pk in told.lots}
    found = UnpostedEntry.objects.filter(lots__in=touched).distinct().order_by("happened_at")
    rows = [
        (
            entry.kind, material.when(entry.happened_at), entry.reason,
            entry.settled_as or "open", entry.settled_reason,
        )
        for entry in found
    ]  # fmt: skip
    heads = ("Entry", "Happened", "Why not posted", "Settled", "Reason")
    return Sheet("Not posted", heads, tuple(rows))

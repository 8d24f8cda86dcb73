"""Quantities and stories in sentences that can be read aloud."""

from collections.abc import Sequence
from datetime import date, datetime
from typing import NamedTuple
from zoneinfo import ZoneInfo

from lots.models import Facility, Lot, Place, PlaceKind, Step, StepKind
from lots.quantities.rounding import brix_of, fixed, volume_of
from lots.tracing.story import COUNTER, Story

_MADE = {
    StepKind.COLLECTION: "collected",
    StepKind.RECEIVING: "received",
    StepKind.OPENING_STOCK: "in the cellar",
    StepKind.CONCENTRATION: "concentrated",
    StepKind.BOIL: "boiled",
    StepKind.CONTENTS: "left in the pans",
    StepKind.FILTRATION: "filtered",
    StepKind.DRUM_FILL: "filled",
    StepKind.CONTAINER_FILL: "filled",
    StepKind.BLEND: "blended",
    StepKind.REHEAT: "heated again",
    StepKind.REWORK: "opened back to bulk",
    StepKind.CUSTOMER_RETURN: "come back",
    StepKind.SPLIT: "split off",
}


def amount_words(lot: Lot, quantity: int | None) -> str:
    """Return a quantity of a lot: pieces, or kilograms with gallons where the density is known."""
    if quantity is None:
        return "not measured"
    if lot.item.unit == "piece":
        return f"{quantity} piece{'' if abs(quantity) == 1 else 's'}"
    text = f"{fixed(quantity / 1_000_000, 1)} kg"
    if lot.made and lot.solids_made is not None:
        unit = lot.facility.volume_unit
        brix = float(brix_of(lot.made, lot.solids_made))
        text += f" ({fixed(volume_of(quantity, brix, unit), 1)} {unit})"
    return text


def local_day(moment: datetime, facility: Facility) -> date:
    """Return the day of a moment where the facility is."""
    return moment.astimezone(ZoneInfo(facility.zone)).date()


def day_words(day: date) -> str:
    """Return a day as it is said: 2 April 2026."""
    return f"{day.day} {day:%B %Y}"


def days_words(days: Sequence[date]) -> str:
    """Return some days as one says them: one, two, or from the first to the last."""
    found = sorted(set(days))
    if not found:
        return ""
    if len(found) == 1:
        return day_words(found[0])
    word = "and" if len(found) == 2 else "to"
    first, last = found[0], found[-1]
    start = f"{first.day} {first:%B}" if first.year == last.year else day_words(first)
    return f"{start} {word} {day_words(last)}"


def listed(names: Sequence[str]) -> str:
    """Return names as one says them: a, b and c."""
    if len(names) < 2:
        return "".join(names)
    return f"{', '.join(names[:-1])} and {names[-1]}"


def counted(number: int, word: str) -> str:
    """Return a number with its word: 1 customer, 9 customers."""
    return f"{number} {word}{'' if number == 1 else 's'}"


def lot_sentence(story: Story) -> str:
    """Return the first thing said of a lot: what it is, where it came from and where it is."""
    lot = story.lot
    name = lot.printed_code.text if lot.printed_code else lot.code
    what = amount_words(lot, lot.made)
    verb = _MADE.get(StepKind(lot.made_by.kind), "made")
    day = day_words(local_day(lot.made_at, lot.facility))
    parts = [f"{name}: {what} of {lot.item.name}, {verb} {day}{_boils(story)}."]
    if story.direction != "forward":
        parts += _behind(story)
    parts.append(_where(story))
    parts += _reached(story)
    account = story.accounting
    if account.unexplained:
        parts.append(f"{amount_words(lot, account.unexplained)} unexplained.")
    elif account.unexplained == 0:
        parts.append("All of it is accounted for.")
    else:
        parts.append("Its quantity is not settled yet.")
    return " ".join(parts)


def _boils(story: Story) -> str:
    lot = story.lot
    boils = [step for step in story.of_kind(StepKind.BOIL) if step.pk != lot.made_by_id]
    if not boils:
        return ""
    days = days_words([local_day(step.started_at, lot.facility) for step in boils])
    return f", from the boil of {days}" if len(boils) == 1 else f", from {len(boils)} boils, {days}"


def _behind(story: Story) -> list[str]:
    parts = []
    if story.woods:
        parts.append(f"Sap from {listed(story.woods)}.")
    if story.suppliers:
        parts.append(f"Bought in from {listed(story.suppliers)}.")
    return parts


def _where(story: Story) -> str:
    """Return where the lot itself is; what is nothing is left unsaid, but for all of it."""
    lot, account = story.lot, story.accounting
    told = [
        (account.shipped, "shipped"),
        (account.stock_total, "in store"),
        (account.removed, "removed"),
        (account.used, "used in later steps"),
    ]
    said = [f"{amount_words(lot, amount)} {words}" for amount, words in told if amount]
    if account.returned:
        said.append(f"{amount_words(lot, account.returned)} came back")
    return f"{', '.join(said)}." if said else "None of it is in store, and nothing has drawn on it."


def _reached(story: Story) -> list[str]:
    names = {one.customer for one in story.shipments if not one.returned}
    who = "It" if story.accounting.shipped else "What was made from it"
    return [f"{who} reached {buyers(names)}."] if names else []


def buyers(names: set[str]) -> str:
    """Return how many firms got something, and whether it was sold over the counter too."""
    firms = len(names - {COUNTER})
    told = [counted(firms, "customer")] if firms else []
    return listed([*told, "buyers over the counter"] if COUNTER in names else told)


class AccountRow(NamedTuple):
    """One line of the accounting: what, how much, and whether it is a sum or a part."""

    label: str
    amount: str
    kind: str = ""


def accounting_rows(story: Story) -> list[AccountRow]:
    """Return the accounting of a lot as lines that add up: what there was, and where it is."""
    lot, account = story.lot, story.accounting

    def row(label: str, amount: int | None, kind: str = "") -> AccountRow:
        return AccountRow(label, amount_words(lot, amount), kind)

    if account.made is None:
        rows = [row("Made", None)]
    else:
        rows = [
            row("Made", account.made),
            row("Adjusted", account.adjusted),
            row("To account for", account.made + account.adjusted, "total"),
        ]
    rows += [row(f"In stock, {name}", amount) for name, amount in account.in_stock.items()]
    if not account.in_stock:
        rows.append(row("In stock", 0))
    rows.append(row("Shipped", account.shipped))
    if account.returned:
        rows.append(row("of which came back, as a lot of its own", account.returned, "part"))
    rows += [
        row("Removed", account.removed),
        row("Used in later steps", account.used),
        row("Accounted for", account.known, "total"),
        row("Unexplained", account.unexplained, "total" if account.unexplained else ""),
    ]
    return rows


def bound_words(story: Story) -> list[str]:
    """Return in sentences how far back a vessel's earlier contents may reach into the lot."""
    hazard = story.follow == "all"
    what = "What could have touched this lot" if hazard else "What may be in this lot"
    done = "washed" if hazard else "emptied"
    told = [_break_words(story, step) for step in story.bounds]
    parts = [f"{what} is bounded by clean breaks: {'; '.join(told)}."] if told else []
    if story.bounded.open:
        names = _vessel_names(story.bounded.open)
        parts.append(
            f"Not recorded as {done} before first used here: {names}. What they held before the "
            "first record is unknown."
        )
    if not parts:
        parts.append("No vessel stands behind this lot, so nothing is carried over.")
    return parts


def _break_words(story: Story, step: Step) -> str:
    there = step.started_at.astimezone(ZoneInfo(story.lot.facility.zone))
    kind = step.detail.get("break", "cleaned")
    return f"{step.place} {kind} {day_words(there.date())}, {there:%H:%M}"


def _vessel_names(places: Sequence[Place]) -> str:
    """Return vessels by name; drums, of which there are many, by number."""
    drums = [one for one in places if one.kind == PlaceKind.DRUM]
    names = [one.name for one in places if one.kind != PlaceKind.DRUM]
    if len(drums) < 4:
        return listed([*names, *(one.name for one in drums)])
    return listed([*names, f"{len(drums)} drums"])


def checks_sentence(outcomes: Sequence[str]) -> str:
    """Return what a record's checks found together, as one sentence; empty without any."""
    if not outcomes:
        return ""
    parts = []
    for words, kinds in (
        ("passed", ("pass",)),
        ("borderline", ("borderline-pass",)),
        ("failed", ("fail", "borderline-fail")),
        ("not set", ("not-set",)),
    ):
        number = sum(outcome in kinds for outcome in outcomes)
        if number:
            parts.append(f"{number} {words}")
    count = len(outcomes)
    return f"{count} check{'' if count == 1 else 's'}: {', '.join(parts)}."

"""The tables of a trace: who got it, who supplied it, where and by whom it was made."""

from collections import defaultdict
from dataclasses import dataclass, field
from datetime import date

from lots.models import Lot, StepKind
from lots.tracing.cone import Link
from lots.tracing.story import Shipment, Story

from .words import amount_words, counted, days_words, listed, local_day


@dataclass
class CustomerRow:
    """What one customer got of one item."""

    name: str
    item: str
    amount: str
    came_back: str
    lots: list[Lot]
    days: str
    documents: str


@dataclass
class SupplierRow:
    """One lot that was bought in, with the supplier's own code and paper."""

    name: str
    lot: Lot
    day: date
    document: str


@dataclass
class Fact:
    """A word with what is told of it."""

    label: str
    told: list[str] = field(default_factory=list)


def customer_rows(shipments: list[Shipment]) -> list[CustomerRow]:
    """Return a row for each customer and item, with amounts, days and documents."""
    grouped: dict[tuple[str, str], list[Shipment]] = defaultdict(list)
    for one in shipments:
        grouped[one.customer, one.lot.item.name].append(one)
    rows = []
    for (name, item), lines in sorted(grouped.items()):
        sent = [one for one in lines if not one.returned]
        back = [one for one in lines if one.returned]
        lot = lines[0].lot
        unmeasured = sent and all(one.quantity is None for one in sent)
        total = None if unmeasured else sum(one.quantity or 0 for one in sent)
        lots = {one.lot.pk: one.lot for one in lines}
        days = [local_day(one.step.started_at, lot.facility) for one in sent]
        papers = dict.fromkeys(one.step.document for one in sent if one.step.document)
        rows.append(
            CustomerRow(
                name=name,
                item=item,
                amount=amount_words(lot, total),
                came_back=_came_back(back),
                lots=sorted(lots.values(), key=lambda one: one.code),
                days=days_words(days),
                documents=", ".join(papers),
            )
        )
    return rows


def _came_back(lines: list[Shipment]) -> str:
    if not lines:
        return ""
    lot = lines[0].lot
    days = days_words([local_day(one.step.started_at, lot.facility) for one in lines])
    return f"{amount_words(lot, sum(one.quantity or 0 for one in lines))} came back {days}"


def supplier_rows(story: Story) -> list[SupplierRow]:
    """Return a row for each received lot behind this one, itself among them."""
    behind = {link.lot for link in story.back.links} | {story.lot.pk}
    found = [story.lots[pk] for pk in behind]
    return [
        SupplierRow(
            str(lot.made_by.partner or "not recorded"),
            lot,
            local_day(lot.made_at, story.lot.facility),
            lot.made_by.document,
        )
        for lot in sorted(found, key=lambda one: (str(one.made_by.partner), one.made_at, one.pk))
        if lot.made_by.kind == StepKind.RECEIVING
    ]


def facts(story: Story) -> list[Fact]:
    """Return the woods, people and instruments behind a lot, each with how much and when."""
    facility = story.lot.facility
    woods: dict[str, list[date]] = defaultdict(list)
    for step in story.of_kind(StepKind.COLLECTION):
        woods[str(step.place or "not recorded")].append(local_day(step.started_at, facility))
    told = [
        f"{name}, {counted(len(days), 'collection')}, {days_words(days)}"
        for name, days in sorted(woods.items())
    ]
    people = [f"{name}, {counted(number, 'record')}" for name, number in story.records_of()]
    others = dict.fromkeys(step.people for step in story.back_steps if step.people)
    instruments = [
        f"{one.tag}, {counted(one.readings, 'reading')}, last "
        f"{days_words([local_day(one.last, facility)])}"
        for one in story.instruments_used
    ]
    return [
        Fact("Woods", told),
        Fact("Recorded by", people),
        Fact("Others named", [listed(list(others))] if others else []),
        Fact("Instruments", instruments),
    ]


def link_rows(story: Story, links: tuple[Link, ...]) -> list[dict[str, object]]:
    """Return the draws of a cone by time, with the lot, the step and the amount in words."""
    rows = []
    for link in sorted(links, key=lambda link: (story.steps[link.step].started_at, link.lot)):
        one = story.lots[link.lot]
        rows.append(
            {
                "lot": one,
                "step": story.steps[link.step],
                "role": link.role,
                "amount": amount_words(one, link.quantity),
            }
        )
    return rows

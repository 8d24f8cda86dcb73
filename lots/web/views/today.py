"""Today: what runs, what to record, what needs someone, and what is in the vessels."""

from datetime import datetime, timedelta

from django.http import HttpRequest, HttpResponse
from django.shortcuts import render
from django.utils import timezone

from lots.models import Facility, Hold, Lot, LotState, Place, Step
from lots.rules.roles import Action
from lots.web.access import allow, facility_of
from lots.web.screens import FORMS
from lots.web.words import amount_words

LONG = timedelta(hours=24)


@allow(Action.VIEW)
def today(request: HttpRequest, slug: str) -> HttpResponse:
    """Show the day: running steps first, then the forms, then what needs someone."""
    facility, now = facility_of(request), timezone.now()
    steps = Step.objects.filter(facility=facility, voided_at=None).select_related("place")
    running = list(steps.filter(ended_at=None).order_by("started_at"))
    holds = Hold.objects.filter(lot__facility=facility, ended_at=None)
    context = {
        "title": "Today",
        "now": now,
        "running": [(step, _since(step, now)) for step in running],
        "too_long": [step for step in running if now - step.started_at > LONG],
        "latest": steps.order_by("-started_at", "-pk")[:8],
        "screens": [(kind, form.title) for kind, form in FORMS.items()],
        "holds": holds.select_related("lot__item").order_by("placed_at"),
        "waiting": _waiting(facility),
        "unposted": facility.unposted.filter(settled_at=None).order_by("happened_at"),
        "vessels": _vessels(facility, now),
    }
    return render(request, "lots/today.html", context)


def _since(step: Step, now: datetime) -> str:
    """Return hours since the start, and minutes since the last event, in words."""
    hours, minutes = divmod(int((now - step.started_at).total_seconds()) // 60, 60)
    text = f"{hours} h {minutes} min since the start"
    last = step.events.order_by("-at", "-pk").first()
    if last is not None:
        quiet = int((now - last.at).total_seconds()) // 60
        text += f", {quiet} min since the last {last.kind}"
    return text


def _waiting(facility: Facility) -> int:
    """Return how many packed lots, not on hold, wait for a reading or a lead."""
    held = Hold.objects.filter(lot__facility=facility, ended_at=None).values("lot")
    rows = Lot.objects.filter(facility=facility, state=LotState.WAITING, item__kind="packed")
    return rows.filter(remaining__gt=0).exclude(pk__in=held).count()


def _vessels(facility: Facility, now: datetime) -> list[tuple[Place, str, int, str]]:
    """Return vessel, contents in words, percent full (or −1) and the age of the oldest."""
    places = (
        Place.objects.filter(facility=facility, stock__lot__item__unit="mg")
        .exclude(kind__in=["room", "woods", "drum"])
        .prefetch_related("stock__lot__item", "stock__lot__facility")
        .distinct()
        .order_by("kind", "name")
    )
    rows = []
    for place in places:
        held = [row for row in place.stock.all() if row.quantity or row.lot.made is None]
        if not held:
            continue
        largest = max(held, key=lambda row: row.quantity)
        total = sum(row.quantity for row in held)
        words = f"{largest.lot.item.name}, {amount_words(largest.lot, total)}"
        full = -1
        if place.capacity_ml:
            full = min(100, total // 1000 * 100 // place.capacity_ml)
        hours = int((now - min(row.lot.made_at for row in held)).total_seconds()) // 3600
        rows.append((place, words, full, f"{hours} h" if hours < 72 else f"{hours // 24} days"))
    return rows

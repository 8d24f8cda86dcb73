"""Looking: today, lots, vessels, trace, rules and the journal."""

from uuid import UUID

from django.contrib.auth.decorators import login_required
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.utils.safestring import mark_safe
from django_tables2 import RequestConfig

from lots.documents import picture
from lots.models import Hold, JournalEntry, Lot, Membership, Place, Step
from lots.recording import decisions
from lots.rules import rule_set
from lots.rules.regulators import REGULATORS
from lots.rules.roles import Action
from lots.tracing import find, story

from ..access import allow, facility_of, get_lot, public
from ..screens import FORMS
from ..tables import JournalTable, LotTable
from ..words import amount_words, lot_sentence


@public
@login_required
def home(request: HttpRequest) -> HttpResponse:
    """Go to the person's facility, or choose one."""
    members = Membership.objects.filter(user=request.user, active=True).select_related("facility")
    if len(members) == 1:
        return redirect("today", members[0].facility.slug)
    return render(request, "lots/home.html", {"members": members, "title": "Facilities"})


@allow(Action.VIEW)
def today(request: HttpRequest, slug: str) -> HttpResponse:
    """Show what runs, what to record, and what needs someone."""
    facility = facility_of(request)
    steps = Step.objects.filter(facility=facility, voided_at=None).select_related("place")
    context = {
        "title": "Today",
        "running": steps.filter(ended_at=None).order_by("started_at"),
        "latest": steps.order_by("-started_at", "-pk")[:8],
        "screens": [(kind, form.title) for kind, form in FORMS.items()],
        "holds": Hold.objects.filter(lot__facility=facility, ended_at=None)
        .select_related("lot__item")
        .order_by("placed_at"),
        "unposted": facility.unposted.filter(settled_at=None).order_by("happened_at"),
    }
    return render(request, "lots/today.html", context)


@allow(Action.VIEW)
def lots(request: HttpRequest, slug: str) -> HttpResponse:
    """List lots, by words and state."""
    facility = facility_of(request)
    words, state = request.GET.get("q", "").strip(), request.GET.get("state", "")
    rows = Lot.objects.filter(facility=facility)
    if words:
        rows = find.lots_by_code(facility, words) or rows.filter(item__name__icontains=words)
    if state:
        rows = rows.filter(state=state)
    rows = rows.select_related("item", "printed_code", "facility")
    table = LotTable(facility, rows)
    RequestConfig(request, paginate={"per_page": 25}).configure(table)
    context = {"table": table, "title": "Lots", "q": words, "state": state}
    return render(request, "lots/lots.html", context)


QUESTIONS = {
    "composition": "What is in it",
    "with-aids": "What is in it, with aids, packaging and cleaning agents",
    "all": "What could have touched it, residue included",
}


@allow(Action.VIEW)
def lot(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Show one lot: its story, checks, holds, and where it came from and went."""
    found = get_lot(request, uuid)
    question = request.GET.get("question", "with-aids")
    if question not in QUESTIONS:
        question = "with-aids"
    told = story.tell(found, question)
    context = {
        "lot": found,
        "title": found.code,
        "sentence": lot_sentence(told),
        "story": told,
        "questions": QUESTIONS.items(),
        "question": question,
        "picture": mark_safe(picture.svg(told)),  # noqa: S308 - escaped where it is made
        "back": _rows(told, told.back.links),
        "ahead": _rows(told, told.forward.links),
        "checks": found.checks.select_related("reading"),
        "readings": found.readings.select_related("instrument"),
        "holds": found.holds.select_related("placed_by", "ended_by").prefetch_related("actions"),
        "stock": [(name, amount_words(found, n)) for name, n in told.accounting.in_stock.items()],
        "remaining": amount_words(found, found.remaining),
        "shown": decisions.shown_hash(found),
        "descendants": decisions.descendants_in_stock(found),
    }
    return render(request, "lots/lot.html", context)


def _rows(told: story.Story, links: tuple) -> list[dict[str, object]]:
    rows = []
    for link in sorted(links, key=lambda link: told.steps[link.step].started_at):
        one = told.lots[link.lot]
        rows.append(
            {
                "lot": one,
                "step": told.steps[link.step],
                "role": link.role,
                "amount": amount_words(one, link.quantity),
            }
        )
    return rows


@allow(Action.TRACE)
def trace(request: HttpRequest, slug: str) -> HttpResponse:
    """Take any code and lead to its lot, or to the nearest ones."""
    facility = facility_of(request)
    words = request.GET.get("q", "").strip()
    found = list(find.lots_by_code(facility, words)[:50]) if words else []
    if len(found) == 1:
        return redirect("lot", slug, found[0].uuid)
    near = find.nearest(facility, words) if words and not found else []
    context = {"title": "Trace", "q": words, "found": found, "near": near}
    return render(request, "lots/trace.html", context)


@allow(Action.VIEW)
def vessels(request: HttpRequest, slug: str) -> HttpResponse:
    """Show what is in each vessel now, by the book."""
    rows = (
        Place.objects.filter(facility=facility_of(request), stock__isnull=False)
        .prefetch_related("stock__lot__item", "stock__lot__facility", "stock__lot__printed_code")
        .distinct()
        .order_by("kind", "name")
    )
    held = [
        (
            place,
            [
                (row.lot, amount_words(row.lot, row.quantity if row.lot.made else None))
                for row in place.stock.all()
                if row.quantity or row.lot.made is None
            ],
        )
        for place in rows
    ]
    context = {"title": "Vessels", "held": [(place, rows) for place, rows in held if rows]}
    return render(request, "lots/vessels.html", context)


@allow(Action.VIEW)
def rules(request: HttpRequest, slug: str) -> HttpResponse:
    """Show the limits in force with their sources, and who regulates."""
    rows = rule_set.load(facility_of(request).rule_set)
    context = {
        "title": "Rules",
        "rules": rows,
        "limits": sorted(rows.limits.items()),
        "regulators": REGULATORS.get(rows.jurisdiction, REGULATORS["US"]),
    }
    return render(request, "lots/rules.html", context)


@allow(Action.VIEW)
def journal(request: HttpRequest, slug: str) -> HttpResponse:
    """List the journal's entries."""
    facility = facility_of(request)
    rows = JournalEntry.objects.filter(chain=facility.chain).order_by("-seq")
    table = JournalTable(facility, rows)
    RequestConfig(request, paginate={"per_page": 50}).configure(table)
    return render(request, "lots/journal.html", {"table": table, "title": "Journal"})

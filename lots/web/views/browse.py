"""Looking: today, lots, vessels, rules and the journal."""

from django.contrib.auth.decorators import login_required
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django_tables2 import RequestConfig

from lots.models import Hold, JournalEntry, Lot, LotState, Membership, Place
from lots.rules import rule_set
from lots.rules.regulators import REGULATORS
from lots.rules.roles import Action
from lots.tracing import find

from ..access import allow, facility_of, public
from ..tables import JournalTable, LotTable
from ..words import amount_words


@public
@login_required
def home(request: HttpRequest) -> HttpResponse:
    """Go to the person's facility, or choose one."""
    members = Membership.objects.filter(user=request.user, active=True).select_related("facility")
    if len(members) == 1:
        return redirect("today", members[0].facility.slug)
    return render(request, "lots/home.html", {"members": members, "title": "Facilities"})


HELD = "held"


@allow(Action.VIEW)
def lots(request: HttpRequest, slug: str) -> HttpResponse:
    """List lots, by words and state."""
    facility = facility_of(request)
    words, state = request.GET.get("q", "").strip(), request.GET.get("state", "")
    rows = Lot.objects.filter(facility=facility)
    if words:
        rows = find.lots_by_words(facility, words)
    if state == HELD:
        rows = rows.filter(pk__in=Hold.objects.filter(ended_at=None).values("lot"))
    elif state in LotState.values:
        rows = rows.filter(state=state)
    rows = rows.select_related("item", "printed_code", "facility")
    table = LotTable(facility, rows)
    RequestConfig(request, paginate={"per_page": 25}).configure(table)
    states = [*LotState.choices, (HELD, "on hold")]
    context = {"table": table, "title": "Lots", "q": words, "state": state, "states": states}
    return render(request, "lots/lots.html", context)


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

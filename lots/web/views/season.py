"""A season's counts and totals."""

from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import render
from django.utils import timezone
from django.utils.safestring import mark_safe

from lots.documents import season_chart
from lots.rules.roles import Action
from lots.tracing import season as seasons

from .. import seasons as told
from ..access import allow, facility_of


@allow(Action.VIEW)
def season(request: HttpRequest, slug: str) -> HttpResponse:
    """Show what came in, what was made of it and what was sold, for one season."""
    facility = facility_of(request)
    known = seasons.years(facility)
    year = _year(request, known or [seasons.year_of(facility, timezone.now())])
    found = seasons.of_year(facility, year)
    chart = season_chart.svg(told.series(found, facility), f"Sap and syrup, season {year}")
    balance = told.balance_lines(found, facility)
    context = {
        "title": f"Season {told.title(found)}",
        "year": year,
        "years": known,
        "sentence": told.sentence(found, facility),
        "sap": [
            (row, told.amount_words(row.amount, facility), told.brix_words(row.amount))
            for row in found.sap
        ],
        "sap_total": (
            found.sap_total,
            told.amount_words(found.sap_total, facility),
            told.brix_words(found.sap_total),
        ),
        "facts": told.facts(found, facility),
        "products": told.product_lines(found, facility),
        "balance": balance,
        "sources": sorted({row.verdict.source for row in balance if row.verdict.limit}),
        "days": told.day_lines(found, facility),
        "chart": mark_safe(chart),  # noqa: S308 - escaped where its texts were set
    }
    return render(request, "lots/season.html", context)


def _year(request: HttpRequest, known: list[int]) -> int:
    """Return the season asked for; the latest where none is, 404 for one without records."""
    asked = request.GET.get("season", "")
    if not asked:
        return known[0]
    if not asked.isdecimal() or int(asked) not in known:
        raise Http404
    return int(asked)

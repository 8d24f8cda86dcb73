"""Counting a place: choose it, count what stands there, and set the book where it differs."""

from uuid import UUID

from django.contrib import messages
from django.core.paginator import Paginator
from django.db.models import Count, QuerySet
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from lots.models import Facility, LotState, Place, Step, Stock
from lots.recording._door import AlreadyRecorded
from lots.recording.errors import RecordingError
from lots.rules.roles import Action

from ..access import allow, context_of, facility_of
from ..forms.stock_take import StockTakeForm

A_PAGE = 100  # lots of one form


def _standing(facility: Facility) -> QuerySet[Stock]:
    """Return what stands anywhere by the book; what was never measured is not counted here."""
    rows = Stock.objects.filter(place__facility=facility, quantity__gt=0)
    return rows.exclude(lot__state=LotState.VOID).exclude(lot__made=None)


@allow(Action.RECORD)
def stock_takes(request: HttpRequest, slug: str) -> HttpResponse:
    """Offer the places in which something stands."""
    standing = _standing(facility_of(request))
    places = Place.objects.filter(stock__in=standing).annotate(lots=Count("stock"))
    context = {"title": "Stock-take", "places": places.order_by("kind", "name")}
    return render(request, "lots/stock_takes.html", context)


@allow(Action.RECORD)
def stock_take(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Count one place."""
    place = get_object_or_404(Place, facility=facility_of(request), uuid=uuid)
    rows = _standing(facility_of(request)).filter(place=place)
    rows = rows.select_related("place", "lot__item", "lot__printed_code", "lot__facility")
    page = Paginator(rows.order_by("lot__item__name", "lot__made_at", "lot_id"), A_PAGE).get_page(
        request.GET.get("page")
    )
    data = request.POST if request.method == "POST" else None
    form = StockTakeForm(facility_of(request), data, rows=list(page))
    if request.method == "POST" and form.is_valid():
        try:
            steps = form.record_counts(context_of(request, form.client()))
        except AlreadyRecorded:
            messages.info(request, "These counts were recorded before.")
            return redirect("stock-takes", slug)
        except RecordingError as error:
            form.refuse(error)
        else:
            messages.success(request, _said(place, form, steps))
            return redirect("stock-takes", slug)
    context = {"title": f"Stock-take of {place}", "place": place, "form": form, "page": page}
    return render(request, "lots/stock_take.html", context, status=422 if form.errors else 200)


def _said(place: Place, form: StockTakeForm, steps: list[Step]) -> str:
    """Return what a stock-take changed, in words."""
    same = len(form.counted()) - len(steps)
    parts = [f"{step.detail['lot']}" for step in steps]
    text = f"{place}: {same} as the book says"
    return f"{text}; recorded another count of {', '.join(parts)}." if parts else f"{text}."

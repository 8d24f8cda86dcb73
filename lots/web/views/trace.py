"""Tracing: a lot's page, its chain on paper, and the page that takes any code."""

from typing import Any
from uuid import UUID

from django.http import HttpRequest, HttpResponse
from django.shortcuts import render
from django.urls import reverse
from django.utils import timezone
from django.utils.safestring import mark_safe

from lots.documents import picture
from lots.models import Facility, Hold, Lot
from lots.recording import decisions
from lots.rules.roles import Action, Role, may
from lots.tracing import find, story

from .. import trails
from ..access import allow, facility_of, get_lot
from ..words import accounting_rows, amount_words, bound_words, buyers, listed, lot_sentence

QUESTIONS = {
    "composition": "What is in it",
    "with-aids": "What is in it, aids and packaging too",
    "all": "What could have touched it",
}
DIRECTIONS = {"both": "Back and forward", "back": "Back", "forward": "Forward"}
MOST_UNDER_A_CODE = 12


def _asked(request: HttpRequest) -> tuple[str, str]:
    """Return the question and the direction asked, each one that exists."""
    question = request.GET.get("question", "")
    direction = request.GET.get("direction", "")
    return (
        question if question in QUESTIONS else "with-aids",
        direction if direction in DIRECTIONS else "both",
    )


def _address(facility: Facility) -> picture.Url:
    return lambda lot: reverse("lot", args=[facility.slug, lot.uuid])


def told_context(told: story.Story, facility: Facility) -> dict[str, Any]:
    """Return what every page of a traced lot shows: sentence first, then tables and picture."""
    made = picture.draw(told, _address(facility))
    return {
        "lot": told.lot,
        "told": told,
        "sentence": lot_sentence(told),
        "accounting": accounting_rows(told),
        "customers": trails.customer_rows(told.shipments),
        "suppliers": trails.supplier_rows(told),
        "facts": trails.facts(told),
        "bounds": bound_words(told),
        "back": trails.link_rows(told, told.back.links),
        "ahead": trails.link_rows(told, told.forward.links),
        "unposted": told.unposted,
        "question": told.follow,
        "questions": QUESTIONS.items(),
        "direction": told.direction,
        # Escaped where its texts were set.
        "picture": {
            "svg": mark_safe(made.svg),  # noqa: S308
            "days": mark_safe(made.days),  # noqa: S308
            "width": made.width,
        },
    }


@allow(Action.VIEW)
def lot(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Show one lot: its story, checks, holds, and where it came from and went."""
    found = get_lot(request, uuid)
    question, _ = _asked(request)
    told = story.tell(found, question)
    context = told_context(told, facility_of(request)) | {
        "title": found.code,
        "checks": found.checks.select_related("reading"),
        "readings": found.readings.select_related("instrument"),
        "holds": found.holds.select_related("placed_by", "ended_by").prefetch_related("actions"),
        "shown": decisions.shown_hash(found),
        "descendants": _descendants(request, told),
    }
    return render(request, "lots/lot.html", context)


def _descendants(request: HttpRequest, told: story.Story) -> list[Lot]:
    """Return what was made of a lot and is in stock, for who may hold it."""
    if not may(Role(request.member.role), Action.HOLD):  # type: ignore[attr-defined]
        return []
    found = decisions.descendants_in_stock(told.lot)
    return [told.lots.get(one.pk, one) for one in found]


@allow(Action.VIEW)
def chain(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Show a lot's picture cut into pieces that fit a sheet."""
    found = get_lot(request, uuid)
    question, direction = _asked(request)
    told = story.tell(found, question, direction)
    pieces = [
        {"caption": sheet.caption, "svg": mark_safe(sheet.svg)}  # noqa: S308
        for sheet in picture.sheets(told)
    ]
    context = {
        "lot": found,
        "title": f"The chain of {found.code}",
        "sentence": lot_sentence(told),
        "sheets": pieces,
        "question": question,
        "words": QUESTIONS[question],
        "now": timezone.now(),
    }
    return render(request, "lots/chain.html", context)


@allow(Action.TRACE)
def trace(request: HttpRequest, slug: str) -> HttpResponse:
    """Take any code, in one direction or both, and answer with a sentence, tables and picture."""
    facility = facility_of(request)
    words = request.GET.get("q", "").strip()
    question, direction = _asked(request)
    every = list(find.lots_by_code(facility, words)) if words else []
    found = every[:MOST_UNDER_A_CODE]
    chosen = found[0] if len(found) == 1 else _chosen(request, every)
    context: dict[str, Any] = {
        "title": "Trace",
        "q": words,
        "found": found,
        "near": find.nearest(facility, words) if words and not found else [],
        "question": question,
        "questions": QUESTIONS.items(),
        "direction": direction,
        "directions": DIRECTIONS.items(),
        "may_packet": may(Role(request.member.role), Action.ISSUE_PACKET),  # type: ignore[attr-defined]
    }
    for one in every:
        one.facility = facility
    if len(found) > 1:
        context["several"] = _several(words, found) | {"more": len(every) - len(found)}
    if chosen is not None:
        told = story.tell(chosen, question, direction)
        context |= told_context(told, facility) | {"on_hold": chosen.pk in told.held}
    return render(request, "lots/trace.html", context)


def _chosen(request: HttpRequest, found: list[Lot]) -> Lot | None:
    """Return which of the lots under one code was picked."""
    asked = request.GET.get("lot", "")
    return next((one for one in found if str(one.uuid) == asked), None)


def _several(code: str, found: list[Lot]) -> dict[str, Any]:
    """Return what is said of all lots under one code: splits, returns, sizes of one run."""
    told = [story.tell(one, "composition", "forward") for one in found]
    held = set(Hold.objects.filter(lot__in=found, ended_at=None).values_list("lot", flat=True))
    shipments = {(one.step.pk, one.lot.pk): one for each in told for one in each.shipments}
    names = {one.customer for one in shipments.values() if not one.returned}
    items = dict.fromkeys(str(one.item) for one in found)
    reached = f"they reached {buyers(names)}" if names else "none was shipped"
    return {
        "sentence": f"{code} stands on {len(found)} lots of {listed(list(items))}; {reached}. "
        "Choose one to trace it.",
        "customers": trails.customer_rows(list(shipments.values())),
        "rows": [
            {
                "lot": one.lot,
                "made": amount_words(one.lot, one.lot.made),
                "stock": amount_words(one.lot, one.accounting.stock_total),
                "shipped": amount_words(one.lot, one.accounting.shipped),
                "held": one.lot.pk in held,
            }
            for one in told
        ],
    }

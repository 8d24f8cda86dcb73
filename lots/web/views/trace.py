"""Tracing: a lot's page, its chain on paper, and the page that takes any code."""

from typing import Any
from uuid import UUID

from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.urls import reverse
from django.utils import timezone
from django.utils.safestring import mark_safe

from lots.documents import picture
from lots.models import Facility, Lot
from lots.recording import decisions
from lots.rules.roles import Action
from lots.tracing import find, story

from ..access import allow, facility_of, get_lot
from ..words import amount_words, lot_sentence

QUESTIONS = {
    "composition": "What is in it",
    "with-aids": "What is in it, with aids, packaging and cleaning agents",
    "all": "What could have touched it, residue included",
}


def _question(request: HttpRequest) -> str:
    asked = request.GET.get("question", "")
    return asked if asked in QUESTIONS else "with-aids"


def _address(facility: Facility) -> picture.Url:
    return lambda lot: reverse("lot", args=[facility.slug, lot.uuid])


def drawn(told: story.Story, facility: Facility) -> dict[str, Any]:
    """Return the picture for a template; its texts were escaped where they were set."""
    made = picture.draw(told, _address(facility))
    return {
        "svg": mark_safe(made.svg),  # noqa: S308
        "days": mark_safe(made.days),  # noqa: S308
        "width": made.width,
    }


@allow(Action.VIEW)
def lot(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Show one lot: its story, checks, holds, and where it came from and went."""
    found = get_lot(request, uuid)
    question = _question(request)
    told = story.tell(found, question)
    context = {
        "lot": found,
        "title": found.code,
        "sentence": lot_sentence(told),
        "story": told,
        "questions": QUESTIONS.items(),
        "question": question,
        "picture": drawn(told, facility_of(request)),
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


@allow(Action.VIEW)
def chain(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Show a lot's picture cut into pieces that fit a sheet."""
    found = get_lot(request, uuid)
    question = _question(request)
    told = story.tell(found, question)
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
    found: list[Lot] = list(find.lots_by_code(facility, words)[:50]) if words else []
    if len(found) == 1:
        return redirect("lot", slug, found[0].uuid)
    near = find.nearest(facility, words) if words and not found else []
    context = {"title": "Trace", "q": words, "found": found, "near": near}
    return render(request, "lots/trace.html", context)

"""The page of one recorded act: what was recorded, what the checks found, and what is next."""

from datetime import timedelta
from typing import Any, NamedTuple
from uuid import UUID

from django.db.models import QuerySet
from django.http import HttpRequest, HttpResponse
from django.shortcuts import render
from django.urls import reverse
from django.utils import timezone

from lots.documents import details
from lots.models import Lot, PrintedCode, Step, StepKind
from lots.recording import decisions
from lots.recording.amend import FIELDS, waiting_for_division
from lots.rules.roles import Action, Role, may

from ..access import allow, get_step
from ..screens import FORMS, NEXT, RUNNING
from ..words import amount_words, checks_sentence

FRESH = timedelta(hours=1)  # as long as "next" is still of use to whoever recorded it


class Link(NamedTuple):
    """Somewhere to go next."""

    words: str
    url: str


@allow(Action.VIEW)
def step(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Show one recorded act."""
    found = get_step(request, uuid)
    made = list(
        found.made_lots.select_related("item", "printed_code", "facility").prefetch_related("holds")
    )
    checks = list(found.checks.select_related("lot").order_by("pk"))
    context = {
        "step": found,
        "title": found.get_kind_display(),
        "made": [(lot, amount_words(lot, lot.made)) for lot in made],
        "draws": found.draws.select_related("lot__item", "lot__printed_code", "ended_by"),
        "readings": found.readings.select_related("instrument"),
        "checks": checks,
        "found": checks_sentence([check.outcome for check in checks]),
        "events": found.events.order_by("at", "pk"),
        "amendments": found.amendments.select_related("by").order_by("at", "pk"),
        "fields": FIELDS,
        "waiting": waiting_for_division(found) if found.late else [],
        "acts": _acts(found),
        "details": details.rows(found),
        "reserved": _reserved(found),
        "together": _together(found),
        "has_tags": found.kind == StepKind.DRUM_FILL
        and found.voided_at is None
        and may(Role(request.member.role), Action.PRINT_LABEL),  # type: ignore[attr-defined]
        **_just_recorded(request, found, made),
    }
    return render(request, "lots/step.html", context)


def _just_recorded(request: HttpRequest, found: Step, made: list[Lot]) -> dict[str, Any]:
    """Return what is next after a fresh record, and until when it can be undone."""
    own = found.recorded_by == request.user and found.voided_at is None
    age = timezone.now() - found.recorded_at
    role = Role(request.member.role)  # type: ignore[attr-defined]
    fresh = age <= FRESH and found.voided_at is None and may(role, Action.RECORD)
    undo = own and age <= decisions.UNDO_WINDOW
    return {
        "next": _next(found, made) if fresh else [],
        "may_undo": undo,
        "undo_until": found.recorded_at + decisions.UNDO_WINDOW,
    }


def _next(found: Step, made: list[Lot]) -> list[Link]:
    """Return the usual next steps; a held lot comes first, a running step goes on here."""
    slug = found.facility.slug
    held = [lot for lot in made if any(hold.ended_at is None for hold in lot.holds.all())]
    links = [
        Link(f"{lot.code} is on hold: see why", reverse("lot", args=[slug, lot.uuid]))
        for lot in held
    ]
    if found.ended_at is None:
        return links
    kinds = NEXT.get(found.kind, ())
    links += [Link(FORMS[kind].title, reverse("record", args=[slug, kind])) for kind in kinds]
    if found.kind in FORMS and found.kind not in kinds:
        again = reverse("record", args=[slug, found.kind])
        links.append(Link(f"Another: {FORMS[found.kind].title}", again))
    return links


def _together(found: Step) -> QuerySet[Step]:
    """Return the other steps that the same form wrote."""
    others = Step.objects.filter(facility=found.facility, group=found.group)
    return others.exclude(pk=found.pk).order_by("pk") if found.group else Step.objects.none()


def _acts(found: Step) -> list[tuple[str, str]]:
    """Return what can be recorded inside a running step, with its title."""
    acts = RUNNING.get(found.kind, {}) if found.ended_at is None else {}
    return [(act, form.title) for act, form in acts.items()]


def _reserved(found: Step) -> str:
    """Return the code that an open fill reserved."""
    uuid = found.detail.get("printed_code")
    return PrintedCode.objects.get(uuid=uuid).text if uuid else ""

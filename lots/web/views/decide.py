"""Deciding: holds, releases, voids, and the people of a facility."""

from decimal import Decimal, InvalidOperation
from uuid import UUID

from django.contrib import messages
from django.db import transaction
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.views.decorators.http import require_POST

from lots.models import Hold, Membership, Step, UnpostedEntry
from lots.quantities.units import UnitError
from lots.recording import amend as corrections
from lots.recording import decisions, setup
from lots.recording.errors import RecordingError
from lots.recording.measures import Typed
from lots.rules.roles import Action, Role

from ..access import allow, context_of, facility_of, get_lot, get_step


def _said(request: HttpRequest, name: str) -> str:
    return request.POST.get(name, "").strip()


@allow(Action.HOLD)
@require_POST
def hold(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Hold a lot and what was made from it."""
    lot = get_lot(request, uuid)
    try:
        held = decisions.place_hold(
            context_of(request),
            lot=lot,
            reason=_said(request, "reason"),
            descendants="descendants" in request.POST,
            official="official" in request.POST,
        )
    except RecordingError as error:
        messages.error(request, error.message)
    else:
        messages.success(request, f"On hold: {len(held)} lot(s).")
    return redirect("lot", slug, lot.uuid)


@allow(Action.RELEASE)
@require_POST
def decide(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Complete the corrective action and end a hold by a signed decision."""
    found = get_object_or_404(Hold, uuid=uuid, lot__facility=facility_of(request))
    context = context_of(request)
    try:
        for action in found.actions.filter(completed_at=None):
            decisions.complete_action(
                context,
                action=action,
                cause=_said(request, "cause"),
                correction=_said(request, "correction"),
                prevention=_said(request, "prevention"),
                evaluation=_said(request, "evaluation"),
            )
        decisions.decide_hold(
            context,
            hold=found,
            decision=_said(request, "decision"),
            reason=_said(request, "reason"),
            shown=_said(request, "shown"),
            official_release=_said(request, "official_release"),
        )
    except RecordingError as error:
        messages.error(request, error.message)
    else:
        messages.success(request, "Decision signed.")
    return redirect("lot", slug, found.lot.uuid)


@allow(Action.RELEASE)
@require_POST
def release(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Release a waiting lot by a signed decision."""
    lot = get_lot(request, uuid)
    try:
        decisions.release_lot(
            context_of(request), lot=lot, reason=_said(request, "reason"),
            shown=_said(request, "shown"),
        )  # fmt: skip
    except RecordingError as error:
        messages.error(request, error.message)
    else:
        messages.success(request, f"{lot.code} is released.")
    return redirect("lot", slug, lot.uuid)


@allow(Action.AMEND)
@require_POST
def settle(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """End an unposted entry with a reason."""
    entry = get_object_or_404(UnpostedEntry, facility=facility_of(request), uuid=uuid)
    try:
        decisions.settle_unposted(
            context_of(request), entry=entry, settled_as=_said(request, "settled_as"),
            reason=_said(request, "reason"),
        )  # fmt: skip
    except RecordingError as error:
        messages.error(request, error.message)
    else:
        messages.success(request, "Settled.")
    return redirect("today", slug)


@allow(Action.AMEND)
@require_POST
def amend(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Correct a fact of a record."""
    step = get_step(request, uuid)
    try:
        corrections.amend_step(
            context_of(request), step=step, field=_said(request, "field"),
            new=_said(request, "new"), reason=_said(request, "reason"),
        )  # fmt: skip
    except RecordingError as error:
        messages.error(request, error.message)
    else:
        messages.success(request, "Corrected; the old value stays beside the new one.")
    return redirect("step", slug, step.uuid)


@allow(Action.AMEND)
@require_POST
def correct_amount(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Correct how much a lot's record made."""
    lot = get_lot(request, uuid)
    try:
        amount = Typed(Decimal(_said(request, "amount")), _said(request, "unit"))
        corrections.amend_amount(
            context_of(request), lot=lot, amount=amount, reason=_said(request, "reason")
        )
    except InvalidOperation:
        messages.error(request, "Enter a number, such as 42.5.")
    except (RecordingError, UnitError) as error:
        messages.error(request, str(error))
    else:
        messages.success(request, "Corrected; the old amount stays beside the new one.")
    return redirect("lot", slug, lot.uuid)


@allow(Action.RECORD)
@require_POST
def divide(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Divide later draws anew after a late record."""
    step = get_step(request, uuid)
    try:
        takes = corrections.divide_anew(context_of(request), step=step)
    except RecordingError as error:
        messages.error(request, error.message)
    else:
        messages.success(request, f"Divided anew: {len(takes)} later draw(s).")
    return redirect("step", slug, step.uuid)


@allow(Action.RECORD)
@require_POST
def void(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Void a record: a lead's act, or a recorder's own within two minutes.

    An undo takes back all that the same form wrote.
    """
    step = get_step(request, uuid)
    steps = [step]
    if "together" in request.POST and step.group:
        others = Step.objects.filter(facility=step.facility, group=step.group, voided_at=None)
        steps = list(others.order_by("-pk")) or steps
    try:
        with transaction.atomic():
            for one in steps:
                decisions.void_step(context_of(request), step=one, reason=_said(request, "reason"))
    except RecordingError as error:
        messages.error(request, error.message)
    else:
        messages.success(request, "The record is void; what it drew is back.")
    return redirect("step", slug, step.uuid)


@allow(Action.MANAGE_PEOPLE)
def people(request: HttpRequest, slug: str) -> HttpResponse:
    """List the people, and add one."""
    if request.method == "POST":
        try:
            setup.add_person(
                context_of(request),
                username=_said(request, "username"),
                password=request.POST.get("password", ""),
                role=Role(_said(request, "role")),
                full_name=_said(request, "full_name"),
            )
        except (RecordingError, ValueError) as error:
            messages.error(request, str(error))
        else:
            messages.success(request, "Added.")
            return redirect("people", slug)
    members = Membership.objects.filter(facility=facility_of(request)).select_related("user")
    context = {"title": "People", "members": members.order_by("pk"), "roles": list(Role)}
    return render(request, "lots/people.html", context)


@allow(Action.MANAGE_PEOPLE)
@require_POST
def person(request: HttpRequest, slug: str, uuid: UUID) -> HttpResponse:
    """Disable, enable or reset a person."""
    member = get_object_or_404(Membership, facility=facility_of(request), user__uuid=uuid)
    try:
        setup.change_person(
            context_of(request),
            member=member,
            active={"disable": False, "enable": True}.get(_said(request, "do")),
            password=request.POST.get("password", ""),
        )
    except RecordingError as error:
        messages.error(request, error.message)
    else:
        messages.success(request, "Changed.")
    return redirect("people", slug)

"""Who may see and do what: each view carries a policy, and fetching is authorising."""

from collections.abc import Callable
from functools import wraps
from typing import Any
from uuid import UUID

from django.contrib.auth.decorators import login_required
from django.core.exceptions import PermissionDenied
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404
from django.utils import timezone

from lots.models import AccessLog, Facility, Lot, Membership, Step
from lots.recording.context import Context
from lots.rules.roles import Action, Role, may

View = Callable[..., HttpResponse]


def allow(action: Action) -> Callable[[View], View]:
    """Let a view run for members whose role covers the action; others get 404 or 403."""

    def decorate(view: View) -> View:
        @login_required
        @wraps(view)
        def guarded(request: HttpRequest, slug: str, *args: Any, **kwargs: Any) -> HttpResponse:
            member = (
                Membership.objects.filter(facility__slug=slug, user=request.user, active=True)
                .select_related("facility__chain")
                .first()
            )
            if member is None:
                raise Http404
            if not may(Role(member.role), action):
                raise PermissionDenied
            request.facility = member.facility  # type: ignore[attr-defined]
            request.member = member  # type: ignore[attr-defined]
            if member.role == Role.INSPECTOR.value:
                AccessLog.objects.create(
                    facility=member.facility,
                    user=member.user,
                    path=request.path[:300],
                    at=timezone.now(),
                )
            return view(request, slug, *args, **kwargs)

        guarded.policy = action  # type: ignore[attr-defined]
        return guarded

    return decorate


def public(view: View) -> View:
    """Mark a view that needs no facility."""
    view.policy = None  # type: ignore[attr-defined]
    return view


def facility_of(request: HttpRequest) -> Facility:
    """Return the facility that the policy authorised."""
    found: Facility = request.facility  # type: ignore[attr-defined]
    return found


def context_of(request: HttpRequest, client: tuple[UUID, Any] | None = None) -> Context:
    """Return who records and where, and whether later draws may be divided anew."""
    return Context(
        facility_of(request),
        request.user,  # type: ignore[arg-type]
        client=client,
        redivide="redivide" in request.POST,
        accept_differences="difference" in request.POST,
    )


def get_lot(request: HttpRequest, uuid: UUID) -> Lot:
    """Return a lot of this facility; another facility's is 404."""
    rows = Lot.objects.select_related("item", "made_by__partner", "printed_code", "facility")
    return get_object_or_404(rows, facility=facility_of(request), uuid=uuid)


def get_step(request: HttpRequest, uuid: UUID) -> Step:
    """Return a step of this facility; another facility's is 404."""
    rows = Step.objects.select_related("place", "partner", "recorded_by")
    return get_object_or_404(rows, facility=facility_of(request), uuid=uuid)

"""What stands in the head of every page."""

from typing import Any

from django.http import HttpRequest
from django.urls import reverse

from lots.rules.roles import Action, Role, may

PAGES = (
    ("Today", "today", Action.VIEW),
    ("Lots", "lots", Action.VIEW),
    ("Vessels", "vessels", Action.VIEW),
    ("Trace", "trace", Action.TRACE),
    ("Season", "season", Action.VIEW),
    ("Packets", "packets", Action.ISSUE_PACKET),
    ("Places", "register", Action.RECORD, "places"),
    ("Materials", "register", Action.RECORD, "materials"),
    ("Partners", "register", Action.RECORD, "partners"),
    ("Instruments", "instruments", Action.VIEW),
    ("People", "people", Action.MANAGE_PEOPLE),
    ("Settings", "settings", Action.MANAGE_SETTINGS),
    ("Rules", "rules", Action.VIEW),
    ("Journal", "journal", Action.VIEW),
)


def navigation(request: HttpRequest) -> dict[str, Any]:
    """Return the facility and the links for the base template."""
    facility = getattr(request, "facility", None)
    if facility is None:
        return {}
    member = request.member  # type: ignore[attr-defined]
    links = [
        (label, reverse(name, args=[facility.slug, *rest]))
        for label, name, action, *rest in PAGES
        if may(Role(member.role), action)
    ]
    return {
        "facility": facility,
        "member": member,
        "nav": [(label, url, request.path == url) for label, url in links],
        "regulators_url": reverse("rules", args=[facility.slug]),
    }

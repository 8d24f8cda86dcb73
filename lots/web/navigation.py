"""What stands in the head of every page."""

from typing import Any

from django.http import HttpRequest
from django.urls import reverse

PAGES = (
    ("Today", "today"),
    ("Lots", "lots"),
    ("Vessels", "vessels"),
    ("Trace", "trace"),
    ("People", "people"),
    ("Rules", "rules"),
    ("Journal", "journal"),
)


def navigation(request: HttpRequest) -> dict[str, Any]:
    """Return the facility and the links for the base template."""
    facility = getattr(request, "facility", None)
    if facility is None:
        return {}
    links = [(label, reverse(name, args=[facility.slug])) for label, name in PAGES]
    return {
        "facility": facility,
        "member": request.member,  # type: ignore[attr-defined]
        "nav": [(label, url, request.path == url) for label, url in links],
        "regulators_url": reverse("rules", args=[facility.slug]),
    }

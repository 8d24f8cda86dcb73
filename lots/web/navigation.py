"""What stands in the head of every page."""

from typing import Any

from django.http import HttpRequest


def navigation(request: HttpRequest) -> dict[str, Any]:
    """Return the facility and the links for the base template."""
    return {}

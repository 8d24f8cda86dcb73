"""Short names for typing forms: addresses, amounts with their units, and what a page says."""

from uuid import uuid4

from django.urls import reverse


def url(house, name, *args):
    """Return the address of a page of the house."""
    return reverse(name, args=[house.facility.slug, *args])


def measure(name, number, unit="US gal"):
    """Return a number and its unit as a form sends them."""
    return {f"{name}_0": number, f"{name}_1": unit}


def typed(at="2026-04-02T18:00", **fields):
    """Return a form's content with an id of its own."""
    return {"client_id": uuid4(), "at": at, **fields}


def errors(answer):
    """Return the errors of an answered form."""
    assert answer.status_code == 422, answer.headers.get("Location")
    return answer.context["form"].errors

"""What a form asks back: which of two hours, and whether a gauge difference is taken."""

from datetime import UTC, datetime
from uuid import uuid4

import pytest
from django.urls import reverse

from lots.models import Step

pytestmark = pytest.mark.django_db


def sap_form(house, at):
    return {
        "client_id": uuid4(), "at": at, "woods": house.places["North woods"].pk,
        "tank": house.places["Tank 1"].pk, "amount_0": "400", "amount_1": "US gal",
    }  # fmt: skip


def test_the_hour_that_came_twice_is_asked(client, house):
    # New York set its clocks back at 02:00 on 1 November 2026: 01:30 came at 05:30 and 06:30 UTC.
    client.force_login(house.recorder)
    page = reverse("record", args=[house.facility.slug, "collection"])
    form = sap_form(house, "2026-11-01T01:30")
    asked = client.post(page, form)
    assert asked.status_code == 422
    assert "came twice" in asked.content.decode()

    client.post(page, {**form, "which_hour": "second"})

    assert Step.objects.get(kind="collection").started_at == datetime(
        2026, 11, 1, 6, 30, tzinfo=UTC
    )


def test_the_hour_that_never_came_is_refused(client, house):
    client.force_login(house.recorder)
    page = reverse("record", args=[house.facility.slug, "collection"])
    answer = client.post(page, sap_form(house, "2026-03-08T02:30"))
    assert answer.status_code == 422
    assert "went forward" in answer.content.decode()


def test_a_gauge_difference_is_taken_by_its_button(client, house):
    house.collect("100")
    client.force_login(house.recorder)
    page = reverse("record", args=[house.facility.slug, "transfer"])
    form = {
        "client_id": uuid4(), "at": "2026-04-02T13:00", "source_1": house.places["Tank 1"].pk,
        "taken_1_0": "103", "taken_1_1": "US gal", "into": house.places["Batch tank"].pk,
    }  # fmt: skip
    offered = client.post(page, form)
    assert "Take all and record the difference" in offered.content.decode()

    assert client.post(page, {**form, "difference": "1"}).status_code == 302
    assert Step.objects.get(kind="transfer").adjustments.get().quantity > 0

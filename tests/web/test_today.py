"""Today: running steps with their hours, what needs someone, what is in the vessels."""

from datetime import timedelta

import pytest
from django.urls import reverse
from django.utils import timezone

from lots.recording import boil
from lots.recording.context import Context
from tests.factories import gallons

pytestmark = pytest.mark.django_db


def test_a_long_running_boil_is_named_with_its_hours_and_the_vessels_with_their_contents(
    client, house
):
    start = timezone.now() - timedelta(hours=30)
    house.collect("400")
    boil.open_boil(
        Context(house.facility, house.recorder, now=start), at=start,
        evaporator=house.places["Evaporator"],
    )  # fmt: skip
    tank = house.places["Tank 1"]
    tank.capacity_ml = 3_000_000
    tank.save()
    client.force_login(house.recorder)

    page = client.get(reverse("today", args=[house.facility.slug])).content.decode()

    assert "30 h 0 min since the start" in page
    assert "open over 24 h" in page
    assert "400.0 US gal" in page
    assert "50 % full" in page
    assert gallons("1").unit == "US gal"


def test_a_packed_lot_that_waits_is_counted(client, house):
    house.jars(density="67.0")
    client.force_login(house.lead)
    page = client.get(reverse("today", args=[house.facility.slug])).content.decode()
    assert "1 packed lot" in page

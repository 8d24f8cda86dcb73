"""Registers on screen: a row is changed, put out of use, and never another facility's."""

import pytest
from django.urls import reverse

from tests.factories import sugarhouse

pytestmark = pytest.mark.django_db


def change(house, name, row):
    return reverse("change", args=[house.facility.slug, name, row.uuid])


def test_a_place_is_put_out_of_use(client, house):
    client.force_login(house.recorder)
    tank = house.places["Tank 2"]
    page = change(house, "places", tank)
    assert 'value="Tank 2"' in client.get(page).content.decode()

    client.post(page, {"name": "Tank 2, old", "kind": "tank"})

    tank.refresh_from_db()
    assert (tank.name, tank.active) == ("Tank 2, old", False)
    listed = reverse("register", args=[house.facility.slug, "places"])
    assert "out of use" in client.get(listed).content.decode()


def test_a_kind_that_has_lots_stays_and_the_form_says_so(client, house):
    house.receive_aid()
    client.force_login(house.recorder)
    page = change(house, "materials", house.items["aid"])
    answer = client.post(page, {"name": "Filter aid", "kind": "cleaner", "active": "on"})
    assert answer.status_code == 422
    assert "its kind stays" in answer.content.decode()


def test_another_facilitys_partner_is_not_found(client, house):
    other = sugarhouse("other-place")
    client.force_login(house.owner)
    assert client.get(change(house, "partners", other.customer)).status_code == 404

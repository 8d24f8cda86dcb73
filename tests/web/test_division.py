"""Late entries on screen: named, confirmed, divided anew."""

from uuid import uuid4

import pytest
from django.urls import reverse

from lots.models import Step

pytestmark = pytest.mark.django_db


def url(house, name, *args):
    return reverse(name, args=[house.facility.slug, *args])


def test_a_late_draw_is_confirmed_in_its_form(client, house):
    house.collect("100")
    house.boil(hours=5)
    client.force_login(house.recorder)
    form = {
        "client_id": uuid4(), "at": "2026-04-02T12:30",
        "source_1": house.places["Tank 1"].pk, "taken_1_0": "40", "taken_1_1": "US gal",
        "into": house.places["Batch tank"].pk,
    }  # fmt: skip
    refused = client.post(url(house, "record", "transfer"), form)
    assert refused.status_code == 422
    assert "divide the later draws anew" in refused.content.decode()

    recorded = client.post(url(house, "record", "transfer"), {**form, "redivide": "1"})

    assert recorded.status_code == 302
    transfer, boil = Step.objects.get(kind="transfer"), Step.objects.get(kind="boil")
    sap = transfer.draws.get(ended_at=None).lot
    assert transfer.draws.get(ended_at=None).quantity + boil.draws.get(
        ended_at=None, lot=sap, role="ingredient"
    ).quantity == sap.made  # fmt: skip


def test_late_sap_is_divided_from_its_page(client, house):
    house.collect("100")
    house.boil(hours=5)
    client.force_login(house.recorder)
    client.post(
        url(house, "record", "collection"),
        {
            "client_id": uuid4(), "at": "2026-04-02T12:30", "woods": house.places["South woods"].pk,
            "tank": house.places["Tank 1"].pk, "amount_0": "50", "amount_1": "US gal",
        },
    )  # fmt: skip
    late = Step.objects.filter(kind="collection").latest("pk")
    assert "Later draws" in client.get(url(house, "step", late.uuid)).content.decode()

    client.post(url(house, "divide", late.uuid))

    assert late.made_lots.get().remaining == 0
    assert "Later draws" not in client.get(url(house, "step", late.uuid)).content.decode()


def test_the_same_form_id_with_another_condition_is_a_conflict(client, house):
    client.force_login(house.recorder)
    form = {
        "client_id": uuid4(), "at": "2026-04-02T12:30", "supplier": house.supplier.pk,
        "item": house.items["aid"].pk, "amount_0": "5", "amount_1": "lb",
        "place": house.places["Store"].pk, "decision": "accept", "condition": "dry",
    }  # fmt: skip
    assert client.post(url(house, "record", "receiving"), form).status_code == 302
    changed = client.post(url(house, "record", "receiving"), {**form, "condition": "wet"})
    assert changed.status_code == 422
    assert "recorded before with other content" in changed.content.decode()

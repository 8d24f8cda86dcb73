"""Lists and the head of every page: titles, the facility's clock, what is left, the password."""

import pytest
from django.urls import reverse

pytestmark = pytest.mark.django_db


def page(client, house, name, **asked):
    client.force_login(house.recorder)
    return client.get(reverse(name, args=[house.facility.slug]), asked).content.decode()


@pytest.mark.parametrize(
    ("name", "title"), [("lots", "Lots"), ("journal", "Entries of the journal")]
)
def test_a_list_has_its_title_as_caption_and_region(client, house, name, title):
    house.collect()

    text = page(client, house, name)

    assert f"<caption>{title}</caption>" in text
    assert f'aria-label="{title}"' in text


def test_times_are_by_the_clock_of_the_facility(client, house):
    house.collect()  # 2 April, 16:00 UTC is noon in New York, EDT

    assert "2 Apr 2026, 12:00" in page(client, house, "lots")
    assert "2 Apr 2026, 12:00" in page(client, house, "journal")


def test_an_empty_lot_says_none_left_and_an_unmeasured_one_says_so(client, house):
    house.collect()
    house.boil()

    rows = page(client, house, "lots", q="Sap")

    assert "none left" in rows
    assert "0.0 kg" not in rows


def test_a_lot_that_was_not_measured_says_so(client, house):
    from lots.recording import sap

    sap.record_collection(
        house.context(), at=house.at(), woods=house.places["North woods"],
        tank=house.places["Tank 1"], item=house.items["sap"], not_measured_reason="no gauge",
    )  # fmt: skip

    assert "not measured" in page(client, house, "lots")


def test_a_message_is_a_list_within_a_status(client, house):
    client.force_login(house.owner)
    register = reverse("register", args=[house.facility.slug, "places"])

    text = client.post(register, {"name": "Tank 9", "kind": "tank"}, follow=True).content.decode()

    assert '<div role="status"><ul class="messages">' in text


def test_everyone_finds_where_to_change_the_password(client, house):
    assert f'href="{reverse("password_change")}">Change password<' in page(client, house, "today")
    assert client.get(reverse("password_change")).status_code == 200

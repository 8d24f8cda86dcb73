"""The register of instruments: who may add one, and what was read with each."""

import pytest
from django.urls import reverse

from lots.models import Instrument, JournalEntry

pytestmark = pytest.mark.django_db
TYPED = {"tag": "H-1", "kind": "hydrometer", "marked": "60F"}


@pytest.fixture
def page(house):
    return reverse("instruments", args=[house.facility.slug])


def test_a_recorder_registers_an_instrument_once(client, house, page):
    client.force_login(house.recorder)
    assert client.post(page, TYPED).status_code == 302
    tool = Instrument.objects.get()
    assert (tool.tag, tool.kind, tool.reference_celsius, tool.compensates) == (
        "H-1", "hydrometer", 15.56, False,
    )  # fmt: skip
    assert JournalEntry.objects.filter(label__contains="H-1").exists()

    again = client.post(page, TYPED)
    assert again.status_code == 422
    assert "H-1 is registered already." in again.content.decode()
    assert Instrument.objects.count() == 1


def test_each_shows_how_often_it_read_and_when_last(client, house, page):
    jars = house.jars()
    client.force_login(house.recorder)
    client.post(page, TYPED)
    assert "none yet" in client.get(page).content.decode()

    reading = jars.readings.filter(kind="brix").get()
    reading.instrument = Instrument.objects.get()
    reading.save(update_fields=["instrument"])
    text = client.get(page).content.decode()
    assert '<td class="num">1</td>' in text
    assert "2 Apr 2026, 18:00" in text  # 22:00 UTC where the facility is


def test_an_inspector_looks_and_does_not_add(client, house, page):
    client.force_login(house.inspector)
    answer = client.get(page)
    assert answer.status_code == 200
    assert "<h2>Add</h2>" not in answer.content.decode()
    assert client.post(page, TYPED).status_code == 403
    assert not Instrument.objects.exists()


@pytest.mark.parametrize(
    "changed", [{"tag": ""}, {"tag": "x" * 41}, {"kind": "spoon"}, {"marked": "hot"},
                {"tag": "a\x00b"}],
)  # fmt: skip
def test_bad_input_is_named(client, house, page, changed):
    client.force_login(house.recorder)
    answer = client.post(page, {**TYPED, **changed})
    assert answer.status_code == 422
    assert 'class="error"' in answer.content.decode()
    assert not Instrument.objects.exists()

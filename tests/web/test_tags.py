"""Tags for drums: one a drum, black on white, with a code that leads to the lot."""

import re

import pytest

from lots.models import JournalEntry
from lots.recording import syrup
from lots.recording._sources import FromVessel
from lots.recording.measures import NOT_MEASURED, Typed
from tests.factories import brix, fahrenheit, gallons
from tests.web.tools import url

pytestmark = pytest.mark.django_db


@pytest.fixture
def drums(house):
    """Two drums of one filling, the second of unknown weight."""
    house.collect()
    house.boil()
    house.filter()
    return syrup.record_drum_fill(
        house.context(hours=6), at=house.at(6), sources=[FromVessel(house.places["Canner"])],
        drums=[
            syrup.Drum(house.places["Drum 1"], gallons("4"), fahrenheit("188"), "S-17"),
            syrup.Drum(house.places["Drum 2"], NOT_MEASURED, fahrenheit("187")),
        ],
        item=house.items["syrup"], brix=brix("67.2"), transmittance=Typed(None),
    )  # fmt: skip


def test_each_drum_has_its_tag(client, house, drums):
    client.force_login(house.recorder)

    page = client.get(url(house, "tags", drums.uuid)).content.decode()

    tags = re.findall(r'<article class="tag".*?</article>', page, re.DOTALL)
    first, second = drums.made_lots.order_by("pk")
    assert len(tags) == 2
    for text in (first.code, "Syrup", "2 Apr 2026, 18:00", "Drum 1", "S-17",
                 house.facility.name, "Fictional demonstration data"):  # fmt: skip
        assert text in tags[0]
    # 4 US gal × 3.785411784 L × 1.3307 kg/L (67.2 °Brix at 20 °C, ICUMSA) = 20.1 kg = 44.4 lb.
    assert re.search(r"44\.\d lb \(20\.\d kg\)", tags[0])
    assert "not measured" in tags[1]
    assert second.code in tags[1]


def test_the_code_on_the_tag_is_plain_svg_without_style(client, house, drums):
    client.force_login(house.recorder)

    answer = client.get(url(house, "tags", drums.uuid))

    page = answer.content.decode()
    assert page.count("<svg") >= 2
    assert "style=" not in page
    assert "unsafe-inline" not in answer.headers["Content-Security-Policy"]


def test_a_tag_records_nothing(client, house, drums):
    client.force_login(house.recorder)
    before = JournalEntry.objects.count()

    client.get(url(house, "tags", drums.uuid))

    assert JournalEntry.objects.count() == before


def test_the_page_of_the_filling_leads_to_its_tags_and_no_other_step_has_any(client, house, drums):
    client.force_login(house.recorder)
    tags = url(house, "tags", drums.uuid)

    assert tags in client.get(url(house, "step", drums.uuid)).content.decode()
    boil = house.facility.steps.get(kind="boil")
    assert client.get(url(house, "tags", boil.uuid)).status_code == 404


def test_an_inspector_prints_no_tag(client, house, drums):
    client.force_login(house.inspector)

    assert client.get(url(house, "tags", drums.uuid)).status_code == 403

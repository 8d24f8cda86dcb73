"""The settings: the owner alone changes them, and no pattern stands that cannot be printed."""

import pytest
from django.urls import reverse

from lots.models import Facility, JournalEntry
from lots.web.forms.settings import FIELDS, SettingsForm

pytestmark = pytest.mark.django_db


@pytest.fixture
def page(house, client):
    client.force_login(house.owner)
    return reverse("settings", args=[house.facility.slug])


def typed(house, **changed):
    house.facility.refresh_from_db()
    fields = {name: getattr(house.facility, name) for name in FIELDS}
    if not fields.pop("release_needs_person"):
        return fields | changed
    return fields | {"release_needs_person": "on"} | changed


def test_the_owner_changes_what_is_different_and_the_journal_keeps_it(client, house, page):
    answer = client.post(
        page,
        typed(
            house, name="Maple Ridge North (fictional)", rule_set="canada", volume_unit="L",
            zone="America/Toronto", season_start_month="10", code_pattern="{YY}{DDD}-{SEQ}",
            release_needs_person="on", gauge_tolerance_percent="3",
        ),
    )  # fmt: skip
    assert answer.status_code == 302
    found = Facility.objects.get(pk=house.facility.pk)
    assert (found.name, found.rule_set, found.volume_unit) == (
        "Maple Ridge North (fictional)", "canada", "L",
    )  # fmt: skip
    assert (found.zone, found.season_start_month, found.code_pattern) == (
        "America/Toronto", 10, "{YY}{DDD}-{SEQ}",
    )  # fmt: skip
    assert found.release_needs_person
    assert found.gauge_tolerance_percent == 3
    label = JournalEntry.objects.filter(chain=found.chain).latest("seq").label
    assert "rule_set" in label
    assert "address" not in label


def test_nothing_different_writes_nothing(client, house, page):
    before = JournalEntry.objects.count()
    assert client.post(page, typed(house)).status_code == 302
    assert JournalEntry.objects.count() == before


@pytest.mark.parametrize(
    ("pattern", "words"),
    [
        ("LOT{YY}{DDD}", "needs {SEQ} or {LETTER}"),
        ("L{YEAR}{SEQ}", "may use"),
        ("O{YY}{DDD}{SEQ}", "which cannot be printed"),
        ("SYRUP{YY}{DDD}{SEQ}", "which cannot be printed"),
        ("SAP{YY}{DDD}{LETTER}{LETTER}", "which cannot be printed"),
        ("{YY}{DDD}{", "may use"),
        ("", "required"),
    ],
)
def test_a_pattern_whose_code_cannot_be_printed_is_refused(client, house, page, pattern, words):
    answer = client.post(page, typed(house, code_pattern=pattern))
    assert answer.status_code == 422
    assert words in answer.content.decode()
    assert Facility.objects.get(pk=house.facility.pk).code_pattern == "S{YY}{DDD}{LETTER}"


def test_a_pattern_is_kept_as_it_would_be_printed(house):
    form = SettingsForm(house.facility, typed(house, code_pattern=" b{yy}{ddd}{letter} "))
    assert form.is_valid()
    assert form.cleaned_data["code_pattern"] == "B{YY}{DDD}{LETTER}"


@pytest.mark.parametrize(
    "changed",
    [
        {"zone": "Mars/Olympus"}, {"rule_set": "atlantis"}, {"volume_unit": "gal"},
        {"season_start_month": "13"}, {"gauge_tolerance_percent": "90"}, {"name": ""},
        {"gauge_tolerance_percent": "-1"}, {"name": "a\x00b"},
    ],
)  # fmt: skip
def test_bad_input_is_named_and_changes_nothing(client, house, page, changed):
    answer = client.post(page, typed(house, **changed))
    assert answer.status_code == 422
    assert 'class="error"' in answer.content.decode()
    found = Facility.objects.get(pk=house.facility.pk)
    assert all(getattr(found, name) == getattr(house.facility, name) for name in FIELDS)


@pytest.mark.parametrize("who", ["lead", "recorder", "inspector"])
def test_no_one_else_may(client, house, page, who):
    client.force_login(getattr(house, who))
    assert client.get(page).status_code == 403
    assert client.post(page, typed(house, name="Mine")).status_code == 403
    text = client.get(reverse("today", args=[house.facility.slug])).content.decode()
    assert page not in text


def test_a_zone_from_elsewhere_stays_among_the_choices(client, house, page):
    Facility.objects.filter(pk=house.facility.pk).update(zone="Europe/Zurich")
    assert '<option value="Europe/Zurich" selected>' in client.get(page).content.decode()

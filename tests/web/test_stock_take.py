"""A stock-take: every lot of a place, only what differs is recorded, all of it or none."""

import pytest

from lots.models import JournalEntry, Step
from lots.tracing import verify
from lots.web.words import amount_words
from tests.web.tools import errors, measure, typed, url

pytestmark = pytest.mark.django_db


@pytest.fixture
def store(house):
    """Twenty jars, some filter aid, and more syrup in the canner."""
    house.jars()
    return house.places["Store"]


def named(lot):
    return f"counted_{lot.uuid.hex}"


def counts(house, **given):
    """Return a count of each lot given as (lot, number, unit)."""
    form = typed("2026-04-02T20:00", reason="Monthly stock-take")
    for lot, number, unit in given.values():
        form |= measure(named(lot), number, unit)
    return form


@pytest.fixture
def recorder(client, house):
    client.force_login(house.recorder)
    return client


def jars_and_aid(store):
    rows = {row.lot.item.kind: row.lot for row in store.stock.select_related("lot__item")}
    return rows["packed"], rows["filter-aid"]


def test_places_with_something_in_them_are_offered(recorder, house, store):
    page = recorder.get(url(house, "stock-takes")).content.decode()

    assert url(house, "stock-take", store.uuid) in page
    assert url(house, "stock-take", house.places["Tank 2"].uuid) not in page


def test_every_lot_that_stands_there_is_asked_with_what_the_book_holds(recorder, house, store):
    page = recorder.get(url(house, "stock-take", store.uuid)).content.decode()

    for lot in jars_and_aid(store):
        assert lot.code in page
        assert f"By the book: {amount_words(lot, lot.remaining)}" in page


def test_only_what_differs_is_recorded(recorder, house, store):
    jars, aid = jars_and_aid(store)
    # 49 lb of the 50 were left by the press; to the decimals typed that is what the book says.
    form = counts(house, jars=(jars, "19", "pieces"), aid=(aid, "49.0", "lb"))

    answer = recorder.post(url(house, "stock-take", store.uuid), form, follow=True)

    step = Step.objects.get(kind="adjustment")
    assert step.detail["counted"] == 19
    assert step.detail["reason"] == "Monthly stock-take"
    jars.refresh_from_db()
    assert jars.remaining == 19
    said = answer.content.decode()
    assert f"Store: 1 as the book says; recorded another count of {jars.code}." in said
    assert list(verify.ledger_faults()) == []


def test_counts_as_the_book_says_record_nothing(recorder, house, store):
    jars, _ = jars_and_aid(store)
    before = JournalEntry.objects.count()

    form = counts(house, jars=(jars, "20", "pieces"))
    answer = recorder.post(url(house, "stock-take", store.uuid), form, follow=True)

    assert "Store: 1 as the book says." in answer.content.decode()
    assert JournalEntry.objects.count() == before


@pytest.mark.parametrize(
    ("number", "words"),
    [("-1", "below zero"), ("19.5", "whole pieces"), ("many", "Enter a number"), ("12", "lead")],
)
def test_a_slip_stands_beside_its_lot_and_no_count_is_written(
    recorder, house, store, number, words
):
    jars, aid = jars_and_aid(store)
    form = counts(house, aid=(aid, "48", "lb"), jars=(jars, number, "pieces"))

    answer = recorder.post(url(house, "stock-take", store.uuid), form)

    found = errors(answer)
    assert list(found) == [named(jars)]
    assert words in str(found[named(jars)])
    assert f'value="{number}"' in answer.content.decode()
    assert not Step.objects.filter(kind="adjustment").exists()


def test_beyond_the_tolerance_a_lead_counts(client, house, store):
    client.force_login(house.lead)
    jars, aid = jars_and_aid(store)
    form = counts(house, aid=(aid, "30", "lb"), jars=(jars, "0", "pieces"))

    assert client.post(url(house, "stock-take", store.uuid), form).status_code == 302

    assert Step.objects.filter(kind="adjustment").count() == 2
    jars.refresh_from_db()
    assert jars.remaining == 0


def test_nothing_counted_is_told(recorder, house, store):
    form = typed("2026-04-02T20:00", reason="Monthly")

    found = errors(recorder.post(url(house, "stock-take", store.uuid), form))

    assert "at least one lot" in str(found["__all__"])


def test_sent_twice_it_counts_once(recorder, house, store):
    jars, _ = jars_and_aid(store)
    form = counts(house, jars=(jars, "19", "pieces"))
    page = url(house, "stock-take", store.uuid)
    recorder.post(page, form)

    again = recorder.post(page, form)

    assert again.status_code in (302, 422)
    assert Step.objects.filter(kind="adjustment").count() == 1


def test_syrup_is_counted_in_gallons_or_by_weight(recorder, house, store):
    canner = house.places["Canner"]
    lot = canner.stock.get().lot
    form = counts(house, lot=(lot, "2.9", "US gal"))

    recorder.post(url(house, "stock-take", canner.uuid), form)

    # The book holds the 3 US gal that the fill of 5 left of 8.
    step = Step.objects.get(kind="adjustment")
    lot.refresh_from_db()
    assert step.adjustments.get().quantity < 0
    assert lot.remaining == canner.stock.get().quantity


def test_another_facilitys_place_is_not_found(recorder, house, store):
    from tests.factories import sugarhouse

    other = sugarhouse("other-place")

    page = url(house, "stock-take", other.places["Store"].uuid)
    assert recorder.get(page).status_code == 404

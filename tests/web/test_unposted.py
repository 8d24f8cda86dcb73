"""Acts that could not stand: kept from any form, opened again as typed, settled by recording."""

import pytest

from lots.models import JournalEntry, Step
from tests.cases.tools import feed, open_boil
from tests.web.tools import errors, measure, typed, url

pytestmark = pytest.mark.django_db


@pytest.fixture
def kept(client, house):
    """A sale of more jars than there were, kept because it had happened."""
    jars = house.jars()
    client.force_login(house.recorder)
    form = typed(
        "2026-04-02T19:10", lot_1=jars.pk, document="Slip 41", customer=house.customer.pk,
        address="12 Hill Road", happened="1", **measure("quantity_1", "900", "pieces"),
    )  # fmt: skip
    client.post(url(house, "record", "sale"), form)
    client.force_login(house.lead)
    return house.facility.unposted.get()


def resend(client, page, **changed):
    """Send a form as its page shows it, with some fields changed."""
    form = client.get(page).context["form"]
    fields = {}
    for bound in form:
        value = bound.value()
        if isinstance(value, list):
            fields |= {f"{bound.html_name}_{n}": part or "" for n, part in enumerate(value)}
        elif value not in (None, False):
            fields[bound.html_name] = value
    return client.post(page, {**fields, **changed})


def test_today_leads_a_lead_to_the_form_as_it_was_typed(client, house, kept):
    page = url(house, "reopen", kept.uuid)
    assert page in client.get(url(house, "today")).content.decode()

    answer = client.get(page)

    text = answer.content.decode()
    form = answer.context["form"]
    assert form["quantity_1"].value() == ["900", "pieces"]
    assert form["document"].value() == "Slip 41"
    assert form["address"].value() == "12 Hill Road"  # it stands under "More", unfolded
    assert ("More", True) not in [(legend, folded) for legend, _, folded in form.fieldsets]
    assert 'value="2026-04-02T19:10"' in text
    assert "not posted:" in text
    assert "20 pieces" in text  # the reason it was refused


def test_recording_it_settles_the_entry(client, house, kept):
    answer = resend(client, url(house, "reopen", kept.uuid), quantity_1_0="9")

    sale = Step.objects.get(kind="sale")
    kept.refresh_from_db()
    assert answer.headers["Location"] == url(house, "step", sale.uuid)
    assert (sale.document, sale.draws.get().quantity) == ("Slip 41", 9)
    assert kept.settled_as == "posted"
    assert kept.settled_by == house.lead
    assert "Sale or shipment 2026-04-02 19:10" in kept.settled_reason
    assert url(house, "reopen", kept.uuid) not in client.get(url(house, "today")).content.decode()


def test_refused_again_it_stays_unposted_and_nothing_is_half_written(client, house, kept):
    entries = JournalEntry.objects.count()

    answer = resend(client, url(house, "reopen", kept.uuid))

    assert "quantity_1" in errors(answer) or "lot_1" in errors(answer)
    assert b"It has already happened" not in answer.content
    kept.refresh_from_db()
    assert kept.settled_at is None
    assert JournalEntry.objects.count() == entries


def test_an_entry_is_posted_once(client, house, kept):
    page = url(house, "reopen", kept.uuid)
    form = client.get(page)
    resend(client, page, quantity_1_0="9")

    assert client.get(page).headers["Location"] == url(house, "today")
    assert client.post(page, typed()).headers["Location"] == url(house, "today")
    assert Step.objects.filter(kind="sale").count() == 1
    assert form.status_code == 200


def test_a_lot_that_is_gone_is_still_told_as_it_was_typed(client, house, kept):
    jars = kept.lots.get()
    gone = typed("2026-04-02T20:00", lot=jars.pk, reason="breakage")
    client.post(url(house, "record", "removal"), gone)

    answer = client.get(url(house, "reopen", kept.uuid))

    typed_then = dict(answer.context["typed"])
    assert typed_then["Lot"].startswith(jars.code)
    assert typed_then["Quantity"] == "900 pieces"
    assert typed_then["Customer"] == "Corner Shop (fictional)"


def test_only_a_lead_opens_it(client, house, kept):
    client.force_login(house.recorder)
    page = url(house, "reopen", kept.uuid)

    assert client.get(page).status_code == 403
    assert client.post(page, typed()).status_code == 403
    assert page not in client.get(url(house, "today")).content.decode()


def test_an_act_of_a_running_boil_is_kept_and_posted_too(client, house):
    house.collect("10")
    boil = open_boil(house, 1)
    client.force_login(house.recorder)
    feeding = typed(
        "2026-04-02T14:00", source=house.places["Tank 1"].pk, happened="1",
        **measure("taken", "90"),
    )  # fmt: skip

    kept_answer = client.post(url(house, "running", boil.uuid, "feed"), feeding)

    assert kept_answer.headers["Location"] == url(house, "today")
    entry = house.facility.unposted.get()
    client.force_login(house.lead)
    answer = resend(client, url(house, "reopen", entry.uuid), taken_0="9")
    assert answer.headers["Location"] == url(house, "step", boil.uuid)
    assert boil.events.filter(kind="feed").count() == 1
    entry.refresh_from_db()
    assert entry.settled_as == "posted"


def test_an_act_of_a_boil_that_closed_since_says_so(client, house):
    house.collect("10")
    boil = open_boil(house, 1)
    client.force_login(house.recorder)
    feeding = typed(
        "2026-04-02T14:00", source=house.places["Tank 1"].pk, happened="1",
        **measure("taken", "90"),
    )  # fmt: skip
    client.post(url(house, "running", boil.uuid, "feed"), feeding)
    feed(house, boil, 2.5)
    close = typed("2026-04-02T15:00", emptied="on")
    client.post(url(house, "running", boil.uuid, "close"), close)
    entry = house.facility.unposted.get()
    client.force_login(house.lead)

    answer = resend(client, url(house, "reopen", entry.uuid), taken_0="9")

    assert "closed" in str(errors(answer))

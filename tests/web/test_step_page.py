"""The page of a record: what was recorded, what the checks found, what is next, and the undo."""

from datetime import timedelta

import pytest
from django.utils import timezone

from lots.models import Lot, Step
from lots.recording import decisions, sap, setup
from lots.recording._sources import FromVessel
from lots.recording.context import Context
from lots.web.screens import FORMS, NEXT
from lots.web.words import checks_sentence
from tests.cases.tools import pass_on
from tests.factories import gallons
from tests.web.tools import measure, typed, url

pytestmark = pytest.mark.django_db


@pytest.fixture
def recorder(client, house):
    client.force_login(house.recorder)
    return client


def fresh_sap(house, by=None, ago=timedelta(0)):
    """A round of sap recorded a moment ago."""
    at = timezone.now() - ago
    return sap.record_collection(
        Context(house.facility, by or house.recorder, now=at), at=at,
        woods=house.places["North woods"], tank=house.places["Tank 1"],
        item=house.items["sap"], amount=gallons("400"),
    )  # fmt: skip


def page_of(client, house, step):
    return client.get(url(house, "step", step.uuid)).content.decode()


def test_it_says_what_was_made_and_as_it_was_typed(recorder, house):
    page = page_of(recorder, house, fresh_sap(house))

    # 400 US gal × 3.785411784 L × 0.9982 kg/L, water at 20 °C: no density was read.
    assert "Sap</a>: 1511.4 kg, typed as 400 US gal" in page


def test_it_says_what_the_checks_found_together(recorder, house):
    jars = house.jars(density="66.4")

    page = page_of(recorder, house, jars.made_by)

    assert "3 checks: 2 passed, 1 failed." in page


@pytest.mark.parametrize(
    ("outcomes", "words"),
    [
        ([], ""),
        (["pass"], "1 check: 1 passed."),
        (["pass", "borderline-pass", "borderline-fail", "not-set"],
         "4 checks: 1 passed, 1 borderline, 1 failed, 1 not set."),
    ],
)  # fmt: skip
def test_the_sentence_on_checks(outcomes, words):
    assert checks_sentence(outcomes) == words


def test_what_is_next_stands_on_a_fresh_record_and_on_no_old_one(recorder, house):
    old, fresh = fresh_sap(house, ago=timedelta(hours=2)), fresh_sap(house)

    assert f'href="{url(house, "record", "boil")}"' in page_of(recorder, house, fresh)
    assert "<h2>Next</h2>" not in page_of(recorder, house, old)


def test_an_inspector_is_offered_nothing_to_record(client, house):
    step = fresh_sap(house)
    client.force_login(house.inspector)

    page = page_of(client, house, step)

    assert "<h2>Next</h2>" not in page
    assert "Undo" not in page


def test_each_next_step_has_its_form():
    assert {kind for kinds in NEXT.values() for kind in kinds} <= set(FORMS)


def test_one_tap_undoes_within_two_minutes(recorder, house):
    step = fresh_sap(house)
    assert ">Undo</button>" in page_of(recorder, house, step)

    recorder.post(
        url(house, "void", step.uuid), {"reason": "Undone within two minutes", "together": "1"}
    )

    step.refresh_from_db()
    assert step.voided_at is not None
    assert "Undo" not in page_of(recorder, house, step)


def test_undo_is_not_offered_later_nor_to_another(client, house):
    late = fresh_sap(house, ago=decisions.UNDO_WINDOW + timedelta(seconds=1))
    other = fresh_sap(house, by=house.lead)
    client.force_login(house.recorder)

    assert "Undo" not in page_of(client, house, late)
    assert "Undo" not in page_of(client, house, other)


def two_products(recorder, house):
    pint = setup.add_item(
        house.context(house.owner, -48), name="Amber pint", kind="packed", unit="piece",
        size_value="1", size_unit="pt",
    )  # fmt: skip
    house.collect()
    house.boil()
    pass_on(house, 5, FromVessel(house.places["Batch tank"]), "Canner")
    form = typed(
        product=house.items["quart"].pk, made="10", second_product=pint.pk, second_made="8",
        source=house.places["Canner"].pk, into=house.places["Store"].pk, **measure("taken", "4"),
    )  # fmt: skip
    recorder.post(url(house, "record", "container-fill"), form)
    return list(Step.objects.filter(kind="container-fill").order_by("pk"))


def test_two_products_of_one_form_name_each_other_and_are_undone_together(recorder, house):
    quarts, pints = two_products(recorder, house)
    page = page_of(recorder, house, quarts)
    assert f'href="{url(house, "step", pints.uuid)}"' in page
    assert "Undo all of this form" in page

    recorder.post(url(house, "void", quarts.uuid), {"reason": "Undone", "together": "1"})

    assert not Step.objects.filter(kind="container-fill", voided_at=None).exists()


def test_an_undo_that_cannot_take_all_back_takes_nothing(recorder, house):
    quarts, pints = two_products(recorder, house)
    lot = Lot.objects.get(made_by=pints)
    form = typed(lot=lot.pk, reason="tasting", **measure("amount", "1", "pieces"))
    recorder.post(url(house, "record", "removal"), form)

    recorder.post(url(house, "void", quarts.uuid), {"reason": "Undone", "together": "1"})

    assert not Step.objects.filter(voided_at__isnull=False).exists()

"""The journal holds every after-image, and is checked without the program."""

import hashlib
import json

import pytest
from django.apps import apps

from lots.models import JournalEntry
from lots.recording import boil, decisions, goods_out, setup, syrup, upkeep
from lots.recording._sources import FromLot
from lots.recording.measures import Typed
from lots.tracing.images import after_images
from tests.cases.tools import open_boil
from tests.factories import pieces

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


def last_images():
    """Return what the journal alone says of each row, newest entry last."""
    images = {}
    for entry in JournalEntry.objects.order_by("chain", "seq"):
        for image in json.loads(entry.body)["rows"]:
            if "uuid" in image:
                images[image["table"], image["uuid"]] = image
    return images


def untold():
    """Return each row of which the journal says something else than the table, or nothing."""
    told = last_images()
    found = []
    for model in apps.get_app_config("lots").get_models():
        if all(field.name != "uuid" for field in model._meta.fields):
            continue
        for image in json.loads(json.dumps(after_images(model._base_manager.all()))):
            said = told.get((image["table"], image["uuid"]), {})
            changed = {key for key, value in image.items() if said.get(key) != value}
            if changed:
                found.append((image["table"], sorted(changed)))
    return found


def test_after_a_whole_chain_and_a_sale_the_journal_says_what_the_tables_say(house):
    jars = house.jars()
    goods_out.record_sale(house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(5))])

    assert untold() == []


def test_after_holds_splits_moves_counts_and_rework_too(house):
    jars = house.jars()
    store, drum = house.places["Store"], house.places["Drum 2"]
    common = {"at": house.at(7), "lot": jars}
    context, lead = house.context(hours=7), house.context(house.lead, hours=7)
    upkeep.record_move(context, come_from=store, to=drum, amount=pieces(5), **common)
    upkeep.record_split(context, amount=pieces(2), reason="by time", held=True, **common)
    upkeep.record_rework(
        context, amount=pieces(2), into=house.places["Drum 1"], item=house.items["syrup"], **common
    )
    upkeep.record_count(lead, place=store, counted=pieces(9), reason="count", **common)
    syrup.record_grade_reading(context, transmittance=Typed(62, "%Tc"), **common)
    decisions.place_hold(lead, lot=jars, reason="glass")

    assert untold() == []


def test_after_an_open_boil_that_was_voided_and_a_kept_entry_too(house):
    house.collect()
    house.boil()
    running = open_boil(house, 10)
    boil.close_boil(
        house.context(hours=11), boil=running, at=house.at(11), contents=house.items["contents"]
    )
    decisions.void_step(house.context(house.lead, 12), step=running, reason="not that day")
    kept = decisions.keep_unposted(
        house.context(hours=12), kind="boil", happened_at=house.at(9), typed={"a": "1"},
        reason="cannot stand", lots=[],
    )  # fmt: skip
    decisions.settle_unposted(
        house.context(house.lead, 13), entry=kept, settled_as="voided", reason="typed twice"
    )

    assert untold() == []


def test_the_chain_is_checked_by_a_hash_and_the_stored_text_alone(house):
    house.jars()
    head, seq = "0" * 64, 0
    rows = JournalEntry.objects.filter(chain=house.facility.chain).order_by("seq")
    for body, digest in rows.values_list("body", "digest"):
        head = hashlib.sha256(f"{head}\n{body}".encode()).hexdigest()
        seq += 1
        assert digest == head
        assert json.loads(body)["seq"] == seq

    house.facility.chain.refresh_from_db()
    assert (house.facility.chain.head, house.facility.chain.seq) == (head, seq)


def test_bodies_hold_texts_and_whole_numbers_only_and_keys_in_order(house):
    house.jars()

    def walk(value):
        assert not isinstance(value, float)
        if isinstance(value, dict):
            assert list(value) == sorted(value)
        if isinstance(value, dict | list):
            for part in value.values() if isinstance(value, dict) else value:
                walk(part)

    for body in JournalEntry.objects.values_list("body", flat=True):
        walk(json.loads(body))


def test_times_never_run_backwards_along_the_chain(house):
    house.collect(hours=5)
    house.collect(hours=1)
    house.collect(hours=3)

    times = list(
        JournalEntry.objects.filter(chain=house.facility.chain).values_list(
            "recorded_at", flat=True
        )
    )
    assert times == sorted(times)


def test_a_partners_telephone_stands_in_no_entry(house):
    setup.add_partner(
        house.context(house.owner, 1), name="A person", kind="customer", phone="555-0177",
        email="person@example.com", address="1 Sap Lane",
    )  # fmt: skip

    bodies = "".join(JournalEntry.objects.values_list("body", flat=True))
    assert "A person" in bodies
    for contact in ("555-0177", "person@example.com", "1 Sap Lane"):
        assert contact not in bodies
    assert "pass-word-1" not in bodies

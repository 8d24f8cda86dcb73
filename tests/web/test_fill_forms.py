"""Filling containers on screen: several vessels, a net-content sample, two products of one run."""

import pytest

from lots.models import DrawRole, JournalEntry, Place, Step
from lots.recording import boil, container_fill, setup
from lots.recording._sources import FromVessel
from lots.recording.errors import RecordingError
from lots.recording.measures import NOT_MEASURED
from lots.tracing import verify
from tests.cases.tools import pass_on
from tests.factories import brix, fahrenheit, gallons
from tests.web.tools import errors, measure, typed, url

pytestmark = pytest.mark.django_db


@pytest.fixture
def recorder(client, house):
    client.force_login(house.recorder)
    return client


@pytest.fixture
def pint(house):
    """A second product: half of a quart."""
    return setup.add_item(
        house.context(house.owner, -48), name="Amber pint", kind="packed", unit="piece",
        size_value="1", size_unit="pt", label_grade="Amber",
    )  # fmt: skip


@pytest.fixture
def canner(house):
    """Filtered syrup in the canner, and some in a drum."""
    house.collect()
    house.boil()
    pass_on(house, 5, FromVessel(house.places["Batch tank"], gallons("6")), "Canner")
    pass_on(house, 5, FromVessel(house.places["Batch tank"]), "Drum 1")
    return house.places["Canner"]


def fill(house, canner, **changed):
    fields = {
        "product": house.items["quart"].pk, "made": "12", "source": canner.pk,
        "into": house.places["Store"].pk, **measure("fill_1", "186", "°F"),
        **measure("brix", "67.2", "°Brix"), **measure("sample_temperature", "60", "°F"),
        **measure("transmittance", "62", "%Tc"),
    }  # fmt: skip
    return typed(**{"at": "2026-04-02T18:00", **fields, **changed})


def drawn(step, place="Canner"):
    return sum(
        draw.quantity
        for draw in step.draws.filter(role=DrawRole.INGREDIENT, from_place__name=place)
    )


def test_a_run_draws_from_three_vessels_and_keeps_its_sample(recorder, house, canner):
    house.collect(hours=5.5)
    house.boil(hours=9, into="Drum 2")
    form = fill(
        house, canner, at="2026-04-02T22:00", made="32", source_2=house.places["Drum 1"].pk,
        source_3=house.places["Drum 2"].pk, net_sample="3 bottles: 1262, 1260, 1263 g",
        **measure("taken_3", "1"),
    )  # fmt: skip

    assert recorder.post(url(house, "record", "container-fill"), form).status_code == 302

    step = Step.objects.get(kind="container-fill")
    assert step.detail["net_sample"] == "3 bottles: 1262, 1260, 1263 g"
    assert {draw.from_place.name for draw in step.draws.filter(role="ingredient")} == {
        "Canner", "Drum 1", "Drum 2",
    }  # fmt: skip


def test_a_fill_finished_later_keeps_its_sample_and_rejects_too(recorder, house, canner):
    step, _ = container_fill.open_container_fill(
        house.context(hours=6), at=house.at(6), product=house.items["quart"]
    )
    form = fill(house, canner, net_sample="2 bottles: 1261 g", rejected="3")

    recorder.post(url(house, "running", step.uuid, "finish"), form)

    step.refresh_from_db()
    assert step.ended_at is not None
    assert (step.detail["net_sample"], step.detail["rejected"]) == ("2 bottles: 1261 g", 3)


def test_pints_and_quarts_of_one_run_are_two_steps_of_one_group(recorder, house, canner, pint):
    whole = sum(row.quantity for row in canner.stock.all())
    entries = JournalEntry.objects.count()
    form = fill(
        house, canner, second_product=pint.pk, second_made="22", second_rejected="2",
        **measure("second_fill_1", "187", "°F"),
    )  # fmt: skip

    assert recorder.post(url(house, "record", "container-fill"), form).status_code == 302

    quarts, pints = Step.objects.filter(kind="container-fill").order_by("pk")
    assert quarts.group is not None
    assert quarts.group == pints.group
    # 12 quarts and 24 pints (22 and 2 rejects) are equal volumes: half of the canner each.
    assert sorted((drawn(quarts), drawn(pints))) == [whole // 2, whole - whole // 2]
    lots = [step.made_lots.get() for step in (quarts, pints)]
    assert [lot.made for lot in lots] == [12, 22]
    assert lots[0].printed_code.text != lots[1].printed_code.text
    assert [lot.readings.get(kind="fill-temperature").typed_value for lot in lots] == ["186", "187"]
    assert [lot.readings.get(kind="brix").typed_value for lot in lots] == ["67.2", "67.2"]
    assert JournalEntry.objects.count() == entries + 1
    assert list(verify.ledger_faults()) == []


def test_a_typed_amount_is_shared_by_what_each_product_filled(recorder, house, canner, pint):
    before = sum(row.quantity for row in canner.stock.all())
    form = fill(
        house, canner, made="8", second_product=pint.pk, second_made="8", **measure("taken", "3")
    )

    recorder.post(url(house, "record", "container-fill"), form)

    quarts, pints = Step.objects.filter(kind="container-fill").order_by("pk")
    assert abs(drawn(quarts) - 2 * drawn(pints)) < 10
    # 3 of the canner's 6 US gal.
    assert abs(drawn(quarts) + drawn(pints) - before / 2) < before / 1000


@pytest.mark.parametrize(
    ("changed", "field", "words"),
    [
        ({"second_made": "5"}, "second_product", "Choose the second"),
        ({"second_product": "pint"}, "second_made", "how many"),
        ({"second_product": "quart", "second_made": "5"}, "second_product", "another product"),
        ({"second_product": "pint", "second_made": "0"}, "made", "how many"),
        (
            {"second_product": "pint", "second_made": "9", "second_printed_code": "TOO LONG TO GO"},
            "second_printed_code", "cannot be printed",
        ),
        (
            {"second_product": "pint", "second_made": "900", "taken_0": "90", "taken_1": "US gal"},
            "taken", "by the book",
        ),
    ],
)  # fmt: skip
def test_a_slip_in_the_second_product_leaves_nothing_written(
    recorder, house, canner, pint, changed, field, words
):
    products = {"pint": pint.pk, "quart": house.items["quart"].pk}
    given = {**changed}
    if "second_product" in given:
        given["second_product"] = products[given["second_product"]]

    answer = recorder.post(url(house, "record", "container-fill"), fill(house, canner, **given))

    found = errors(answer)
    assert list(found) == [field]
    assert words in str(found[field])
    assert not Step.objects.filter(kind="container-fill").exists()


def test_a_vessel_that_was_not_measured_asks_how_much_was_taken(recorder, house, canner, pint):
    running = boil.open_boil(
        house.context(hours=6), at=house.at(6), evaporator=house.places["Evaporator"]
    )
    boil.draw_off(
        house.context(hours=6), boil=running, item=house.items["syrup"],
        draw=boil.DrawOff(house.at(6), house.places["Drum 2"], NOT_MEASURED),
    )  # fmt: skip
    drum = Place.objects.get(name="Drum 2")
    form = fill(house, drum, at="2026-04-02T19:00", second_product=pint.pk, second_made="4")

    found = errors(recorder.post(url(house, "record", "container-fill"), form))

    assert "was not measured" in str(found["taken"])


def test_the_second_run_that_cannot_stand_takes_the_first_with_it(house, canner, pint):
    def run(product, amount):
        made = container_fill.Run(
            product=product, made=4, into=house.places["Store"], brix=brix("67.2"),
            fill_temperatures=[fahrenheit("186")],
        )  # fmt: skip
        return [FromVessel(canner, gallons(amount))], made

    runs = [run(house.items["quart"], "1"), run(pint, "40")]
    with pytest.raises(RecordingError):
        container_fill.record_container_fills(house.context(hours=6), at=house.at(6), runs=runs)

    assert not Step.objects.filter(kind="container-fill").exists()
    assert canner.stock.get().quantity > 0
    with pytest.raises(RecordingError, match="at least one"):
        container_fill.record_container_fills(house.context(hours=6), at=house.at(6), runs=[])

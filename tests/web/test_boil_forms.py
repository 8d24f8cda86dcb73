"""A boil on its screens: recorded whole afterwards, or fed, given defoamer and put back."""

from decimal import Decimal

import pytest

from lots.models import DrawRole, Step
from lots.recording import receiving, setup
from lots.recording.measures import Typed
from tests.cases.tools import open_boil
from tests.web.tools import errors, measure, typed, url

pytestmark = pytest.mark.django_db


@pytest.fixture
def recorder(client, house):
    client.force_login(house.recorder)
    return client


@pytest.fixture
def defoamer(house):
    """A bottle of defoamer in the store."""
    item = setup.add_item(
        house.context(house.owner, -48), name="Defoamer", kind="defoamer", unit="mg"
    )
    step = receiving.record_receiving(
        house.context(hours=-24), at=house.at(-24), supplier=house.supplier, item=item,
        amount=Typed(Decimal("1"), "kg"), place=house.places["Store"],
    )  # fmt: skip
    return step.made_lots.get()


def draw_off(house, number, hour, amount, into="Batch tank", density="67.2"):
    return {
        f"time_{number}": hour,
        **measure(f"draw_{number}", amount),
        **measure(f"density_{number}", density, "°Brix"),
        **measure(f"sample_{number}", "60", "°F"),
        f"into_{number}": house.places[into].pk,
    }


def whole_boil(house, **changed):
    fields = typed(
        at="2026-04-02T13:00",
        ended_at="2026-04-02T17:00",
        evaporator=house.places["Evaporator"].pk,
        source_1=house.places["Tank 1"].pk,
        since_last_run="washed",
        **draw_off(house, 1, "15:00", "4"),
        **draw_off(house, 2, "16:30", "3.5", into="Drum 1"),
        **measure("stays", "5"),
        **measure("brix", "30", "°Brix"),
    )
    return {**fields, **changed}


def test_a_whole_boil_is_one_record(recorder, house, defoamer):
    house.collect()
    house.collect(tank="Tank 2")

    answer = recorder.post(
        url(house, "record", "whole-boil"),
        whole_boil(
            house, source_2=house.places["Tank 2"].pk, defoamer=defoamer.pk,
            **measure("taken_2", "200"), **measure("defoamer_amount", "20", "g"),
        ),
    )  # fmt: skip

    boil = Step.objects.get(kind="boil")
    assert answer.headers["Location"] == url(house, "step", boil.uuid)
    assert boil.ended_at == house.at(5)
    made = {lot.stock.get().place.name: lot for lot in boil.made_lots.all()}
    assert set(made) == {"Batch tank", "Drum 1", "Evaporator"}
    assert [made["Batch tank"].typed_value, made["Drum 1"].typed_value] == ["4", "3.5"]
    assert made["Drum 1"].made_at == house.at(4.5)
    assert made["Drum 1"].readings.get().at == house.at(4.5)
    assert boil.draws.get(role=DrawRole.AID).quantity == 20_000
    assert boil.draws.filter(role=DrawRole.INGREDIENT).count() == 2


def test_a_draw_off_after_midnight_is_of_the_next_day(recorder, house):
    house.collect()

    recorder.post(
        url(house, "record", "whole-boil"),
        whole_boil(house, at="2026-04-02T20:00", ended_at="2026-04-03T01:00", time_1="00:30",
                   time_2="21:00"),
    )  # fmt: skip

    events = Step.objects.get(kind="boil").events.filter(kind="draw-off").order_by("pk")
    assert [event.at for event in events] == [house.at(9), house.at(12.5)]


@pytest.mark.parametrize(
    ("changed", "field", "words"),
    [
        ({"time_2": ""}, "time_2", "Enter the hour"),
        ({"into_2": ""}, "into_2", "Choose the vessel"),
        ({"time_1": "18:30"}, "time_1", "not between"),
        ({"density_1_0": "95"}, "density_1", "cannot be corrected"),
        ({"sample_1_0": "900"}, "sample_1", "not a temperature"),
        ({"ended_at": "2026-04-02T12:00"}, "ended_at", "before it was lit"),
        ({"ended_at": "2026-04-05T12:00"}, "ended_at", "up to 24 hours"),
        ({"taken_1_0": "900", "taken_1_1": "US gal"}, "taken_1", "by the book"),
        ({"defoamer_amount_0": "3", "defoamer_amount_1": "g"}, "defoamer", "which lot"),
        ({"source_1": ""}, "source_1", "required"),
    ],
)
def test_what_is_wrong_stands_beside_its_field_and_nothing_is_written(
    recorder, house, changed, field, words
):
    house.collect()

    answer = recorder.post(url(house, "record", "whole-boil"), whole_boil(house, **changed))

    found = errors(answer)
    assert list(found) == [field]
    assert words in str(found[field])
    assert 'value="3.5"' in answer.content.decode()
    assert not Step.objects.filter(kind="boil").exists()


def test_the_tank_that_holds_too_little_is_the_one_that_is_told(recorder, house):
    house.collect()
    house.collect("10", tank="Tank 2")

    answer = recorder.post(
        url(house, "record", "whole-boil"),
        whole_boil(house, source_2=house.places["Tank 2"].pk, **measure("taken_2", "90")),
    )

    assert list(errors(answer)) == ["taken_2"]


def test_a_boil_is_fed_with_defoamer_alone(recorder, house, defoamer):
    boil = open_boil(house, 1)
    page = url(house, "running", boil.uuid, "feed")

    assert "source" in errors(recorder.post(page, typed()))
    assert "defoamer_amount" in errors(recorder.post(page, typed(defoamer=defoamer.pk)))
    in_pieces = typed(defoamer=defoamer.pk, **measure("defoamer_amount", "3", "pieces"))
    assert "defoamer_amount" in errors(recorder.post(page, in_pieces))
    answer = recorder.post(
        page, typed(defoamer=defoamer.pk, **measure("defoamer_amount", "30", "g"))
    )

    assert answer.status_code == 302
    assert boil.draws.get(role=DrawRole.AID).quantity == 30_000


def test_light_syrup_goes_back_into_the_pan(recorder, house):
    house.collect()
    boil = open_boil(house, 1)
    into = house.places["Batch tank"].pk
    page = "2026-04-02T14:00"
    recorder.post(
        url(house, "running", boil.uuid, "feed"), typed(page, source=house.places["Tank 1"].pk)
    )
    recorder.post(
        url(house, "running", boil.uuid, "draw-off"),
        typed(page, into=into, **measure("amount", "4"), **measure("brix", "60", "°Brix")),
    )
    lot = boil.made_lots.get()
    assert "Put back" in recorder.get(url(house, "step", boil.uuid)).content.decode()

    too_much = typed(lot=lot.pk, **measure("amount", "40"))
    found = errors(recorder.post(url(house, "running", boil.uuid, "put-back"), too_much))
    answer = recorder.post(
        url(house, "running", boil.uuid, "put-back"), typed(lot=lot.pk, **measure("amount", "1"))
    )

    assert "holds less" in str(found["amount"])
    assert answer.status_code == 302
    made = lot.made
    lot.refresh_from_db()
    assert abs(lot.made - made * 3 / 4) < 2
    assert boil.events.get(kind="put-back").detail["amount"] == "1"


def test_only_this_boils_own_syrup_is_offered_back(recorder, house):
    house.collect()
    house.boil()
    boil = open_boil(house, 6)

    page = recorder.get(url(house, "running", boil.uuid, "put-back"))

    assert list(page.context["form"].fields["lot"].queryset) == []

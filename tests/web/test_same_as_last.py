"""Same as last: choices of the last record of a kind are offered, numbers and decisions never."""

import pytest
from django import forms

from lots.models import StepKind
from lots.recording import decisions, upkeep
from lots.recording.measures import NOT_MEASURED
from lots.web.screens import FORMS, RUNNING
from tests.cases.tools import feed, open_boil
from tests.web.tools import errors, measure, typed, url

pytestmark = pytest.mark.django_db
EVERY = {**FORMS, **{act: form for acts in RUNNING.values() for act, form in acts.items()}}


@pytest.fixture
def recorder(client, house):
    client.force_login(house.recorder)
    return client


def offered(client, house, kind):
    form = client.get(url(house, "record", kind)).context["form"]
    return {
        name: str(form.fields[name].queryset.get(pk=form.initial[name]))
        for name in form.same
        if form.initial.get(name) and hasattr(form.fields[name], "queryset")
    }


@pytest.mark.parametrize("name", EVERY)
def test_each_form_names_its_kind_and_only_choices(house, name):
    form = EVERY[name](house.facility)

    assert set(form.same) <= set(form.fields)
    assert all(isinstance(form.fields[one], forms.ChoiceField) for one in form.same)
    assert not form.same or form.kind in StepKind.values


def test_the_last_round_of_sap_is_offered_and_said(recorder, house):
    house.collect(tank="Tank 2")

    assert offered(recorder, house, "collection") == {"woods": "North woods", "tank": "Tank 2"}
    page = recorder.get(url(house, "record", "collection")).content.decode()
    assert "Filled in as it was last: Woods North woods; Tank Tank 2. Change what differs." in page
    assert f'<option value="{house.places["Tank 2"].pk}" selected>' in page


def test_the_first_record_of_a_kind_is_offered_nothing(recorder, house):
    assert offered(recorder, house, "collection") == {}
    page = recorder.get(url(house, "record", "collection")).content.decode()
    assert "as it was last" not in page


def test_a_whole_chain_offers_its_vessels_product_and_aid(recorder, house):
    house.jars()
    house.collect(hours=7)

    assert offered(recorder, house, "boil") == {"evaporator": "Evaporator"}
    assert offered(recorder, house, "whole-boil") == {
        "evaporator": "Evaporator", "source_1": "Tank 1", "into_1": "Batch tank",
    }  # fmt: skip
    assert offered(recorder, house, "container-fill") == {
        "product": "Amber quart", "source": "Canner", "into": "Store",
    }  # fmt: skip
    assert offered(recorder, house, "open-fill") == {"product": "Amber quart"}
    filtering = offered(recorder, house, "filtration")
    # The batch tank was filtered empty: it is not among the vessels that hold something.
    assert set(filtering) == {"into", "aid"}
    assert filtering["into"] == "Canner"


def test_a_voided_record_and_another_facility_are_not_remembered(recorder, house):
    from tests.factories import sugarhouse

    sugarhouse("other-place").collect(tank="Tank 2")
    lot = house.collect(tank="Tank 2")
    decisions.void_step(house.context(house.lead), step=lot.made_by, reason="wrong tank")

    assert offered(recorder, house, "collection") == {}


def test_a_place_out_of_use_is_not_offered(recorder, house):
    house.collect(tank="Tank 2")
    tank = house.places["Tank 2"]
    tank.active = False
    tank.save()

    assert offered(recorder, house, "collection") == {"woods": "North woods"}


def test_a_running_boil_offers_what_it_did_last(recorder, house):
    house.collect("100")
    house.collect("100", tank="Tank 2")
    boil = open_boil(house, 1)
    feed(house, boil, 1)
    draw = typed(
        "2026-04-02T14:00", into=house.places["Drum 2"].pk, **measure("amount", "1"),
        **measure("brix", "67", "°Brix"),
    )  # fmt: skip
    recorder.post(url(house, "running", boil.uuid, "draw-off"), draw)

    form = recorder.get(url(house, "running", boil.uuid, "draw-off")).context["form"]
    assert form.initial["into"] == house.places["Drum 2"].pk
    form = recorder.get(url(house, "running", boil.uuid, "feed")).context["form"]
    assert form.initial["source"] == house.places["Tank 1"].pk


def test_what_was_typed_is_never_replaced(recorder, house):
    house.collect(tank="Tank 2")

    answer = recorder.post(
        url(house, "record", "collection"), typed(tank=house.places["Tank 1"].pk)
    )

    assert errors(answer)
    form = answer.context["form"]
    assert form["tank"].value() == str(house.places["Tank 1"].pk)
    assert form["woods"].value() is None


def test_a_move_is_offered_its_ways_but_not_its_lot(recorder, house):
    jars = house.jars()
    upkeep.record_move(
        house.context(hours=7), at=house.at(7), lot=jars, come_from=house.places["Store"],
        to=house.places["Drum 2"], amount=NOT_MEASURED,
    )  # fmt: skip

    assert offered(recorder, house, "move") == {"come_from": "Store", "to": "Drum 2"}
    form = recorder.get(url(house, "record", "move")).context["form"]
    assert "lot" not in form.initial

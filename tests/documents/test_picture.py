"""The picture: nothing lies on anything else, all text can be read, nothing is left out."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.documents import chain_graph, lettering, picture
from lots.documents.chain_layout import lay_out
from lots.models import Hold
from lots.recording import goods_out, upkeep
from lots.recording._sources import FromLot
from lots.tracing import story
from tests.documents.drawn import Drawn, assert_readable
from tests.documents.stories import tangle
from tests.factories import pieces


@pytest.fixture
def told(house):
    upkeep.record_cleaning(
        house.context(hours=-2), at=house.at(-2), vessel=house.places["Evaporator"],
        break_kind="washed and verified",
    )  # fmt: skip
    jars = house.jars()
    goods_out.record_sale(
        house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(12))],
        customer=house.customer,
    )  # fmt: skip
    return story.tell(jars)


@given(st.integers(0, 10_000), st.integers(2, 40))
def test_no_chain_draws_two_things_in_one_place(seed, size):
    told = tangle(seed, size)
    drawn = assert_readable(picture.svg(told))
    assert {lot.code for lot in told.lots.values()} <= set(drawn.words)


@given(st.integers(0, 10_000), st.integers(2, 40))
def test_no_sheet_of_paper_does_and_each_lot_begins_on_one(seed, size):
    told = tangle(seed, size)
    sheets = picture.sheets(told)
    words = [word for sheet in sheets for word in assert_readable(sheet.svg).words]
    assert {lot.code for lot in told.lots.values()} <= set(words)
    assert all(Drawn(sheet.svg).size[0] < 1100 for sheet in sheets)


@given(st.integers(0, 10_000), st.integers(2, 40))
def test_time_runs_left_to_right(seed, size):
    told = tangle(seed, size)
    graph = chain_graph.graph_of(told)
    layout = lay_out(graph)
    assert layout.days == sorted(layout.days)
    for lane in graph.lanes.values():
        assert all(layout.column[lane.maker] < layout.column[use.bar] for use in lane.uses)


@pytest.mark.parametrize("size", [200, 400])
def test_beyond_300_lots_lanes_of_one_step_and_day_join_and_say_how_many(size):
    told = tangle(7, size)
    assert len(told.lots) > chain_graph.MOST_LOTS
    graph = chain_graph.graph_of(told)
    drawn = assert_readable(picture.svg(told))

    assert sum(lane.count for lane in graph.lanes.values()) == len(told.lots)
    assert len(graph.lanes) < len(told.lots)
    assert told.lot.code in drawn.words
    joined = [lane for lane in graph.lanes.values() if lane.count > 1]
    assert {lane.code for lane in joined} <= set(drawn.words)
    for lane in joined:
        assert lane.code == f"{lane.count} lots"


def test_exactly_300_lots_stay_apart(monkeypatch):
    told = tangle(3, 60)
    monkeypatch.setattr(chain_graph, "MOST_LOTS", len(told.lots))
    assert len(chain_graph.graph_of(told).lanes) == len(told.lots)
    monkeypatch.setattr(chain_graph, "MOST_LOTS", len(told.lots) - 1)
    assert len(chain_graph.graph_of(told).lanes) < len(told.lots)


@pytest.mark.django_db
def test_a_recorded_chain_shows_its_steps_lanes_and_breaks(told):
    text = picture.svg(told, url=lambda lot: f"/lots/{lot.uuid}/")
    drawn = assert_readable(text)

    for words in ("Sap in", "Boil", "Filter", "Fill", "Sale", "Corner Shop", "1 Apr 2026", "2 Apr"):
        assert any(one.startswith(words) for one in drawn.words), words
    assert "washed and" in drawn.words
    assert 'class="break"' in text
    assert 'id="chain-asked"' in text
    assert text.count("<a ") == len(told.lots)
    assert 'role="group"' in text
    assert 'role="img"' in picture.svg(told)
    assert "stroke-dasharray" in text


@pytest.mark.django_db
def test_a_held_lot_is_hatched_and_says_so(house):
    jars = house.jars(density="66.0")
    assert Hold.objects.filter(lot=jars, ended_at=None).exists()
    text = picture.svg(story.tell(jars))
    assert any(words.startswith("held, ") for words in Drawn(text).words)
    assert "url(#chain-held)" in text


@pytest.mark.django_db
def test_carry_over_is_dashed_and_residue_faint(house):
    house.jars()
    house.collect(hours=20)
    house.boil(hours=24)
    syrup = house.filter(hours=25)
    text = picture.svg(story.tell(syrup, "all"))
    assert 'stroke-dasharray="9 6"' in text
    assert 'stroke-dasharray="1 8"' in text
    assert 'stroke-dasharray="1 8"' not in picture.svg(story.tell(syrup, "composition"))


@pytest.mark.django_db
def test_markup_in_a_name_is_text(told):
    for lot in told.lots.values():
        lot.item.name = "<script>"
    assert "<script>" not in picture.svg(told)


def test_a_text_that_does_not_fit_is_cut_and_a_long_one_broken():
    assert lettering.fit("Concentrate", 12, 200) == "Concentrate"
    assert lettering.fit("Concentrate", 12, 40).endswith("…")
    assert lettering.lines("washed and verified 09:30", 12, 100) == ["washed and", "verified 09:30"]
    assert lettering.width("糖" * 3, 10) == pytest.approx(31.5)

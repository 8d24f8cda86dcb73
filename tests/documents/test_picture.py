"""The picture: no two boxes overlap, no text under 11 px, and everything drawn is there."""

import re
import xml.etree.ElementTree as ET

import pytest

from lots.documents import picture
from lots.recording import goods_out
from lots.recording._sources import FromLot
from lots.tracing import story
from tests.factories import pieces

pytestmark = pytest.mark.django_db


@pytest.fixture
def told(house):
    jars = house.jars()
    goods_out.record_sale(
        house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(12))],
        customer=house.customer,
    )  # fmt: skip
    return story.tell(jars)


def boxes(text):
    root = ET.fromstring(text)  # noqa: S314 - our own picture
    names = ("x", "y", "width", "height")
    return [tuple(int(box.get(name)) for name in names) for box in root.iter() if
            box.get("class") == "box"]  # fmt: skip


def test_no_two_boxes_overlap_and_text_is_legible(told):
    text = picture.svg(told)
    found = boxes(text)

    assert len(found) == len(picture.graph_of(told).boxes)
    for place, (x, y, width, height) in enumerate(found):
        for ox, oy, owidth, oheight in found[place + 1 :]:
            apart = x + width <= ox or ox + owidth <= x or y + height <= oy or oy + oheight <= y
            assert apart
    assert all(int(size) >= 11 for size in re.findall(r'font-size="(\d+)"', text))


def test_time_runs_left_to_right(told):
    graph = picture.graph_of(told)
    column = picture.layers(graph)
    assert all(column[start] < column[end] for start, end, _ in graph.edges)


def test_many_lots_join_in_groups(told, monkeypatch):
    monkeypatch.setattr(picture, "MOST_LOTS", 2)
    text = picture.svg(told)
    assert "lots: " in text
    assert told.lot.code in text


def test_markup_in_a_name_is_text(told):
    told.lot.item.name = "<script>"
    told.lots[told.lot.pk].item.name = "<script>"
    assert "<script>" not in picture.svg(told)

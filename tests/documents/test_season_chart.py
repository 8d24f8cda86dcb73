"""The season's chart: bars in true proportion, none on another, all text legible."""

from datetime import date, timedelta

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.documents import season_chart
from lots.documents.season_chart import PANEL, Series
from tests.documents.drawn import SVG, Drawn, overlaps

FIRST = date(2026, 2, 20)


def chart(values, name="Sap"):
    days = {FIRST + timedelta(days=day): value for day, value in values.items()}
    return season_chart.svg([Series(name, "US gal", "#fff", days)] * 2, "Sap and syrup")


@given(
    st.dictionaries(st.integers(0, 370), st.floats(0, 1e6), min_size=1, max_size=200),
)
def test_nothing_lies_on_anything_else_and_all_text_is_legible(values):
    drawn = Drawn(chart(values))
    bars = [one for one in drawn.root.iter(f"{SVG}rect") if one.get("class") == "day"]
    rects = [
        (x, y, x + float(one.get("width")), y + float(one.get("height")))
        for one in bars
        for x, y in [(float(one.get("x")), float(one.get("y")))]
    ]
    assert len(rects) == 2 * len(values)
    assert overlaps(rects) == []
    assert overlaps(drawn.texts) == []
    assert overlaps(rects, drawn.texts) == []
    assert min(drawn.sizes) >= 11
    width, height = drawn.size
    for left, top, right, bottom in (*rects, *drawn.texts):
        assert 0 <= left <= right <= width
        assert 0 <= top <= bottom <= height


def test_bars_stand_in_proportion_on_a_scale_from_nought():
    drawn = Drawn(chart({0: 50.0, 1: 100.0}))
    bars = [one for one in drawn.root.iter(f"{SVG}rect") if one.get("class") == "day"]
    assert [float(one.get("height")) for one in bars[:2]] == [PANEL / 2, PANEL]


@pytest.mark.parametrize(
    ("most", "end"), [(0, 1), (0.07, 0.08), (1, 1), (3700, 4000), (120_154, 200_000), (9.5, 10)]
)
def test_a_scale_ends_at_a_round_number(most, end):
    assert season_chart.nice(most) == pytest.approx(end)


def test_no_day_gives_no_chart_and_a_name_is_text():
    assert season_chart.svg([Series("Sap", "L", "#fff", {})], "x") == ""
    assert "<b>" not in chart({0: 1.0}, name="<b>")

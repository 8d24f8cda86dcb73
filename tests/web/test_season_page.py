"""The season page: a sentence, totals, a chart with its table, and losses in words."""

import re

import pytest
from django.urls import reverse

from lots.recording import goods_out
from lots.recording._sources import FromLot
from lots.tracing import season as seasons
from lots.web import seasons as told
from tests.factories import pieces

pytestmark = pytest.mark.django_db


@pytest.fixture
def page(house, client):
    jars = house.jars()
    goods_out.record_sale(
        house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(12))],
        customer=house.customer,
    )  # fmt: skip
    client.force_login(house.inspector)
    return client.get(reverse("season", args=[house.facility.slug])).content.decode()


def test_the_season_begins_with_a_sentence(page):
    assert re.search(r'<p class="sentence">(.*?)</p>', page)[1] == (
        "Season of 1 January 2026 to 31 December 2026: 400 US gal of sap on 1 day; 1 boil made "
        "8 US gal of syrup. That is 50 of sap to 1 of syrup by volume. 1 fill packed 20 "
        "containers. 12 were sold, to 1 customer by name."
    )


def test_totals_stand_by_woods_tank_and_product(page):
    assert '<th scope="row">North woods</th><td>Tank 1</td>' in page
    row = re.search(r'<tr><th scope="row">Amber quart.*?</tr>', page, re.S)[0]
    assert re.findall(r'class="num">(\d+)<', row) == ["1", "20", "1", "12", "0"]


def test_the_chart_has_its_table_and_no_style_of_its_own(page):
    assert 'class="chart"' in page
    assert "2 Apr 2026" in page
    assert "style=" not in page
    assert page.count('<th scope="row">2 Apr 2026</th>') == 1


def test_losses_are_told_in_words(page, house):
    assert "of what went in" in page
    assert "common practice" in page
    row = seasons.BalanceRow(seasons.StepKind.BOIL, 1, 2, 100_000_000, 90_000_000)
    assert told.loss_words(row, house.facility) == (
        "22.0 lb lost, 10.0 % of what went in. 2 records left out: still open or not all measured."
    )
    gain = seasons.BalanceRow(seasons.StepKind.BOIL, 1, 0, 100_000_000, 101_000_000)
    assert "more came out than went in" in told.loss_words(gain, house.facility)
    none = seasons.BalanceRow(seasons.StepKind.BOIL, 0, 1, 0, 0)
    assert told.loss_words(none, house.facility).startswith("No record of it")


def test_an_empty_book_has_its_page_too(house, client):
    client.force_login(house.recorder)
    answer = client.get(reverse("season", args=[house.facility.slug]))
    assert answer.status_code == 200
    assert "nothing is recorded" in answer.content.decode()


@pytest.mark.parametrize("asked", ["2019", "x", "99999999999", "-1", "²"])
def test_a_season_without_records_is_not_found(page, house, client, asked):
    url = reverse("season", args=[house.facility.slug])
    assert client.get(url, {"season": asked}).status_code == 404
    assert client.get(url, {"season": "2026"}).status_code == 200


def test_liquid_without_a_reading_is_told_by_weight(house):
    dry = seasons.Amount(mass=453_592_370, lots=1)
    assert told.amount_words(dry, house.facility) == "1,000.0 lb"
    assert told.amount_words(seasons.Amount(lots=1, unmeasured=1), house.facility) == "not measured"
    assert told.amount_words(seasons.Amount(), house.facility) == "none"

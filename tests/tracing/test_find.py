"""Finding lots by words: accents and case do not matter, on either database."""

import pytest

from lots.models import Lot
from lots.recording import goods_out, setup
from lots.recording._sources import FromLot
from lots.tracing import find
from tests.factories import pieces, sugarhouse

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


@pytest.fixture
def jars(house):
    setup.change_row(house.context(house.owner), house.items["quart"], name="Sirop d’ÉRABLE ambré")
    setup.change_row(house.context(house.owner), house.customer, name="Épicerie CÔTÉ (fictive)")
    found = house.jars()
    goods_out.record_sale(
        house.context(hours=7), at=house.at(7), sold=[FromLot(found, pieces(2))],
        customer=house.customer,
    )  # fmt: skip
    return found


@pytest.mark.parametrize(
    "words",
    ["érable", "ERABLE", "erable ambre", "Cote", "épicerie côté", "ambré COTE", "s26092a", "S2609",
     "erable S26", "  Érable  "],
)  # fmt: skip
def test_jars_are_found_by_item_customer_and_code_in_any_spelling(house, jars, words):
    assert jars in find.lots_by_words(house.facility, words)


def test_a_supplier_s_name_finds_what_it_supplied(house, jars):
    aid = Lot.objects.get(item=house.items["aid"])
    assert list(find.lots_by_words(house.facility, "aid SUPPLY")) == [aid]


@pytest.mark.parametrize(
    "words", ["", "   ", "érable dark", "zzz", "%", "_", "é'; --", "\u0301", "z\x00q"]
)
def test_what_no_lot_has_finds_none(house, jars, words):
    assert list(find.lots_by_words(house.facility, words)) == []


def test_another_facility_s_words_find_nothing_here(house, jars):
    other = sugarhouse("other-place")
    assert list(find.lots_by_words(other.facility, "érable")) == []


def test_a_lot_comes_once_however_many_sales_it_had(house, jars):
    goods_out.record_sale(
        house.context(hours=8), at=house.at(8), sold=[FromLot(jars, pieces(1))],
        customer=house.customer,
    )  # fmt: skip
    assert find.lots_by_words(house.facility, "cote").count() == 1


@pytest.mark.parametrize("code", ["", " ", "\x00"])
def test_no_code_is_no_lot_s_code(house, jars, code):
    assert list(find.lots_by_code(house.facility, code)) == []
    assert find.nearest(house.facility, code) == []

"""Pages ask the database as often for a thousand rows as for ten."""

import pytest
from django.db import connection
from django.test.utils import CaptureQueriesContext
from django.urls import reverse

from lots.models import Lot
from lots.recording import goods_out, setup, upkeep
from lots.recording._sources import FromLot
from tests.factories import pieces

pytestmark = pytest.mark.django_db
# The most statements a page may take, log-in and facility among them.
PAGES = {
    "today": 16, "lots": 6, "vessels": 9, "journal": 6, "season": 22, "packets": 4, "rules": 4,
    "people": 5, "instruments": 5, "settings": 4,
}  # fmt: skip
REGISTERS = ("places", "materials", "partners")


def sell(house, jars, number):
    goods_out.record_sale(
        house.context(hours=10 + number), at=house.at(10 + number),
        sold=[FromLot(jars, pieces(1))], customer=house.customer, document=f"D-{number}",
    )  # fmt: skip


def grow(house, jars, numbers):
    """Record more of everything that a list or a lot's page shows."""
    for number in numbers:
        at = 10 + number
        house.collect("5", tank="Tank 2", hours=at)
        house.fill(hours=at, made=2)
        sell(house, jars, number)
        upkeep.record_cleaning(
            house.context(hours=at), at=house.at(at), vessel=house.places["Canner"],
            break_kind="rinsed",
        )  # fmt: skip
        owner = house.context(house.owner, hours=at)
        setup.add_instrument(owner, tag=f"H-{number}", kind="hydrometer")
        setup.add_partner(owner, name=f"Shop {number}", kind="customer")
        setup.add_place(owner, name=f"Drum {number + 10}", kind="drum")


@pytest.fixture
def jars(house):
    made = house.jars(made=12)
    grow(house, made, range(2))
    return made


def statements(client, url, query=None):
    with CaptureQueriesContext(connection) as asked:
        answer = client.get(url, query or {})
    assert answer.status_code == 200
    return [one["sql"] for one in asked]


def test_every_list_takes_as_many_statements_for_more_rows(client, house, jars):
    client.force_login(house.owner)
    urls = {name: reverse(name, args=[house.facility.slug]) for name in PAGES}
    urls |= {name: reverse("register", args=[house.facility.slug, name]) for name in REGISTERS}
    few = {name: len(statements(client, url)) for name, url in urls.items()}
    grow(house, jars, range(2, 7))
    many = {name: len(statements(client, url)) for name, url in urls.items()}

    assert many == few
    assert {name: many[name] for name, most in PAGES.items() if many[name] > most} == {}
    assert all(many[name] <= 5 for name in REGISTERS)


@pytest.mark.parametrize("question", ["composition", "with-aids", "all"])
@pytest.mark.parametrize("item", ["sap", "packed"])
def test_a_lot_s_page_takes_as_many_for_a_longer_chain(client, house, jars, item, question):
    client.force_login(house.lead)
    lot = Lot.objects.filter(item__kind=item).order_by("pk").first()
    url = reverse("lot", args=[house.facility.slug, lot.uuid])
    few = statements(client, url, {"question": question})
    grow(house, jars, range(2, 7))
    many = statements(client, url, {"question": question})
    assert len(many) == len(few), [sql for sql in many if sql not in few]
    assert len(many) <= 26


@pytest.mark.parametrize("page", ["trace", "chain"])
def test_a_trace_and_its_paper_take_as_many_for_a_longer_chain(
    client, house, jars, page, django_assert_max_num_queries
):
    client.force_login(house.lead)
    sap = Lot.objects.filter(item__kind="sap").order_by("pk").first()
    ends = [sap.uuid] if page == "chain" else []
    url = reverse(page, args=[house.facility.slug, *ends])
    query = {"q": sap.code, "question": "all"}
    few = len(statements(client, url, query))
    grow(house, jars, range(2, 7))
    with django_assert_max_num_queries(16):
        assert len(statements(client, url, query)) == few

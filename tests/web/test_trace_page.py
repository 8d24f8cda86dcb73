"""The trace page: a sentence to read aloud, an accounting that adds up, and several lots a code."""

import re
from datetime import date

import pytest
from django.urls import reverse

from lots.models import Lot
from lots.recording import goods_out, upkeep
from lots.recording._sources import FromLot
from lots.tracing import story
from lots.web import words
from tests.factories import pieces

pytestmark = pytest.mark.django_db


@pytest.fixture
def sold(house, client):
    """Jars of which some were sold, one came back and one was tasted; a lead looks."""
    jars = house.jars()
    sale = goods_out.record_sale(
        house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(12))],
        customer=house.customer, document="INV-7",
    )  # fmt: skip
    goods_out.record_sale(house.context(hours=8), at=house.at(8), sold=[FromLot(jars, pieces(1))])
    goods_out.record_customer_return(
        house.context(hours=9), at=house.at(9), sale=sale, lot=jars, amount=pieces(2),
        into=house.places["Store"], reason="dented",
    )  # fmt: skip
    goods_out.record_removal(
        house.context(hours=9), at=house.at(9), lot=jars, reason="tasting", amount=pieces(1)
    )
    client.force_login(house.lead)
    jars.refresh_from_db()
    return jars


def ask(client, house, **query):
    answer = client.get(reverse("trace", args=[house.facility.slug]), query)
    assert answer.status_code == 200
    return answer.content.decode()


def sentence_of(page):
    return re.search(r'<p class="sentence">(.*?)</p>', page)[1]


def test_the_first_thing_said_can_be_read_aloud(client, house, sold):
    page = ask(client, house, q=sold.code)
    assert sentence_of(page) == (
        "S26092A: 20 pieces of Amber quart, filled 2 April 2026, from the boil of 2 April 2026. "
        "Sap from North woods. Bought in from Aid Supply (fictional). "
        "13 pieces shipped, 6 pieces in store, 1 piece removed, 2 pieces came back. "
        "It reached 1 customer and buyers over the counter. All of it is accounted for."
    )
    assert page.index("sentence") < page.index("Accounting of") < page.index('class="picture')


def test_the_accounting_adds_up_line_by_line(house, sold):
    rows = words.accounting_rows(story.tell(sold))
    amounts = {row.label: int(row.amount.split()[0]) for row in rows}
    assert amounts["Made"] + amounts["Adjusted"] == amounts["To account for"] == 20
    parts = [row for row in rows[3:] if not row.kind and row.label != "Unexplained"]
    assert sum(int(row.amount.split()[0]) for row in parts) == amounts["Accounted for"] == 20
    assert amounts["of which came back, as a lot of its own"] == 2
    assert amounts["Unexplained"] == 0


def test_a_pending_lot_says_that_it_is_not_settled(house, sold):
    sold.made = None
    rows = words.accounting_rows(story.tell(sold))
    assert (rows[0].label, rows[0].amount) == ("Made", "not measured")
    assert rows[-1].amount == "not measured"


def test_customers_stand_with_amount_day_and_document(client, house, sold):
    page = ask(client, house, q=sold.code)
    row = re.search(r"<tr><th scope=\"row\">Corner Shop.*?</tr>", page, re.S)[0]
    assert "12 pieces" in row
    assert "2 pieces came back" in row
    assert "INV-7" in row
    assert "2 April 2026" in row
    assert "over the counter" in page


def test_suppliers_woods_people_and_the_bound_are_told(client, house, sold):
    page = ask(client, house, q=sold.code, direction="back")
    assert "DE-77" in page
    assert "North woods, 1 collection, 2 April 2026" in page
    assert "maple-ridge-recorder, 5 records" in page
    assert "Not recorded as emptied before first used here" in page
    assert "Who got it" not in page


def test_forward_alone_says_nothing_of_suppliers(client, house, sold):
    page = ask(client, house, q=sold.code, direction="forward", question="all")
    assert "DE-77" not in page
    assert "Corner Shop" in page
    assert 'value="forward" selected' in page
    assert 'value="all" selected' in page


def test_nonsense_in_the_selects_is_the_default(client, house, sold):
    page = ask(client, house, q=sold.code, direction="sideways", question="why", lot="x")
    assert 'value="both" selected' in page
    assert 'value="with-aids" selected' in page


def test_several_lots_under_one_code_are_told_together_and_one_is_chosen(client, house, sold):
    upkeep.record_split(
        house.context(house.lead, hours=10), at=house.at(10), lot=sold, amount=pieces(4),
        reason="dented case", held=True,
    )  # fmt: skip
    page = ask(client, house, q="s26092a")
    assert sentence_of(page) == (
        "s26092a stands on 3 lots of Amber quart; they reached 1 customer and buyers over the "
        "counter. Choose one to trace it."
    )
    assert 'class="picture' not in page
    assert "12 pieces" in page

    part = Lot.objects.get(made_by__kind="split")
    page = ask(client, house, q="s26092a", lot=str(part.uuid))
    assert f'Accounting of <span class="mono">{part.code}</span>' in page
    assert "on hold" in page


def test_an_unknown_code_leads_to_the_nearest(client, house, sold):
    page = ask(client, house, q="S26099Z")
    assert sentence_of(page).startswith("No lot carries S26099Z.")
    assert sold.code in page


def test_markup_in_the_question_is_text(client, house, sold):
    assert "<script>" not in ask(client, house, q="<script>alert(1)</script>")


def test_the_chain_on_paper_comes_in_pieces(client, house, sold):
    answer = client.get(reverse("chain", args=[house.facility.slug, sold.uuid]))
    page = answer.content.decode()
    assert answer.status_code == 200
    assert page.count("<figure") == page.count('role="img"') >= 2


def test_days_are_said_as_people_say_them():
    days = [date(2026, 3, 31), date(2026, 4, 1), date(2026, 4, 2)]
    assert words.days_words(days[:1]) == "31 March 2026"
    assert words.days_words(days[:2]) == "31 March and 1 April 2026"
    assert words.days_words(days) == "31 March to 2 April 2026"
    assert words.days_words([date(2025, 12, 31), days[0]]) == "31 December 2025 and 31 March 2026"
    assert words.listed(["a", "b", "c"]) == "a, b and c"

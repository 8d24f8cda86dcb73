"""The list of lots: searched by words as people type them, and by state."""

import pytest
from django.urls import reverse

from lots.recording import setup

pytestmark = pytest.mark.django_db


@pytest.fixture
def ask(house, client):
    client.force_login(house.recorder)
    page = reverse("lots", args=[house.facility.slug])

    def asked(**query):
        answer = client.get(page, query)
        assert answer.status_code == 200
        return answer.content.decode()

    return asked


@pytest.mark.engine
@pytest.mark.parametrize("words", ["érable", "ERABLE", "Erable amb"])
def test_words_are_found_whatever_their_accents_and_case(house, ask, words):
    setup.change_row(house.context(house.owner), house.items["quart"], name="Sirop d’ÉRABLE ambré")
    jars = house.jars()
    page = ask(q=words)
    assert jars.code in page
    assert "North woods" not in page
    assert page.count('class="mono"') == 1
    assert f'value="{words}"' in page


def test_a_state_and_words_narrow_together(house, ask):
    jars = house.jars(density="66.0")
    assert jars.code in ask(state="held")
    assert jars.code in ask(state="waiting", q="quart")
    assert jars.code not in ask(state="released", q="quart")
    assert "No lot matches." in ask(state="rejected")


@pytest.mark.engine
@pytest.mark.parametrize("query", [{"q": "a\x00b"}, {"state": "\x00"}, {"state": "x"},
                                   {"page": "-3"}, {"sort": "nothing"}, {"q": "%"}])  # fmt: skip
def test_nonsense_is_answered(house, ask, query):
    house.jars()
    ask(**query)

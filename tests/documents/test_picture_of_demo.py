"""The picture of the demo season's chains: the largest, some small ones, and what was rejected."""

from datetime import UTC, datetime

import pytest

from lots.documents import picture
from lots.documents.chain_graph import MOST_LOTS
from lots.management import season
from lots.models import Lot
from lots.tracing import story
from tests.documents.drawn import assert_readable


@pytest.mark.django_db
def test_the_largest_chain_and_small_ones_can_be_read():
    season.load(datetime(2026, 6, 1, 12, tzinfo=UTC))
    lots = Lot.objects.select_related("item", "made_by", "facility").order_by("pk")
    first_sap = lots.filter(item__kind="sap").first()
    largest = story.tell(first_sap, "all")
    assert 200 < len(largest.lots) <= MOST_LOTS

    for one in (largest, *(story.tell(lot, "all") for lot in lots[9::60])):
        drawn = assert_readable(picture.svg(one))
        assert {lot.code for lot in one.lots.values()} <= set(drawn.words)
        for sheet in picture.sheets(one):
            assert_readable(sheet.svg)

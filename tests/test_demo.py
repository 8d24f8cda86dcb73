"""The demo season: it loads by the recording functions, agrees with itself, and balances."""

from datetime import UTC, datetime

import pytest
from django.db import connection
from django.db.models import Sum

from lots.management import season
from lots.models import Draw, Hold, JournalEntry, Lot, Step, StepKind
from lots.tracing import cone, story, verify

pytestmark = pytest.mark.django_db


def test_the_season_loads_verifies_and_balances():
    loaded = season.load(datetime(2026, 6, 1, 12, tzinfo=UTC))

    chain = loaded.facility.chain
    chain.refresh_from_db()
    assert list(verify.chain_faults(chain)) == []
    assert list(verify.ledger_faults()) == []
    assert "DEMO" in JournalEntry.objects.get(chain=chain, seq=1).label
    counts = {kind: Step.objects.filter(kind=kind).count() for kind in StepKind}
    assert counts[StepKind.BOIL] >= 25
    assert counts[StepKind.CONTAINER_FILL] == 40
    assert counts[StepKind.SALE] >= 150
    assert Step.objects.filter(kind=StepKind.BOIL, ended_at=None).count() == 1
    assert Hold.objects.filter(ended_at=None).exists()
    closed = Step.objects.filter(kind=StepKind.CONCENTRATION)
    fed = Draw.objects.filter(ended_at=None, step__in=closed)
    sap_in = fed.aggregate(all=Sum("solids"))["all"]
    syrup = Lot.objects.filter(made_by__kind=StepKind.BOIL, item__kind="syrup")
    out = syrup.aggregate(all=Sum("solids_made"))["all"]
    # Loss over RO, boil and the pans' last contents stays within 3 % of the solids fed.
    assert 0 <= (sap_in - out) / sap_in <= 0.03
    jars = loaded.tags["F0"]
    told = story.tell(jars)
    assert told.woods == ["North woods", "South woods"]
    assert "Ridge Filter Supply" in told.suppliers
    assert told.accounting.unexplained == 0
    if connection.vendor == "sqlite":
        with connection.cursor() as cursor:
            cursor.execute("ANALYZE")
        for plan in (cone.plan(cone.back_sql(), 1), cone.plan(cone.forward_sql(), 1, 1)):
            draws = [line for line in plan if " d " in line]
            assert draws
            assert all(line.startswith("SEARCH d USING INDEX draw_") for line in draws)
            assert not any("BLOOM" in line for line in plan)

"""A season's totals: what is counted, what is left out, and where a season begins."""

from datetime import UTC, datetime

import pytest
from django.db import connection
from django.test.utils import CaptureQueriesContext

from lots.models import StepKind
from lots.recording import decisions, goods_out, sap
from lots.recording._sources import FromLot
from lots.tracing import season
from tests.factories import pieces, sugarhouse

pytestmark = [pytest.mark.django_db, pytest.mark.engine]


@pytest.fixture
def sold(house):
    jars = house.jars()
    goods_out.record_sale(
        house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(12))],
        customer=house.customer,
    )  # fmt: skip
    return season.of_year(house.facility, 2026)


def test_the_season_counts_what_came_in_was_made_and_was_sold(house, sold):
    [row] = sold.sap
    assert (row.woods, row.tank, row.amount.lots) == ("North woods", "Tank 1", 1)
    # 400 US gal at 2.0 °Brix: 1514.16 L x 1.0060 kg/L (ICUMSA density at 20 °C, DERIVED).
    assert row.amount.mass / 1e6 == pytest.approx(1523.3, abs=0.5)
    assert row.amount.brix == pytest.approx(2.0, abs=0.01)
    assert (sold.boils.number, sold.boils.open, sold.boils.hours) == (1, 0, 3.0)
    [product] = sold.products
    assert (product.name, product.runs, product.made, product.sold) == ("Amber quart", 1, 20, 12)
    assert sold.customers == 1
    assert [str(row.day) for row in sold.days] == ["2026-04-02"]


def test_solids_in_and_out_follow_the_records(house, sold):
    rows = {row.kind: row for row in sold.balance}
    boil = rows[StepKind.BOIL]
    assert boil.solids_in == sold.sap_total.solids
    assert boil.solids_out > 0
    assert rows[StepKind.CONTAINER_FILL].steps == 1
    assert StepKind.CONCENTRATION not in rows


def test_what_was_not_measured_is_counted_and_leaves_its_records_out(house):
    house.collect()
    sap.record_collection(
        house.context(hours=1), at=house.at(1), woods=house.places["North woods"],
        tank=house.places["Tank 1"], item=house.items["sap"], not_measured_reason="gauge broken",
    )  # fmt: skip
    house.boil()
    found = season.of_year(house.facility, 2026)
    assert found.sap_total.unmeasured == 1
    [boil] = found.balance
    assert (boil.kind, boil.steps, boil.left_out) == (StepKind.BOIL, 0, 1)


def test_a_voided_record_counts_nowhere(house):
    lot = house.collect()
    decisions.void_step(house.context(house.lead, hours=1), step=lot.made_by, reason="wrong tank")
    found = season.of_year(house.facility, 2026)
    assert found.sap == []
    assert found.days == []


def test_another_facility_s_season_is_its_own(house):
    sugarhouse("other-place").jars()
    assert season.of_year(house.facility, 2026).sap == []
    assert season.years(house.facility) == []


def test_a_season_begins_with_its_month_by_the_facility_s_clock(house):
    house.facility.season_start_month = 10
    last = datetime(2026, 10, 1, 3, 59, tzinfo=UTC)  # 30 September, 23:59 in New York
    first = datetime(2026, 10, 1, 4, 0, tzinfo=UTC)
    assert season.year_of(house.facility, last) == 2025
    assert season.year_of(house.facility, first) == 2026
    assert season.start_of(house.facility, 2026) == first
    house.collect()
    assert season.years(house.facility) == [2025]
    assert season.of_year(house.facility, 2025).sap_total.lots == 1
    assert season.of_year(house.facility, 2026).sap == []


def test_a_day_is_the_facility_s_day(house):
    house.collect(hours=11)  # 03:00 UTC on 3 April is 23:00 on 2 April in New York
    [row] = season.of_year(house.facility, 2026).days
    assert str(row.day) == "2026-04-02"


def test_a_season_takes_few_statements(house, sold, django_assert_max_num_queries):
    with CaptureQueriesContext(connection) as before:
        season.of_year(house.facility, 2026)
    for number in range(6):
        house.collect("50", hours=8 + number)
    with django_assert_max_num_queries(20) as after:
        season.of_year(house.facility, 2026)
    assert len(after) == len(before)

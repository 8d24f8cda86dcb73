"""The packet: every number in PDF, spreadsheet and page agrees, and text stays text."""

import io

import pytest
from django.core.management import call_command
from django.urls import reverse
from openpyxl import load_workbook

from lots.documents import packet, packet_pdf, packet_xlsx
from lots.recording import amend, goods_out
from lots.recording._sources import FromLot
from tests.factories import pieces

pytestmark = pytest.mark.django_db


@pytest.fixture
def made(house):
    jars = house.jars(density="66.4")
    house.facility.refresh_from_db()
    return packet.build(house.facility, [jars], house.at(9))


def test_the_workbook_holds_the_packets_rows(made):
    book = load_workbook(io.BytesIO(packet_xlsx.xlsx(made)))

    for sheet in made.sheets:
        rows = [tuple(cell or "" for cell in row) for row in book[sheet.title].values]
        assert rows == [sheet.heads, *sheet.rows]


def test_the_page_says_what_was_found_and_to_whom_it_went(made):
    text = packet_pdf.html(made)
    assert "below the minimum of 66.9 °Brix" in text
    assert "DE-77" in text
    assert made.chain_head in text
    assert "Vermont Agency of Agriculture" in text


def test_the_same_packet_gives_the_same_pdf(made):
    first = packet_pdf.pdf(made)
    assert first.startswith(b"%PDF")
    assert packet_pdf.pdf(made) == first


def test_a_formula_in_a_document_number_stays_text(house):
    jars = house.jars()
    goods_out.record_sale(
        house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(1))],
        customer=house.customer, document='=HYPERLINK("x")',
    )  # fmt: skip
    made = packet.build(house.facility, [jars], house.at(9))
    book = load_workbook(io.BytesIO(packet_xlsx.xlsx(made)))
    kinds = {cell.data_type for row in book["Trace forward"].iter_rows() for cell in row}
    assert kinds <= {"s", "inlineStr", "n"}


@pytest.mark.parametrize("form", ["pdf", "xlsx", "html"])
def test_an_inspector_takes_the_packet(client, house, form):
    jars = house.jars()
    client.force_login(house.inspector)
    answer = client.get(reverse("packet", args=[house.facility.slug, jars.uuid, form]))
    assert answer.status_code == 200


def test_a_packet_by_codes_and_days_names_an_unknown_code(client, house):
    jars = house.jars()
    client.force_login(house.lead)
    page = reverse("packets", args=[house.facility.slug])
    assert client.get(page).status_code == 200
    unknown = client.get(page, {"codes": "NOPE", "form": "xlsx"})
    assert unknown.status_code == 422
    assert "No lot carries NOPE" in unknown.content.decode()
    by_day = client.get(page, {"first": "2026-04-02", "form": "xlsx"})
    book = load_workbook(io.BytesIO(by_day.content))
    assert book["Lots"]["A2"].value == jars.code


def test_the_command_writes_both_files(house, tmp_path):
    jars = house.jars()
    call_command("packet", jars.code, out=tmp_path, stdout=io.StringIO())
    assert (tmp_path / "packet.pdf").read_bytes().startswith(b"%PDF")
    assert load_workbook(tmp_path / "packet.xlsx")["Lots"]["A2"].value == jars.code


def test_what_was_typed_in_a_record_stands_in_the_packet(house):
    house.receive_aid()
    house.collect()
    house.boil()
    house.filter()
    jars = house.fill()
    sale = goods_out.record_sale(
        house.context(hours=7), at=house.at(7), sold=[FromLot(jars, pieces(3))],
        customer=house.customer, document="INV-9", address="Back door",
    )  # fmt: skip
    amend.amend_step(
        house.context(house.lead, 8), step=sale, field="document", new="INV-10", reason="misread"
    )
    made = packet.build(house.facility, [jars], house.at(9))

    text = packet_pdf.html(made)
    for words in ("INV-10", "INV-9", "misread", "Delivered to: Back door", "Corner Shop"):
        assert words in text
    heads = {sheet.title for sheet in made.sheets}
    assert {"Sales", "Corrections", "Cleaning", "Received", "Not posted"} <= heads

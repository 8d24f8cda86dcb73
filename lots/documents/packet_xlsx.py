"""A packet as a spreadsheet: one sheet a kind of record, every cell plain text."""

import io
from typing import Any

from openpyxl import Workbook
from openpyxl.cell import WriteOnlyCell
from openpyxl.cell.cell import ILLEGAL_CHARACTERS_RE

from .packet import Packet


def _cell(sheet: Any, value: str) -> WriteOnlyCell:
    """Return a text cell: a leading "=" must never become a formula."""
    cell = WriteOnlyCell(sheet, value=ILLEGAL_CHARACTERS_RE.sub("", value))
    cell.data_type = "s"
    return cell


def xlsx(packet: Packet) -> bytes:
    """Return the packet's workbook."""
    book = Workbook(write_only=True)
    cover = book.create_sheet("Packet")
    for row in (
        ("Facility", packet.facility),
        ("Address", packet.address),
        ("Made", packet.made_at),
        ("Lots", "; ".join(packet.lots)),
        ("Journal entries", str(packet.chain_seq)),
        ("Chain head", packet.chain_head),
        ("Note", "Fictional demonstration data" if packet.fictional else ""),
        ("Caution", packet.caution),
        *packet.regulators,
    ):
        cover.append([_cell(cover, value) for value in row])
    for sheet in packet.sheets:
        page = book.create_sheet(sheet.title)
        for row in (sheet.heads, *sheet.rows):
            page.append([_cell(page, value) for value in row])
    made = io.BytesIO()
    book.save(made)
    return made.getvalue()

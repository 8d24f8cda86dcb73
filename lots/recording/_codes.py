"""Codes: internal ones, unique in their facility, and the printed ones of runs."""

from datetime import datetime
from zoneinfo import ZoneInfo

from lots.identification import lot_code
from lots.models import Item, Lot, LotState, PrintedCode

from ._door import Writer
from .errors import CodeTaken


def internal_code(writer: Writer, item: Item, at: datetime) -> str:
    """Return a fresh internal code: kind letter, year, day of year, running number."""
    day = at.astimezone(_zone(writer)).date()
    prefix = f"{item.kind[:1].upper()}{day:%y%j}"
    while True:
        code = f"{prefix}-{writer.next_number('lot:' + prefix) + 1}"
        # A code typed by hand, such as one on an old drum, may have taken the next one.
        if not Lot.objects.filter(facility=writer.facility, code=code).exists():
            return code


def _zone(writer: Writer) -> ZoneInfo:
    return ZoneInfo(writer.facility.zone)


def reserve_code(writer: Writer, item: Item, at: datetime, text: str = "") -> PrintedCode:
    """Take the printed code of a run: the one given, or the next of the facility's pattern.

    The run of a voided record may be entered again with its own code.
    """
    if text:
        clean = lot_code.normalise(text)
        if not lot_code.is_valid(clean):
            raise CodeTaken(
                f"{text} cannot be printed: use up to 10 of A–Z without O and I, 0–9, hyphen.",
                field="printed_code",
            )
        found = PrintedCode.objects.filter(item=item, text=clean).first()
        if found and found.lots.exists() and not found.lots.exclude(state=LotState.VOID).exists():
            return found
        if found:
            raise CodeTaken(f"{clean} is already on {item.name}.", field="printed_code")
        return writer.touch(
            PrintedCode.objects.create(facility=writer.facility, item=item, text=clean)
        )
    day = at.astimezone(_zone(writer)).date()
    while True:
        serial = writer.next_number(f"printed:{day:%y%j}")
        clean = lot_code.render(writer.facility.code_pattern, day, serial)
        if not PrintedCode.objects.filter(item=item, text=clean).exists():
            return writer.touch(
                PrintedCode.objects.create(facility=writer.facility, item=item, text=clean)
            )

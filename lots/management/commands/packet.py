"""Write a packet of lots or dates as PDF and spreadsheet."""

from datetime import date
from pathlib import Path
from typing import Any

from django.core.management.base import BaseCommand, CommandError, CommandParser
from django.utils import timezone

from lots.documents import packet, packet_pdf, packet_xlsx
from lots.models import Facility
from lots.tracing import find


class Command(BaseCommand):
    """``manage.py packet [CODE …] [--from DAY --to DAY] [--facility SLUG] [--out FOLDER]``."""

    help = "Write a packet: the records of lots, or of the packed lots of some days."

    def add_arguments(self, parser: CommandParser) -> None:
        """Accept codes, dates, a facility and a folder."""
        parser.add_argument("codes", nargs="*")
        parser.add_argument("--from", dest="first", type=date.fromisoformat)
        parser.add_argument("--to", dest="last", type=date.fromisoformat)
        parser.add_argument("--facility", default="")
        parser.add_argument("--out", type=Path, default=Path("."))

    def handle(self, *args: Any, **options: Any) -> None:
        """Find the lots and write both files."""
        facility = self._facility(options["facility"])
        lots = [lot for code in options["codes"] for lot in find.lots_by_code(facility, code)]
        if options["first"]:
            last = options["last"] or options["first"]
            lots += find.packed_between(facility, options["first"], last)
        if not lots:
            raise CommandError("No lot matches; give codes, or --from and --to.")
        made = packet.build(facility, list(dict.fromkeys(lots)), timezone.now())
        options["out"].mkdir(parents=True, exist_ok=True)
        sheet = options["out"] / "packet.xlsx"
        sheet.write_bytes(packet_xlsx.xlsx(made))
        self.stdout.write(f"Wrote {sheet}")
        try:
            paper = options["out"] / "packet.pdf"
            paper.write_bytes(packet_pdf.pdf(made))
        except packet_pdf.PdfNotAvailable as error:
            paper = options["out"] / "packet.html"
            paper.write_text(packet_pdf.html(made), encoding="utf-8")
            self.stderr.write(str(error))
        self.stdout.write(f"Wrote {paper}")

    @staticmethod
    def _facility(slug: str) -> Facility:
        rows = Facility.objects.filter(slug=slug) if slug else Facility.objects.order_by("pk")
        found = rows.first()
        if found is None:
            raise CommandError("There is no such facility.")
        return found

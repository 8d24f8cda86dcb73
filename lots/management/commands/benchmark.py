"""Measure the book on this machine: loading, recording, tracing, the season's packet, lists."""

import resource
import statistics
import time
from collections.abc import Callable
from decimal import Decimal
from typing import Any
from unittest import mock

from django.core.management import call_command
from django.core.management.base import BaseCommand, CommandParser
from django.db import connection, transaction
from django.test import RequestFactory
from django.utils import timezone

from lots.documents import packet, packet_pdf, packet_xlsx
from lots.management import season
from lots.models import Lot, Membership
from lots.recording import container_fill, journal, receiving
from lots.recording._sources import FromLot
from lots.recording.context import Context
from lots.recording.measures import DensityReading, Typed
from lots.tracing import story
from lots.web.views import browse


class RolledBack(Exception):
    """Ends a benchmark's transaction so that nothing of it stays."""


class Command(BaseCommand):
    """``manage.py benchmark``: everything is rolled back; run it on a scratch data folder."""

    help = "Measure loading, recording, tracing, packets and lists; nothing is kept."

    def add_arguments(self, parser: CommandParser) -> None:
        """Accept how many fills and list rows to make."""
        parser.add_argument("--fills", type=int, default=100)
        parser.add_argument("--rows", type=int, default=100_000)

    def handle(self, *args: Any, **options: Any) -> None:
        """Run each measurement inside one transaction and roll it back."""
        call_command("migrate", verbosity=0)
        call_command("collectstatic", interactive=False, verbosity=0)
        self.stdout.write(f"Engine: {connection.vendor}")
        try:
            with transaction.atomic():
                self._measure(options["fills"], options["rows"])
                raise RolledBack
        except RolledBack:
            self.stdout.write("Rolled back: nothing was kept.")

    def _measure(self, fills: int, rows: int) -> None:
        loaded, seconds = timed(lambda: season.load(timezone.now(), suffix="-benchmark"))
        peak = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss // 1024
        self.stdout.write(f"Demo season: {seconds:.1f} s CPU, peak memory {peak} MiB")
        self._fills(loaded, fills)
        packed = list(Lot.objects.filter(facility=loaded.facility, item__kind="packed"))
        traces = [timed(lambda lot=lot: story.tell(lot, "all")) for lot in packed]
        told, seconds = max(traces, key=lambda pair: len(pair[0].back.links))
        size = len(told.back.links) + len(told.forward.links)
        self.stdout.write(f"Largest demo trace: {size} draws, {seconds * 1000:.1f} ms CPU")
        made, seconds = timed(lambda: packet.build(loaded.facility, packed, timezone.now()))
        self.stdout.write(f"Packet of {len(packed)} lots, data: {seconds:.1f} s CPU")
        _, seconds = timed(lambda: packet_xlsx.xlsx(made))
        self.stdout.write(f"Its spreadsheet: {seconds:.1f} s CPU")
        one = packet.build(loaded.facility, packed[:1], timezone.now())
        _, seconds = timed(lambda: packet_pdf.pdf(one))
        self.stdout.write(f"PDF of one lot: {seconds:.1f} s CPU")
        self._list(loaded, rows)

    def _fills(self, loaded: season.Season, fills: int) -> None:
        owner = Membership.objects.get(facility=loaded.facility, role="owner").user
        context, at = Context(loaded.facility, owner), timezone.now()
        step = receiving.record_receiving(
            context, at=at, supplier=loaded.partner("Hollow Brook Farm (neighbour)"),
            item=loaded.item("Syrup"), amount=Typed(Decimal(200_000), "lb"),
            place=loaded.place("Batch tank 2"), brix=DensityReading(Decimal("67.2")),
        )  # fmt: skip
        bulk, spent, in_journal = step.made_lots.get(), [], []

        def append(**fields: Any) -> Any:
            entry, seconds = timed(lambda: original(**fields))
            in_journal.append(seconds)
            return entry

        original = journal.append
        run = container_fill.Run(
            product=loaded.item("Amber quart"), made=100, into=loaded.place("Store"),
            fill_temperatures=[Typed(Decimal(186), "°F")], brix=DensityReading(Decimal("67.2")),
            transmittance=Typed(Decimal(62), "%Tc"),
        )  # fmt: skip
        sources = [FromLot(bulk, Typed(Decimal(280), "lb"))]
        with mock.patch.object(journal, "append", append):
            for _ in range(fills):
                _, seconds = timed(
                    lambda: container_fill.record_container_fill(
                        context, at=at, sources=sources, run=run
                    )
                )
                spent.append(seconds)
        middle, high = statistics.median(spent), statistics.quantiles(spent, n=20)[-1]
        share = 100 * sum(in_journal) / sum(spent)
        self.stdout.write(
            f"Container fill: median {middle * 1000:.1f} ms, 95th percentile {high * 1000:.1f} ms "
            f"CPU, {share:.0f} % of it the journal"
        )

    def _list(self, loaded: season.Season, rows: int) -> None:
        pattern = Lot.objects.filter(facility=loaded.facility).first()
        names = [field.name for field in Lot._meta.concrete_fields if not field.generated]
        kept = {name: getattr(pattern, name) for name in names if name not in ("id", "uuid")}
        for start in range(0, rows, 1000):
            # Bulk rows of a benchmark, rolled back with it: no record is made here.
            Lot.objects.bulk_create(
                Lot(**{**kept, "code": f"BENCH-{number}"}) for number in range(start, start + 1000)
            )
        request = RequestFactory().get("/")
        request.user = Membership.objects.get(facility=loaded.facility, role="owner").user
        _, seconds = timed(lambda: browse.lots(request, loaded.facility.slug))
        self.stdout.write(f"Lots page at {rows} rows: {seconds * 1000:.0f} ms CPU")


def timed(work: Callable[[], Any]) -> tuple[Any, float]:
    """Return a result and the CPU seconds it took."""
    start = time.process_time()
    result = work()
    return result, time.process_time() - start

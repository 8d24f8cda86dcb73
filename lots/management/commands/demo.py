"""Load the fictional demo season and serve it on this machine."""

import shutil
from typing import Any

from django.conf import settings
from django.core.management import call_command
from django.core.management.base import BaseCommand, CommandError, CommandParser
from django.db import connection, transaction
from django.utils import timezone

from lots.management import season
from lots.models import Facility


class Command(BaseCommand):
    """``manage.py demo``: data in ``data/demo/``, apart from any real book."""

    help = "Load the fictional demo season, then serve it on 127.0.0.1."

    def add_arguments(self, parser: CommandParser) -> None:
        """Accept --no-serve, --reset and --port."""
        parser.add_argument("--no-serve", action="store_true", help="stop after loading")
        parser.add_argument("--reset", action="store_true", help="build the season anew")
        parser.add_argument("--port", default="8000")

    def handle(self, *args: Any, **options: Any) -> None:
        """Load once; a second run keeps the data."""
        if options["reset"]:
            self._reset()
        call_command("migrate", verbosity=0)
        if Facility.objects.filter(fictional=False).exists():
            raise CommandError(
                "This data folder or database holds a real book; the demo keeps out of it. "
                "Unset DATABASE_URL and SUGARHOUSE_DATA to give the demo its own."
            )
        if not Facility.objects.filter(slug="birch-hollow").exists():
            self.stdout.write("Recording the demo season (fictional data) …")
            with transaction.atomic():
                season.load(timezone.now())
        call_command("collectstatic", interactive=False, verbosity=0)
        self.stdout.write(f"Demo log-ins, password {season.PASSWORD}:")
        for name in ("demo-recorder", "demo-lead", "demo-owner", "demo-inspector"):
            self.stdout.write(f"  {name}")
        if not options["no_serve"]:
            call_command("serve", port=options["port"])

    def _reset(self) -> None:
        """Remove the demo's own SQLite file; a shared database is never emptied."""
        if connection.vendor != "sqlite" or settings.DATA_DIR.name != "demo":
            self.stderr.write("--reset works only on the demo's own folder; nothing was removed.")
            return
        connection.close()
        for path in settings.DATA_DIR.glob("sugarhouse.sqlite3*"):
            path.unlink()
        shutil.rmtree(settings.STATIC_ROOT, ignore_errors=True)

"""Serve the book on this machine, or on the local network with --lan."""

import os
import socket
from typing import Any

import segno
import waitress
from django.conf import settings
from django.core.management import call_command
from django.core.management.base import BaseCommand, CommandError, CommandParser

from lots.db.guards import missing_guards


class Command(BaseCommand):
    """``manage.py serve [--lan] [--port N]``."""

    help = "Serve the book on 127.0.0.1, or on the local network with --lan."

    def add_arguments(self, parser: CommandParser) -> None:
        """Accept --lan and --port."""
        parser.add_argument("--lan", action="store_true", help="listen on the local network")
        parser.add_argument("--port", default="8000")

    def handle(self, *args: Any, **options: Any) -> None:
        """Migrate, refuse to run without the guards, then serve."""
        call_command("migrate", verbosity=0)
        if missing := missing_guards():
            raise CommandError(f"The database lacks its guards: {', '.join(missing)}.")
        call_command("collectstatic", interactive=False, verbosity=0)
        host = self._lan_address() if options["lan"] else "127.0.0.1"
        address = f"http://{host}:{options['port']}/"
        if options["lan"]:
            settings.ALLOWED_HOSTS.append(host)
            segno.make(address).terminal(out=self.stdout, compact=True)
        self.stdout.write(f"Serving on {address} — Ctrl-C stops.")
        from sugarhouse.wsgi import application

        os.environ.setdefault("PYTHONUNBUFFERED", "1")
        listen = f"{'0.0.0.0' if options['lan'] else host}:{options['port']}"  # noqa: S104
        waitress.serve(application, listen=listen, threads=8, ident="")

    @staticmethod
    def _lan_address() -> str:
        """Return this machine's address on the local network; no packet is sent."""
        with socket.socket(socket.AF_INET, socket.SOCK_DGRAM) as probe:
            try:
                probe.connect(("192.0.2.1", 9))
            except OSError as error:
                raise CommandError("This machine is on no network.") from error
            return str(probe.getsockname()[0])

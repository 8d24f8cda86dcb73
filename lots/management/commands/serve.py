"""Serve the book on this machine, or on the local network with --lan."""

import io
import socket
from typing import Any

import segno
import waitress
from django.conf import settings
from django.core.management import call_command
from django.core.management.base import BaseCommand, CommandError, CommandParser

from lots.db.guards import missing_guards


class Command(BaseCommand):
    """``manage.py serve [--lan | --host ADDRESS] [--port N]``."""

    help = "Serve the book on 127.0.0.1, or on the local network with --lan."

    def add_arguments(self, parser: CommandParser) -> None:
        """Accept --lan or --host, and --port."""
        where = parser.add_mutually_exclusive_group()
        where.add_argument("--lan", action="store_true", help="listen on the local network")
        where.add_argument("--host", default="127.0.0.1", help="the address to listen on")
        parser.add_argument("--port", type=int, default=8000)

    def handle(self, *args: Any, **options: Any) -> None:
        """Migrate, refuse to run without the guards, then serve."""
        call_command("migrate", verbosity=0)
        if missing := missing_guards():
            raise CommandError(f"The database lacks its guards: {', '.join(missing)}.")
        call_command("collectstatic", interactive=False, verbosity=0)
        host = self._lan_address() if options["lan"] else options["host"]
        settings.ALLOWED_HOSTS.append(host)
        listen = "0.0.0.0" if options["lan"] else host  # noqa: S104 - asked for by --lan
        server = self._server(listen, int(options["port"]))
        address = f"http://{host}:{options['port']}/"
        if options["lan"]:
            self.stdout.write(self._qr(address))
        self.stdout.write(f"Serving on {address} (Ctrl-C stops).")
        self.stdout.flush()
        server.run()

    @staticmethod
    def _server(listen: str, port: int) -> Any:
        """Bind the address; behind a TLS proxy on this machine, believe what it says of TLS."""
        from sugarhouse.wsgi import application

        proxy = {
            "trusted_proxy": "127.0.0.1",
            "trusted_proxy_headers": {"x-forwarded-proto", "x-forwarded-for"},
        } if settings.HTTPS else {}  # fmt: skip
        try:
            return waitress.create_server(
                application, listen=f"{listen}:{port}", threads=8, ident="", **proxy
            )
        except (OSError, ValueError) as error:
            raise CommandError(
                f"Cannot listen on {listen}, port {port}: {error}. Choose another with --port."
            ) from error

    @staticmethod
    def _qr(address: str) -> str:
        """Return the address as a QR code of characters, drawn whole before it is written."""
        drawn = io.StringIO()
        segno.make(address).terminal(out=drawn, compact=True)
        return drawn.getvalue()

    @staticmethod
    def _lan_address() -> str:
        """Return this machine's address on the local network; no packet is sent."""
        with socket.socket(socket.AF_INET, socket.SOCK_DGRAM) as probe:
            try:
                probe.connect(("192.0.2.1", 9))
            except OSError as error:
                raise CommandError("This machine is on no network.") from error
            return str(probe.getsockname()[0])

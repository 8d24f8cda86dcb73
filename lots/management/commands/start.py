"""Begin a real book: the facility, its owner's log-in, rule set, units and season start."""

import getpass
from typing import Any

from django.contrib.auth.password_validation import validate_password
from django.core.exceptions import ValidationError
from django.core.management import call_command
from django.core.management.base import BaseCommand, CommandError, CommandParser
from django.db import transaction

from lots.models import User
from lots.recording import setup
from lots.recording.errors import RecordingError
from lots.rules.rule_set import KEYS


class Command(BaseCommand):
    """``manage.py start --name … --slug … --owner …``; asks for the owner's password."""

    help = "Make a facility and its owner's log-in."

    def add_arguments(self, parser: CommandParser) -> None:
        """Accept the facility's settings."""
        parser.add_argument("--name", required=True)
        parser.add_argument("--slug", required=True)
        parser.add_argument("--owner", required=True, help="the owner's log-in name")
        parser.add_argument("--rules", choices=KEYS, default="us-federal")
        parser.add_argument("--zone", default="America/New_York")
        parser.add_argument("--metric", action="store_true", help="L, kg, °C and kPa")
        parser.add_argument("--season-start", type=int, default=1, help="month, 1 to 12")

    def handle(self, *args: Any, **options: Any) -> None:
        """Make both in one transaction."""
        call_command("migrate", verbosity=0)
        password = getpass.getpass("Password for the owner: ")
        units = {
            "volume_unit": "L", "mass_unit": "kg", "temperature_unit": "°C",
            "pressure_unit": "kPa",
        } if options["metric"] else {}  # fmt: skip
        try:
            validate_password(password)
            with transaction.atomic():
                owner = User.objects.create_user(options["owner"], password=password)
                setup.create_facility(
                    slug=options["slug"], name=options["name"], owner=owner,
                    rule_set=options["rules"], zone=options["zone"],
                    season_start_month=options["season_start"], **units,
                )  # fmt: skip
        except (RecordingError, ValidationError) as error:
            raise CommandError(str(error)) from error
        self.stdout.write(f"{options['name']} is ready: run manage.py serve and log in.")

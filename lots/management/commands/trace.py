"""Trace a lot both ways from the command line."""

import json
from typing import Any

from django.core.management.base import BaseCommand, CommandError, CommandParser

from lots.models import Facility
from lots.tracing import find, story
from lots.web.words import amount_words, lot_sentence


class Command(BaseCommand):
    """``manage.py trace CODE [--facility SLUG] [--json]``."""

    help = "Trace a lot both ways: what is behind it and where it went."

    def add_arguments(self, parser: CommandParser) -> None:
        """Accept the code, the facility and --json."""
        parser.add_argument("code")
        parser.add_argument("--facility", default="")
        parser.add_argument("--json", action="store_true")

    def handle(self, *args: Any, **options: Any) -> None:
        """Print the story of each lot that carries the code."""
        facilities = Facility.objects.order_by("pk")
        if options["facility"]:
            facilities = facilities.filter(slug=options["facility"])
        lots = [lot for one in facilities for lot in find.lots_by_code(one, options["code"])]
        if not lots:
            raise CommandError(f"No lot carries {options['code']}.")
        told = [story.tell(lot) for lot in lots]
        if options["json"]:
            self.stdout.write(json.dumps([_plain(one) for one in told], indent=2))
            return
        for one in told:
            self.stdout.write(lot_sentence(one))
            for link in sorted(one.back.links, key=lambda link: one.steps[link.step].started_at):
                lot = one.lots[link.lot]
                self.stdout.write(
                    f"  back: {lot.code} {lot.item} as {link.role}, "
                    f"{amount_words(lot, link.quantity)}"
                )
            for name, quantity, code in one.customers:
                self.stdout.write(f"  to: {name}, {quantity} of {code}")


def _plain(one: story.Story) -> dict[str, Any]:
    return {
        "lot": one.lot.code,
        "printed_code": one.lot.printed_code.text if one.lot.printed_code else None,
        "made": one.accounting.made,
        "in_stock": one.accounting.in_stock,
        "shipped": one.accounting.shipped,
        "removed": one.accounting.removed,
        "used": one.accounting.used,
        "unexplained": one.accounting.unexplained,
        "woods": one.woods,
        "suppliers": one.suppliers,
        "people": one.people,
        "back": sorted({one.lots[link.lot].code for link in one.back.links}),
        "forward": sorted({one.lots[link.lot].code for link in one.forward.links}),
        "customers": [list(row) for row in one.customers],
    }

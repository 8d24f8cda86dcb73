"""Re-verify every chain and re-derive every stored quantity."""

from typing import Any

from django.core.management.base import BaseCommand, CommandError

from lots.db.guards import missing_guards
from lots.models import Chain
from lots.tracing import verify


class Command(BaseCommand):
    """``manage.py verify``: names the first row that is wrong, or says what was checked."""

    help = "Re-verify the journal's chains and re-derive every stored quantity."

    def handle(self, *args: Any, **options: Any) -> None:
        """Run every check; exit with an error at the first fault."""
        if missing := missing_guards():
            raise CommandError(f"The database lacks its guards: {', '.join(missing)}.")
        for chain in Chain.objects.order_by("pk"):
            for fault in verify.chain_faults(chain):
                raise CommandError(fault)
            self.stdout.write(f"{chain.name}: {chain.seq} entries verified, head {chain.head}")
        for fault in verify.ledger_faults():
            raise CommandError(fault)
        for fault in verify.image_faults():
            raise CommandError(fault)
        self.stdout.write(
            "Every stored quantity agrees with its draws and stock, every row with the journal."
        )

"""App configuration: installs the ledger's triggers whenever migrations have run."""

from django.apps import AppConfig
from django.db.models.signals import post_migrate


class LotsConfig(AppConfig):
    """The one app of the project."""

    name = "lots"
    default_auto_field = "django.db.models.BigAutoField"

    def ready(self) -> None:
        """Re-install the triggers after each migrate: a SQLite table rebuild drops them."""
        from lots.db import checks  # noqa: F401 - registers the system checks
        from lots.db.guards import install_after_migrate

        post_migrate.connect(install_after_migrate, sender=self, dispatch_uid="lots.guards")

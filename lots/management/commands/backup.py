"""Copy the database, attachments and key while the book is in use."""

import shutil
import sqlite3
from contextlib import closing
from typing import Any

from django.conf import settings
from django.core.management.base import BaseCommand
from django.db import connection
from django.utils import timezone


class Command(BaseCommand):
    """``manage.py backup``: a dated folder under the data folder's ``backups``."""

    help = "Make an online copy of the database, the attachments and the key."

    def handle(self, *args: Any, **options: Any) -> None:
        """Copy what the engine allows; PostgreSQL has its own tool for the database."""
        folder = settings.DATA_DIR / "backups" / f"{timezone.now():%Y%m%dT%H%M%SZ}"
        folder.mkdir(parents=True, mode=0o700)
        if connection.vendor == "sqlite":
            target = folder / "sugarhouse.sqlite3"
            connection.ensure_connection()
            with closing(sqlite3.connect(target)) as copy:
                connection.connection.backup(copy)
        else:
            self.stdout.write("Copy the PostgreSQL database itself with pg_dump.")
        key = settings.DATA_DIR / "secret_key"
        if key.exists():
            shutil.copy2(key, folder / "secret_key")
        if settings.MEDIA_ROOT.exists():
            shutil.copytree(settings.MEDIA_ROOT, folder / "attachments")
        self.stdout.write(f"Backed up to {folder}")

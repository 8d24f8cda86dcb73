"""Copy the database, attachments and key while the book is in use."""

import shutil
import sqlite3
from contextlib import closing
from pathlib import Path
from typing import Any

from django.conf import settings
from django.core.management.base import BaseCommand, CommandError
from django.db import connection
from django.utils import timezone


class Command(BaseCommand):
    """``manage.py backup``: a dated folder under the data folder's ``backups``."""

    help = "Make an online copy of the database, the attachments and the key."

    def handle(self, *args: Any, **options: Any) -> None:
        """Copy into a folder named ``.partial`` that gets its own name once all of it is there."""
        if not connection.introspection.table_names():
            raise CommandError(f"There is no book in {settings.DATA_DIR} to back up.")
        folder = settings.DATA_DIR / "backups" / f"{timezone.now():%Y%m%dT%H%M%SZ}"
        partial = folder.with_name(f"{folder.name}.partial")
        try:
            partial.mkdir(parents=True, mode=0o700)
        except FileExistsError as error:
            raise CommandError(f"{partial} is there already; try again.") from error
        if connection.vendor == "sqlite":
            self._copy_sqlite(partial / "sugarhouse.sqlite3")
        # After the database: a file is stored before the record that names it.
        if settings.MEDIA_ROOT.exists():
            shutil.copytree(settings.MEDIA_ROOT, partial / "attachments")
        key = settings.DATA_DIR / "secret_key"
        if key.exists():
            shutil.copy2(key, partial / "secret_key")
        partial.rename(folder)
        self.stdout.write(f"Backed up to {folder}")
        if connection.vendor != "sqlite":
            self.stdout.write(
                "The PostgreSQL database itself is not in it: "
                f"run pg_dump --format=custom --file={folder / 'sugarhouse.dump'} NAME."
            )

    @staticmethod
    def _copy_sqlite(target: Path) -> None:
        """Copy by SQLite's own backup, which waits for a writer, then read the copy through."""
        with closing(sqlite3.connect(target)) as copy:
            connection.connection.backup(copy)
            found = copy.execute("PRAGMA quick_check").fetchone()[0]
        if found != "ok":
            raise CommandError(f"The copy in {target.parent} is damaged: {found}")

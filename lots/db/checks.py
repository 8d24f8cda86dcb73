"""System checks: the ledger's triggers (database), and the library that PDF needs."""

from collections.abc import Sequence
from ctypes.util import find_library
from typing import Any

from django.core.checks import CheckMessage, Error, Info, Tags, register
from django.db import connections

from . import triggers
from .guards import missing_guards


@register(Tags.database)
def guards_present(databases: Sequence[str] | None = None, **kwargs: Any) -> list[CheckMessage]:
    """Name the triggers a migrated database lacks."""
    found: list[CheckMessage] = []
    for name in databases or []:
        tables = set(connections[name].introspection.table_names())
        if set(triggers.KEPT_TABLES) <= tables and (missing := missing_guards(name)):
            found.append(
                Error(
                    f"The database lacks its guards: {', '.join(missing)}.",
                    hint="Run manage.py migrate: it installs them anew.",
                    id="lots.E001",
                )
            )
    return found


@register()
def pango_present(**kwargs: Any) -> list[CheckMessage]:
    """Say that PDF needs Pango where it is missing; everything else works without it."""
    if find_library("pango-1.0") or find_library("pango-1.0-0"):
        return []
    return [
        Info(
            "PDF needs the Pango library; the print view stands in.",
            hint="Debian/Ubuntu: apt install libpango-1.0-0 libpangoft2-1.0-0. Fedora: dnf "
            "install pango. macOS: brew install pango. Windows: MSYS2, "
            "pacman -S mingw-w64-x86_64-pango.",
            id="lots.I001",
        )
    ]

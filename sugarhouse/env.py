"""Readers of environment variables that fail loudly on a value they cannot use."""

import os
import secrets
from pathlib import Path
from typing import Any
from urllib.parse import parse_qs, unquote, urlsplit

from django.core.exceptions import ImproperlyConfigured

SQLITE_START = (
    "PRAGMA journal_mode=WAL; PRAGMA synchronous=FULL; "
    "PRAGMA recursive_triggers=ON; PRAGMA journal_size_limit=67108864;"
)


def flag(name: str, default: bool = False) -> bool:
    """Return a yes/no variable: 1 or 0."""
    value = os.environ.get(name, "1" if default else "0")
    if value not in ("0", "1"):
        raise ImproperlyConfigured(f"{name} must be 0 or 1, not {value!r}.")
    return value == "1"


def words(name: str, default: str) -> list[str]:
    """Return a comma-separated list."""
    return [word.strip() for word in os.environ.get(name, default).split(",") if word.strip()]


def secret_key(data: Path) -> str:
    """Return the key given, or the one in the data folder, made on first run for its owner only."""
    if given := os.environ.get("SUGARHOUSE_SECRET_KEY"):
        return given
    path = data / "secret_key"
    try:
        descriptor = os.open(path, os.O_WRONLY | os.O_CREAT | os.O_EXCL, 0o600)
    except FileExistsError:
        return path.read_text().strip()
    with os.fdopen(descriptor, "w") as file:
        file.write(secrets.token_urlsafe(64))
    return path.read_text().strip()


def database(data: Path) -> dict[str, Any]:
    """Return the database settings: SQLite in the data folder, or PostgreSQL by DATABASE_URL."""
    url = os.environ.get("DATABASE_URL", "")
    if not url:
        return {
            "ENGINE": "django.db.backends.sqlite3",
            "NAME": data / "sugarhouse.sqlite3",
            "OPTIONS": {
                "transaction_mode": "IMMEDIATE",
                "timeout": 20,
                "init_command": SQLITE_START,
            },
            "CONN_MAX_AGE": 60,
        }
    parts = urlsplit(url)
    if parts.scheme not in ("postgres", "postgresql"):
        raise ImproperlyConfigured("DATABASE_URL must begin with postgresql://")
    socket = parse_qs(parts.query).get("host", [""])[0]
    return {
        "ENGINE": "django.db.backends.postgresql",
        "NAME": parts.path.lstrip("/"),
        "USER": unquote(parts.username or ""),
        "PASSWORD": unquote(parts.password or ""),
        "HOST": socket or parts.hostname or "",
        "PORT": str(parts.port or parse_qs(parts.query).get("port", [""])[0]),
        "CONN_MAX_AGE": 60,
        "CONN_HEALTH_CHECKS": True,
    }

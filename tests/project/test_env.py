"""Environment variables: read once, refused loudly when they make no sense."""

import stat

import pytest
from django.core.exceptions import ImproperlyConfigured

from sugarhouse import env


def test_a_flag_is_one_or_zero(monkeypatch):
    monkeypatch.setenv("SUGARHOUSE_DEBUG", "yes")

    with pytest.raises(ImproperlyConfigured, match="must be 0 or 1"):
        env.flag("SUGARHOUSE_DEBUG")


def test_an_empty_data_folder_is_refused(monkeypatch, tmp_path):
    monkeypatch.setenv("SUGARHOUSE_DATA", " ")

    with pytest.raises(ImproperlyConfigured, match="is empty"):
        env.folder("SUGARHOUSE_DATA", tmp_path)


def test_a_data_folder_under_a_file_is_refused(monkeypatch, tmp_path):
    (tmp_path / "file").write_text("")
    monkeypatch.setenv("SUGARHOUSE_DATA", str(tmp_path / "file" / "data"))

    with pytest.raises(ImproperlyConfigured, match="no folder can be made"):
        env.folder("SUGARHOUSE_DATA", tmp_path)


def test_the_key_is_made_once_for_its_owner_only(monkeypatch, tmp_path):
    monkeypatch.delenv("SUGARHOUSE_SECRET_KEY", raising=False)

    key = env.secret_key(tmp_path)

    assert env.secret_key(tmp_path) == key
    assert len(key) > 60
    assert stat.S_IMODE((tmp_path / "secret_key").stat().st_mode) == 0o600


def test_an_empty_key_is_refused(monkeypatch, tmp_path):
    monkeypatch.delenv("SUGARHOUSE_SECRET_KEY", raising=False)
    (tmp_path / "secret_key").write_text("\n")

    with pytest.raises(ImproperlyConfigured, match="is empty"):
        env.secret_key(tmp_path)


def test_sqlite_is_the_default(monkeypatch, tmp_path):
    monkeypatch.delenv("DATABASE_URL", raising=False)

    read = env.database(tmp_path)

    assert read["NAME"] == tmp_path / "sugarhouse.sqlite3"
    assert read["OPTIONS"]["transaction_mode"] == "IMMEDIATE"
    for pragma in ("journal_mode=WAL", "synchronous=FULL", "recursive_triggers=ON"):
        assert pragma in read["OPTIONS"]["init_command"]


@pytest.mark.parametrize(
    ("url", "expected"),
    [
        ("postgresql://ann:p%40ss@db:5433/book", ("ann", "p@ss", "db", "5433", "book", {})),
        ("postgres://db/book", ("", "", "db", "", "book", {})),
        (
            "postgresql://ann@/book?host=/run/postgresql&port=5",
            ("ann", "", "/run/postgresql", "5", "book", {}),
        ),
        (
            "postgresql://db/book?sslmode=require",
            ("", "", "db", "", "book", {"sslmode": "require"}),
        ),
    ],
)
def test_a_postgresql_address_is_read(monkeypatch, tmp_path, url, expected):
    monkeypatch.setenv("DATABASE_URL", url)

    read = env.database(tmp_path)

    keys = ("USER", "PASSWORD", "HOST", "PORT", "NAME", "OPTIONS")
    assert tuple(read[key] for key in keys) == expected


@pytest.mark.parametrize(
    ("url", "told"),
    [
        ("mysql://db/book", "must begin with"),
        ("postgresql://db", "names no database"),
        ("postgresql://db:many/book", "port must be a number"),
        ("postgresql://db/book?colour=dark", "unknown option colour"),
    ],
)
def test_any_other_address_is_refused(monkeypatch, tmp_path, url, told):
    monkeypatch.setenv("DATABASE_URL", url)

    with pytest.raises(ImproperlyConfigured, match=told):
        env.database(tmp_path)

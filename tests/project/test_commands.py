"""Serve and backup, run as a person runs them: each in a process and a data folder of its own."""

import http.client
import io
import os
import shutil
import socket
import stat
import subprocess
import sys
import time
from pathlib import Path

import pytest
import segno

from lots.management.commands.serve import Command as Serve

ROOT = Path(__file__).resolve().parents[2]


def surroundings(data, **extra):
    kept = {
        name: value
        for name, value in os.environ.items()
        if name != "DATABASE_URL" and not name.startswith("SUGARHOUSE_")
    }
    return kept | {"SUGARHOUSE_DATA": str(data)} | extra


def manage(data, *words):
    return subprocess.run(
        [sys.executable, "manage.py", *words],
        cwd=ROOT, env=surroundings(data), capture_output=True, text=True, timeout=240, check=False,
    )  # fmt: skip


@pytest.fixture(scope="module")
def book(tmp_path_factory):
    """A data folder with a migrated book, an attachment and a key."""
    data = tmp_path_factory.mktemp("book")
    made = manage(data, "migrate", "--verbosity", "0")
    assert made.returncode == 0, made.stderr
    (data / "attachments").mkdir()
    (data / "attachments" / "certificate.pdf").write_bytes(b"%PDF-1.7")
    return data


def test_a_backup_restores_into_an_empty_folder(book, tmp_path):
    told = manage(book, "backup")

    assert told.returncode == 0, told.stderr
    (copy,) = (book / "backups").iterdir()
    assert str(copy) in told.stdout
    assert stat.S_IMODE(copy.stat().st_mode) == 0o700
    assert stat.S_IMODE((copy / "secret_key").stat().st_mode) == 0o600
    restored = tmp_path / "restored"
    shutil.copytree(copy, restored)
    assert (restored / "secret_key").read_text() == (book / "secret_key").read_text()
    assert (restored / "attachments" / "certificate.pdf").read_bytes() == b"%PDF-1.7"
    checked = manage(restored, "check", "--database", "default", "--fail-level", "WARNING")
    assert checked.returncode == 0, checked.stderr
    verified = manage(restored, "verify")
    assert verified.returncode == 0, verified.stderr


def test_a_backup_of_nothing_is_refused(tmp_path):
    told = manage(tmp_path, "backup")

    assert told.returncode == 1
    assert "There is no book in" in told.stderr
    assert not (tmp_path / "backups").exists()


def test_a_port_in_use_is_one_sentence(book):
    with socket.socket() as taken:
        taken.bind(("127.0.0.1", 0))
        taken.listen()

        told = manage(book, "serve", "--port", str(taken.getsockname()[1]))

    assert told.returncode == 1
    assert "Choose another with --port." in told.stderr
    assert "Traceback" not in told.stderr


@pytest.fixture
def behind_tls(book):
    """The port of a server that stands behind a TLS proxy on this machine."""
    with socket.socket() as free:
        free.bind(("127.0.0.1", 0))
        port = free.getsockname()[1]
    server = subprocess.Popen(
        [sys.executable, "manage.py", "serve", "--port", str(port)],
        cwd=ROOT, env=surroundings(book, SUGARHOUSE_HTTPS="1"),
        stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True,
    )  # fmt: skip
    heard = server.stdout.readline()
    assert heard.startswith("Serving on"), heard
    yield port
    server.terminate()
    server.wait(timeout=30)
    server.stdout.close()


def ask(port, **headers):
    """Return the status, the headers and the body, trying while the server starts."""
    for _ in range(50):
        link = http.client.HTTPConnection("127.0.0.1", port, timeout=60)
        try:
            link.request("GET", "/login/", headers=headers)
            answer = link.getresponse()
            return answer.status, dict(answer.getheaders()), answer.read()
        except ConnectionRefusedError:
            time.sleep(0.1)
        finally:
            link.close()
    raise AssertionError("the server did not answer")


def test_a_tls_proxy_is_believed_and_plain_http_is_sent_on(behind_tls):
    status, headers, body = ask(behind_tls, **{"X-Forwarded-Proto": "https"})

    assert status == 200
    assert b"password" in body
    assert "default-src 'none'" in headers["Content-Security-Policy"]
    assert "Secure" in headers["Set-Cookie"]
    status, headers, _ = ask(behind_tls)
    assert status == 301
    assert headers["Location"].startswith("https://")


def test_the_qr_code_is_whole():
    drawn = io.StringIO()
    segno.make("http://192.0.2.7:8000/").terminal(out=drawn, compact=True)

    lines = Serve._qr("http://192.0.2.7:8000/").splitlines()

    assert "\n".join(lines) == drawn.getvalue().rstrip("\n")
    assert len({len(line) for line in lines}) == 1

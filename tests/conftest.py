"""Settings and the small sugarhouse that tests record in."""

import os
import tempfile
from pathlib import Path

# A folder of their own, whatever the environment names: tests never touch a real book.
# Parallel workers inherit the one of the process that started them, which removes it.
if "PYTEST_XDIST_WORKER" not in os.environ:
    _data = tempfile.TemporaryDirectory(prefix="sugarhouse-test-")
    os.environ["SUGARHOUSE_DATA"] = _data.name
    (Path(_data.name) / "staticfiles").mkdir()

import pytest
from hypothesis import settings as hypothesis_settings

from tests import factories

EXAMPLES = int(os.environ.get("SUGARHOUSE_EXAMPLES", "50"))
hypothesis_settings.register_profile("ci", max_examples=EXAMPLES, derandomize=True, deadline=None)
hypothesis_settings.load_profile("ci")


@pytest.fixture(autouse=True)
def _fast_and_plain(settings):
    settings.PASSWORD_HASHERS = ["django.contrib.auth.hashers.MD5PasswordHasher"]
    settings.STORAGES = {
        "default": {"BACKEND": "django.core.files.storage.FileSystemStorage"},
        "staticfiles": {"BACKEND": "django.contrib.staticfiles.storage.StaticFilesStorage"},
    }


@pytest.fixture
def house(db):
    """A small sugarhouse with its people, places and items."""
    return factories.sugarhouse()

"""Settings and the small sugarhouse that tests record in."""

import os
import tempfile

os.environ.setdefault("SUGARHOUSE_DATA", tempfile.mkdtemp(prefix="sugarhouse-test-"))

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

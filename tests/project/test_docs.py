"""The documents keep up with the code: a setting or a command nobody can find is not there."""

import re
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
READ = "".join(path.read_text() for path in sorted((ROOT / "sugarhouse").glob("*.py")))
VARIABLES = sorted(set(re.findall(r'"(SUGARHOUSE_[A-Z_]+|DATABASE_URL)"', READ)))
COMMANDS = sorted(
    path.stem
    for path in (ROOT / "lots" / "management" / "commands").glob("*.py")
    if not path.stem.startswith("_")
)


@pytest.mark.parametrize("name", VARIABLES)
def test_each_setting_is_in_the_readme(name):
    assert f"| `{name}` |" in (ROOT / "README.md").read_text()


def test_the_readme_names_no_setting_that_is_not_read():
    named = re.findall(r"^\| `([A-Z_]+)` \|", (ROOT / "README.md").read_text(), re.MULTILINE)

    assert sorted(named) == VARIABLES


@pytest.mark.parametrize("name", COMMANDS)
def test_each_command_is_documented(name):
    documents = (ROOT / "README.md").read_text() + (ROOT / "DEVELOPERS.md").read_text()

    assert f"manage.py {name}" in documents


@pytest.mark.parametrize("name", ["requirements.txt", "requirements-dev.txt"])
def test_requirements_are_pinned_by_hash_and_name_no_registry(name):
    text = (ROOT / name).read_text()

    assert "://" not in text
    for entry in re.findall(r"^[a-z].*?(?=^[a-z]|\Z)", text, re.MULTILINE | re.DOTALL):
        assert "==" in entry, entry.splitlines()[0]
        assert "--hash=sha256:" in entry, entry.splitlines()[0]

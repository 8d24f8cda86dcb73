"""The shape of the code: floors import downwards only; files and functions stay short."""

import ast
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent
FLOORS = [
    {"management"},
    {"web"},
    {"jobs"},
    {"exchange"},
    {"documents"},
    {"recall"},
    {"recording"},
    {"tracing"},
    {"models"},
    {"db"},
    {"rules"},
    {"quantities"},
    {"physics", "identification"},
]
RANK = {name: level for level, names in enumerate(FLOORS) for name in names}
GROUND = {"rules", "quantities", "physics", "identification"}
SOURCES = [
    path
    for folder in ("lots", "sugarhouse", "tests")
    for path in sorted((ROOT / folder).rglob("*.py"))
    if "migrations" not in path.parts  # written by a command, and never edited
]


def _imports(tree: ast.Module) -> set[str]:
    found = set()
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            found |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom) and node.module and not node.level:
            found.add(node.module)
            found |= {f"{node.module}.{alias.name}" for alias in node.names}
    return found


@pytest.mark.parametrize("path", SOURCES, ids=lambda path: str(path.relative_to(ROOT)))
def test_files_and_functions_are_short(path):
    text = path.read_text()
    assert len(text.splitlines()) <= 400
    for node in ast.walk(ast.parse(text)):
        if isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef):
            assert node.end_lineno - node.lineno < 50, f"{node.name} is too long"


@pytest.mark.parametrize(
    "path",
    [path for path in SOURCES if path.parts[-2:] and "lots" in path.parts],
    ids=lambda path: str(path.relative_to(ROOT)),
)
def test_imports_point_down(path):
    parts = path.relative_to(ROOT / "lots").parts
    floor = parts[0]
    if floor not in RANK:
        return
    for name in _imports(ast.parse(path.read_text())):
        if floor in GROUND:
            assert not name.startswith("django"), f"{floor} imports {name}"
        bits = name.split(".")
        if bits[0] == "lots" and len(bits) > 1 and bits[1] in RANK and bits[1] != floor:
            assert RANK[bits[1]] > RANK[floor], f"{floor} imports upwards: {name}"


@pytest.mark.parametrize("name", ["Step", "Draw", "Lot"])
def test_only_recording_builds_the_ledger(name):
    call = f"{name}.objects.create("
    builders = {
        path.relative_to(ROOT).parts[1]
        for path in SOURCES
        if path.parts[-2] != "tests" and call in path.read_text() and "lots" in path.parts
    }
    assert builders == {"recording"}

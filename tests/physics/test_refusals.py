"""Numbers out of range are refused in a sentence, and the floor stands on its own."""

import ast
import math
import subprocess
import sys
from pathlib import Path

import pytest

import lots.physics
from lots.physics import blend, colour, draw_off, fill, hydrometer, refractometer, sap, sucrose
from lots.physics import water as pure

FOLDER = Path(lots.physics.__file__).parent
# Function, arguments that it takes, and for each argument numbers that it refuses.
CALLS = [
    (sucrose.density, (66.0, 20.0), [(-0.1, 85.1), (-0.1, 105.1)]),
    (sucrose.brix_from_density, (1300.0, 20.0), [(-1.0, 990.0, 1500.0), (-0.1, 105.1)]),
    (sucrose.refractive_index, (66.0, 20.0), [(-0.1, 85.1), (-0.1, 40.1)]),
    (sucrose.brix_from_refractive_index, (1.4, 20.0), [(1.0, 1.332, 1.6), (-0.1, 40.1)]),
    (sucrose.water_activity, (66.0, 20.0), [(-0.1, 85.1), (-0.1, 130.1)]),
    (sucrose.boiling_point_elevation, (66.0, 101.0), [(-0.1, 80.1), (49.9, 120.1)]),
    (sucrose.solubility, (20.0,), [(-0.1, 100.1)]),
    (sucrose.osmotic_pressure, (8.0, 5.0), [(-0.1, 70.1), (-0.1, 40.1)]),
    (pure.boiling_point, (101.0,), [(0.0, -1.0, 1000.1)]),
    (pure.saturation_pressure, (99.0,), [(6.9, 179.1)]),
    (pure.density, (20.0,), [(-0.1, 105.1)]),
    (hydrometer.true_brix, (60.0, 90.0, 15.56), [(-0.1, 80.1), (-0.1, 105.1), (-0.1, 40.1)]),
    (hydrometer.reading_for, (66.0, 90.0, 15.56), [(-0.1, 80.1), (-0.1, 105.1), (-0.1, 40.1)]),
    (hydrometer.baume_from_brix, (66.0,), [(-0.1, 85.1)]),
    (hydrometer.brix_from_baume, (36.0,), [(-0.1, 45.0)]),
    (refractometer.true_brix, (66.0, 25.0), [(-0.1, 80.1), (-0.1, 40.1)]),
    (colour.grade_class, (60.0,), [(-0.1, 100.1)]),
    (colour.shown, (60.0,), [(-0.1, 100.1)]),
    (fill.net_mass, (500.0, 66.0), [(-0.1,), (-0.1, 85.1)]),
    (fill.net_volume, (500.0, 66.0), [(-0.1,), (-0.1, 85.1)]),
    (fill.volume_at, (500.0, 66.0, 85.0, 20.0), [(-1.0,), (85.1,), (105.1,), (-0.1,)]),
    (sap.sap_per_syrup, (2.0, 66.0), [(0.0, 66.1), (1.9, 85.1)]),
    (sap.rule_of_86, (2.0,), [(0.0, 8.1)]),
    (sap.revised_rule, (2.0,), [(0.0, 66.1)]),
    (sap.expected_syrup, (100.0, 2.0, 66.0), [(-1.0,), (0.0, 66.1), (1.9, 85.1)]),
    (blend.water_to_reach, (10.0, 68.0, 66.0), [(-1.0,), (65.9, 85.1), (0.0, 68.1)]),
]
CASES = [
    (function, taken, place, bad)
    for function, taken, refused in CALLS
    for place, numbers in enumerate(refused)
    for bad in (*numbers, math.nan, math.inf)
]


@pytest.mark.parametrize(("function", "taken", "place", "bad"), CASES)
def test_out_of_range_is_refused_in_a_sentence(function, taken, place, bad):
    assert function(*taken) is not None
    with pytest.raises(ValueError, match=r"^[A-Z].* .*\.$"):
        function(*taken[:place], bad, *taken[place + 1 :])


@pytest.mark.parametrize("name", ["kilopascal", "water_boiling_celsius"])
@pytest.mark.parametrize("bad", [0.0, 56.9, 110.1, math.nan, math.inf])
def test_draw_off_refuses_impossible_weather(name, bad):
    with pytest.raises(ValueError, match="must be from"):
        draw_off.temperature(66.9, **{name: bad})


@pytest.mark.parametrize("bad", [-0.1, 80.1, math.nan])
def test_draw_off_refuses_impossible_targets(bad):
    with pytest.raises(ValueError, match="Brix must be from 0 to 80"):
        draw_off.temperature(bad, kilopascal=101.325)


@pytest.mark.parametrize("function", [blend.mix, colour.blend_transmittance])
@pytest.mark.parametrize(
    "parts",
    [[], [(0.0, 66.0)], [(2.0, 66.0), (-1.0, 66.0)], [(1.0, -1.0)], [(1.0, 101.0)],
     [(math.nan, 66.0)], [(1.0, math.nan)], [(math.inf, 66.0)]],
)  # fmt: skip
def test_blends_refuse_impossible_parts(function, parts):
    with pytest.raises(ValueError, match=r"^[A-Z].* .*\.$"):
        function(parts)


def test_the_floor_stands_on_the_standard_library_alone():
    for path in FOLDER.glob("*.py"):
        for node in ast.walk(ast.parse(path.read_text())):
            if isinstance(node, ast.Import):
                roots = {alias.name.split(".")[0] for alias in node.names}
            elif isinstance(node, ast.ImportFrom) and not node.level:
                roots = {(node.module or "").split(".")[0]}
            else:
                continue
            assert roots <= set(sys.stdlib_module_names), f"{path.name} imports {roots}"


def test_the_floor_imports_without_the_framework():
    names = sorted(path.stem for path in FOLDER.glob("*.py") if path.stem != "__init__")
    code = (
        f"from lots.physics import {', '.join(names)}; import sys; print('django' in sys.modules)"
    )
    done = subprocess.run(
        [sys.executable, "-c", code],
        cwd=FOLDER.parent.parent, capture_output=True, text=True, check=True, timeout=60,
    )  # fmt: skip
    assert done.stdout.strip() == "False"

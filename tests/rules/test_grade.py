"""Colour against the label, clarity, defects, and the words a label uses."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from lots.physics import colour
from lots.rules import grade, rule_set
from lots.rules.label_grade import NAMES, read
from lots.rules.verdict import Outcome, Stage
from tests.rules.partial import without

VERMONT = rule_set.load("vermont")
PACKED = Stage.PACKED


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("Golden", "golden"),
        ("Grade A Amber, Rich Taste", "amber"),
        ("US Grade A Dark Color & Robust Flavor", "dark"),
        ("Canada Grade A, Very Dark, Strong Taste", "very-dark"),
        ("Ambré, goût riche", "amber"),
        ("TRÈS FONCÉ, GOÛT PRONONCÉ", "very-dark"),
        ("very-dark", "very-dark"),
        ("Canada Processing Grade", "processing"),
        ("Dark Amber", None),
        ("Medium Amber", None),
        ("Grade B", None),
        ("Golden, Strong Taste", None),
        ("Grade A", None),
        ("", None),
    ],
)
def test_label_words(text, found):
    assert read(text) == found


@pytest.mark.parametrize(
    ("transmittance", "label", "outcome", "shown"),
    [
        (63.0, "Amber", Outcome.PASS, "63.0"),
        (71.0, "Amber", Outcome.BORDERLINE_PASS, "71.0"),
        (54.0, "Amber", Outcome.BORDERLINE_PASS, "54.0"),
        (74.99, "Golden", Outcome.BORDERLINE_FAIL, "74.9"),
        (70.9, "Golden", Outcome.FAIL, "70.9"),
        (74.0, "Dark", Outcome.FAIL, "74.0"),  # near an edge, but of neither class of the label
        (90.0, "Golden", Outcome.PASS, "90.0"),
        (28.0, "Very Dark", Outcome.BORDERLINE_FAIL, "28.0"),
        (5.0, "Very Dark", Outcome.PASS, "5.0"),
        (5.0, "Processing Grade", Outcome.PASS, "5.0"),
        (63.0, "Dark Amber", Outcome.NOT_SET, "63.0"),
    ],
)
def test_colour(transmittance, label, outcome, shown):
    verdict = grade.check_colour(VERMONT, PACKED, transmittance, label)
    assert (verdict.outcome, verdict.values["value"]) == (outcome, shown)
    assert verdict.holds is (outcome is Outcome.FAIL)


@given(st.floats(0, 100), st.sampled_from(rule_set.KEYS))
def test_the_edges_of_each_set_are_those_of_the_physics(transmittance, key):
    label = NAMES[colour.grade_class(transmittance)]
    verdict = grade.check_colour(rule_set.load(key), PACKED, transmittance, label)
    assert verdict.outcome in (Outcome.PASS, Outcome.BORDERLINE_PASS)


def test_a_missing_edge_never_passes():
    rules = without(VERMONT, "colour-dark-min")
    assert grade.check_colour(rules, PACKED, 90.0, "Golden").outcome is Outcome.NOT_SET


@pytest.mark.parametrize("value", [-0.1, 100.1, float("nan")])
def test_an_impossible_colour_is_refused(value):
    with pytest.raises(ValueError, match="from 0 to 100"):
        grade.check_colour(VERMONT, PACKED, value, "Golden")


@pytest.mark.parametrize(
    ("clarity", "label", "outcome"),
    [
        ("clear", "Amber", Outcome.PASS),
        ("Clear ", "Amber", Outcome.PASS),
        ("hazy", "Amber", Outcome.BORDERLINE_FAIL),
        ("cloudy", "Amber", Outcome.FAIL),
        ("cloudy", "Processing Grade", Outcome.PASS),
        ("", "Amber", Outcome.NOT_SET),
        ("", "Processing Grade", Outcome.NOT_SET),
    ],
)
def test_clarity(clarity, label, outcome):
    assert grade.check_clarity(VERMONT, PACKED, clarity, label).outcome is outcome


@pytest.mark.parametrize(
    ("defects", "label", "outcome"),
    [
        ([], "Amber", Outcome.PASS),
        ([("buddy", "trace")], "Amber", Outcome.BORDERLINE_PASS),
        ([("buddy", "trace"), ("scorched", "slight")], "Amber", Outcome.FAIL),
        ([("buddy", "strong")], "Processing Grade", Outcome.PASS),
        ([("Fermented", "trace")], "Amber", Outcome.FAIL),
        ([("ropy", "trace")], "Processing Grade", Outcome.FAIL),
        ([("chemical residue", "")], "Processing Grade", Outcome.FAIL),
    ],
)
def test_defects(defects, label, outcome):
    assert grade.check_defects(VERMONT, PACKED, defects, label).outcome is outcome


def test_without_rows_nothing_passes():
    rules = without(VERMONT, "clarity", "defects")
    assert grade.check_clarity(rules, PACKED, "clear").outcome is Outcome.NOT_SET
    assert grade.check_defects(rules, PACKED, []).outcome is Outcome.NOT_SET

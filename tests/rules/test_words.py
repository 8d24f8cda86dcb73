"""Every verdict has a sentence with its numbers and source, and none says what a food is."""

import ast
from decimal import Decimal
from pathlib import Path

import pytest

import lots.rules
from lots.rules import container_size, density, fill_temperature, grade, loss, rule_set, words
from lots.rules.verdict import Stage
from tests.rules.partial import without

VERMONT = rule_set.load("vermont")
EMPTY = without(VERMONT, *{name.split()[0] for name in VERMONT.limits})
FORBIDDEN = ("safe", "compliant", "certified", "approved", "guarantee")


def _every_verdict():
    stage = Stage.PACKED
    for rules in (VERMONT, EMPTY):
        yield from (density.check(rules, stage, brix) for brix in (60, 67, 67.9, 80))
        yield from (
            fill_temperature.check(rules, kind, stage, degrees)
            for kind in ("container", "drum")
            for degrees in (70, 95)
        )
        yield from (
            grade.check_colour(rules, stage, 63, label)
            for label in ("Amber", "Golden", "Processing Grade", "Grade B {value}")
        )
        yield from (
            grade.check_clarity(rules, stage, seen, label)
            for seen in ("clear", "cloudy", "")
            for label in ("Amber", "Processing Grade")
        )
        yield from (
            grade.check_defects(rules, stage, found, label)
            for found in ([], [("buddy", "trace")], [("buddy", "strong")], [("ropy", "trace")])
            for label in ("Amber", "Processing Grade")
        )
        yield from (
            container_size.check(rules, stage, "Processing Grade", Decimal(size), "US gal")
            for size in (1, 5)
        )
        yield from (loss.check(rules, "boil", 1000, out) for out in (990, 500, 1100))


def test_every_template_is_used_and_every_verdict_has_one():
    assert {verdict.message for verdict in _every_verdict()} == set(words.TEMPLATES)


def test_every_sentence_names_its_source_and_is_one_sentence():
    for verdict in _every_verdict():
        text = words.sentence(verdict)
        assert text.endswith(f"({verdict.source}).")
        assert len(verdict.limit) <= 24
        assert len(verdict.unit) <= 12
        assert len(verdict.rule) <= 30


@pytest.mark.parametrize("word", FORBIDDEN)
def test_no_sentence_says_what_a_food_is(word):
    texts = [*words.TEMPLATES.values(), *words.REQUIREMENTS.values(), words.BORDERLINE]
    assert not [text for text in texts if word in text.lower()]


def test_a_density_in_words():
    verdict = density.check(VERMONT, Stage.PACKED, 66.4)
    assert words.sentence(verdict) == (
        "Density 66.40 °Brix is below the minimum of 66.9 °Brix "
        "(Vermont Maple Regulations, section III, stated at 60 °F)."
    )


def test_a_fill_in_words():
    verdict = fill_temperature.check(rule_set.load("canada"), "container", Stage.PACKED, 81.6)
    assert words.sentence(verdict) == (
        "Filled at 81.6 °C, below the container minimum of 82 °C; borderline, within the "
        "uncertainty of the reading (CFIA packing practice, 82–85 °C)."
    )


def test_the_floor_reads_no_clock_and_no_network():
    for path in Path(lots.rules.__file__).parent.glob("*.py"):
        names = {
            alias.name.partition(".")[0]
            for node in ast.walk(ast.parse(path.read_text()))
            if isinstance(node, ast.Import)
            for alias in node.names
        }
        assert not names & {"django", "os", "random", "socket", "time", "urllib"}, path

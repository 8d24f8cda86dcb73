"""Rule sets are data: every row says its source, and a broken row is refused."""

import hashlib
from decimal import Decimal

import pytest

from lots.rules import rule_set
from lots.rules.verdict import Stage

# What a stored check can keep of a limit: source, limit, unit.
WIDTHS = {"cited": 240, "value": 24, "unit": 12}
HEAD = 'name = "Test"\njurisdiction = "US"\neffective_from = "2020-01-01"\n'
ROW = (
    '[[limit]]\nname = "a"\nvalue = "1"\nunit = "°F"\nsource = "S"\nmark = "READ"\nbasis = "law"\n'
)


@pytest.mark.parametrize("key", rule_set.KEYS)
def test_every_row_is_sourced_and_fits_a_stored_check(key):
    rules = rule_set.load(key)
    assert rules.key == key
    assert rules.name
    for limit in rules.limits.values():
        assert limit.jurisdiction in (rules.jurisdiction, "US")
        assert limit.effective_from
        assert all(len(getattr(limit, name)) <= most for name, most in WIDTHS.items())
        if limit.unit:
            assert limit.number >= 0


@pytest.mark.parametrize("key", rule_set.KEYS)
def test_the_hash_is_that_of_the_file(key):
    raw = (rule_set.SETS / f"{key}.toml").read_bytes()
    assert rule_set.load(key).sha256 == hashlib.sha256(raw).hexdigest()


@pytest.mark.parametrize("key", rule_set.KEYS)
def test_every_set_names_the_density_of_each_stage_but_in_process(key):
    rules = rule_set.load(key)
    for stage in (Stage.BULK_KEPT, Stage.BULK_SOLD, Stage.PACKED):
        assert rules.limit("density-min", stage).number < rules.limit("density-max", stage).number
    assert rules.limit("density-min") is None


def test_loss_bands_are_common_practice_only():
    for key in rule_set.KEYS:
        rows = {n: one for n, one in rule_set.load(key).limits.items() if n.startswith("loss-")}
        assert rows
        assert {one.basis for one in rows.values()} == {"common practice"}
        assert all(Decimal(0) < one.number < 10 for one in rows.values())


def test_a_set_cannot_be_changed_at_run_time():
    with pytest.raises(TypeError):
        rule_set.load("canada").limits["density-min packed"] = None


def test_an_unknown_set_is_refused():
    with pytest.raises(KeyError, match="no rule set"):
        rule_set.load("../canada")


@pytest.mark.parametrize(
    ("text", "error"),
    [
        (HEAD + ROW + ROW, ValueError),
        (HEAD + ROW.replace("READ", "HEARD"), ValueError),
        (HEAD + ROW.replace('"law"', '"habit"'), ValueError),
        (HEAD + ROW.replace('"S"', '""'), ValueError),
        (HEAD + ROW + 'colour = "red"\n', TypeError),
        (ROW, KeyError),
    ],
)
def test_a_broken_row_is_refused(text, error):
    with pytest.raises(error):
        rule_set.parse("test", text.encode())


def test_a_row_has_the_date_of_its_set_or_its_own():
    own = ROW.replace('"a"', '"b"') + 'jurisdiction = "US-VT"\neffective_from = "2021-01-01"\n'
    rules = rule_set.parse("test", (HEAD + ROW + own).encode())
    assert rules.limits["a"].effective_from == "2020-01-01"
    assert (rules.limits["b"].jurisdiction, rules.limits["b"].effective_from) == (
        "US-VT",
        "2021-01-01",
    )

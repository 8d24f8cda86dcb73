"""Chains in memory alone, as large and as tangled as a test asks."""

import random
from datetime import UTC, datetime, timedelta

from lots.models import Facility, Item, Lot, Partner, Place, Step
from lots.tracing.bounds import Bounds
from lots.tracing.cone import Cone, Link
from lots.tracing.story import Accounting, Story

START = datetime(2026, 3, 1, 12, tzinfo=UTC)
HOUSE = Facility(pk=1, slug="test", name="Test", zone="America/New_York")
ITEMS = [
    Item(pk=number, facility=HOUSE, name=name, kind=kind, unit="mg")
    for number, (name, kind) in enumerate(
        [
            ("Sap", "sap"), ("Concentrate of the long night", "concentrate"), ("Syrup", "syrup"),
            ("Contents", "contents"), ("WWWWWWWWWWWWWWWWWWWWWW", "packed"), ("Aid", "filter-aid"),
        ]
    )
]  # fmt: skip
PLACES = [
    Place(pk=number, facility=HOUSE, name=f"{kind.capitalize()} {number}", kind=kind)
    for number, kind in enumerate(["tank", "tank", "evaporator", "canner", "drum", "drum", "room"])
]
KINDS = ["collection", "boil", "filtration", "drum-fill", "container-fill", "sale"]
ROLES = ["ingredient", "ingredient", "carry-over", "aid", "packaging", "residue", "shipped"]


def _steps(dice, size):
    for number in range(size):
        at = START + timedelta(hours=dice.choice([0, 1, 2, 30]) + number * dice.choice([1, 5]))
        yield Step(
            pk=number + 1, facility=HOUSE, kind=dice.choice(KINDS), started_at=at,
            place=dice.choice([*PLACES, None]),
            partner=dice.choice([None, Partner(pk=1, name="Émile Côté et fils, Saint-Élie")]),
        )  # fmt: skip


def _lots(dice, step, number):
    return [
        Lot(
            pk=number + place, facility=HOUSE, item=dice.choice(ITEMS), made_by=step,
            code=f"S26{number + place}-{'X' * dice.choice([1, 1, 5])}", made_at=step.started_at,
            made=dice.choice([1000, None]), put_in=dice.choice([*PLACES, None]),
            state=dice.choice(["released", "rejected"]),
        )
        for place in range(dice.randint(1, 3))
    ]  # fmt: skip


def tangle(seed, size):
    """Return the story of a random chain: each step draws some earlier lots and makes others."""
    dice = random.Random(seed)
    lots, links, steps = {}, [], {}
    for step in _steps(dice, size):
        steps[step.pk] = step
        for lot in dice.sample(sorted(lots.values(), key=lambda one: one.pk), min(len(lots), 3)):
            links.append(
                Link(lot.pk, lot.made_by_id, step.pk, dice.choice(ROLES), dice.randint(0, 500), 0)
            )
        lots |= {lot.pk: lot for lot in _lots(dice, step, len(lots) + 1)}
    breaks = [
        Step(
            pk=10_000 + number, facility=HOUSE, kind="cleaning", place=dice.choice(PLACES),
            started_at=START + timedelta(hours=dice.randint(-40, 90)),
            detail={"break": dice.choice(["emptied", "washed and verified"])},
        )
        for number in range(5)
    ]  # fmt: skip
    asked = dice.choice(list(lots.values()))
    return Story(
        lot=asked, back=Cone(frozenset(steps), tuple(links)), forward=Cone(frozenset(), ()),
        steps=steps, lots=lots, accounting=Accounting(0, 0, {}, 0, 0, 0, 0),
        bounded=Bounds(breaks=breaks),
        held=frozenset(dice.sample(sorted(lots), len(lots) // 4)),
    )  # fmt: skip

"""Clean breaks: where what a vessel held before can no longer be in a lot.

What a lot is made of is bounded where a vessel was emptied; what could have touched it only where
it was washed.
"""

from collections.abc import Iterable
from dataclasses import dataclass, field
from datetime import datetime

from lots.models import VESSELS, Lot, Place, Step, StepKind

from .cone import Cone, Link

EMPTIED = ("emptied", "rinsed", "washed", "washed and verified")
WASHED = ("washed", "washed and verified")


@dataclass
class Bounds:
    """The last break before each vessel's first use, the vessels without one, and all breaks."""

    before: list[Step] = field(default_factory=list)
    open: list[Place] = field(default_factory=list)
    breaks: list[Step] = field(default_factory=list)


Uses = dict[int, list[datetime]]


def of(
    behind: Cone, ahead: Cone, steps: dict[int, Step], lots: dict[int, Lot], follow: str
) -> Bounds:
    """Return the breaks that bound a chain: before, between and next after each vessel's use."""
    places: dict[int, Place] = {}
    everywhere = _uses(behind.links + ahead.links, steps.values(), steps, lots, places)
    back_steps = [steps[pk] for pk in behind.steps if pk in steps]
    used_behind = _uses(behind.links, back_steps, steps, lots, places)
    kinds = WASHED if follow == "all" else EMPTIED
    rows = Step.objects.filter(kind=StepKind.CLEANING, place__in=everywhere, voided_at=None)
    last: dict[int, Step] = {}
    found: dict[int, Step] = {}
    ended: set[int] = set()
    for step in rows.order_by("started_at", "pk").select_related("place"):
        place, times = step.place_id or 0, everywhere[step.place_id or 0]
        ours = used_behind.get(place)
        if ours and step.started_at < min(ours) and step.detail.get("break") in kinds:
            last[place] = step
        if step.started_at >= min(times) and place not in ended:
            found[step.pk] = step
            if step.started_at > max(times):
                ended.add(place)
    found |= {step.pk: step for step in last.values()}
    bare = [places[pk] for pk in used_behind if pk not in last]
    return Bounds(
        before=_by_time(last.values()),
        open=sorted(bare, key=lambda place: (place.kind, place.name)),
        breaks=_by_time(found.values()),
    )


def _by_time(steps: Iterable[Step]) -> list[Step]:
    return sorted(steps, key=lambda step: (step.started_at, step.pk))


def _uses(
    links: Iterable[Link],
    acts: Iterable[Step],
    steps: dict[int, Step],
    lots: dict[int, Lot],
    places: dict[int, Place],
) -> Uses:
    """Return when each vessel was worked on, filled or drawn from; its row goes to ``places``."""
    used: Uses = {}
    for step in acts:
        if step.place is not None and step.place.kind in VESSELS:
            places[step.place.pk] = step.place
            used.setdefault(step.place.pk, []).append(step.started_at)
    for link in links:
        vessel = lots[link.lot].put_in
        if vessel is not None and vessel.kind in VESSELS:
            places[vessel.pk] = vessel
            times = [steps[pk].started_at for pk in (link.from_step, link.step) if pk in steps]
            used.setdefault(vessel.pk, []).extend(times)
    return used

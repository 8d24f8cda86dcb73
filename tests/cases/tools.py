"""Short names for the acts that several cases share."""

from lots.models import Lot, Step, StepKind
from lots.recording import boil, syrup
from lots.recording._sources import FromVessel, Source
from tests.factories import House


def open_boil(house: House, hours: float) -> Step:
    """Light the fire."""
    return boil.open_boil(
        house.context(hours=hours), at=house.at(hours), evaporator=house.places["Evaporator"]
    )


def feed(house: House, running: Step, hours: float, source: Source | None = None) -> Step:
    """Feed a running boil: all of tank 1 unless told otherwise."""
    return boil.feed_boil(
        house.context(hours=hours),
        boil=running,
        at=house.at(hours),
        sources=[source or FromVessel(house.places["Tank 1"])],
    )


def pass_on(
    house: House, hours: float, source: Source | list[Source], into: str, kind: str = "filtration"
) -> Step:
    """Filter, blend, transfer or re-heat syrup into one vessel."""
    return syrup.record_mixture(
        house.context(hours=hours),
        kind=StepKind(kind),
        at=house.at(hours),
        sources=source if isinstance(source, list) else [source],
        into=house.places[into],
        item=house.items["syrup"],
    )


def syrup_of(house: House, step: Step) -> Lot:
    """Return the one syrup lot a step made."""
    return step.made_lots.get(item=house.items["syrup"])

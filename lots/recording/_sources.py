"""Where a step takes from: whole vessels, or single lots."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime

from lots.models import DrawRole, Lot, Place, Step
from lots.quantities import rounding

from . import _ledger, _redivide
from ._door import Writer
from .errors import RecordingError
from .measures import NOT_MEASURED, Typed, liquid_mass


@dataclass(frozen=True)
class FromVessel:
    """An amount out of a vessel; nothing typed takes all of it."""

    vessel: Place
    amount: Typed = NOT_MEASURED
    emptied: bool = False
    accept_difference: bool = False


@dataclass(frozen=True)
class FromLot:
    """An amount of one lot: pieces, or mass/volume of a liquid or material; nothing typed: all."""

    lot: Lot
    amount: Typed = NOT_MEASURED
    role: DrawRole = DrawRole.INGREDIENT
    place: Place | None = None


Source = FromVessel | FromLot


def pieces_or_milligrams(lot: Lot, amount: Typed, *, may_be_none: bool = False) -> int | None:
    """Return ledger units of an amount typed for a lot; all that remains where nothing was typed.

    Refuses nought and less, unless none is a possible answer, as in a count.
    """
    lot = Lot.objects.select_related("item").get(pk=lot.pk)
    if amount.value is not None and (amount.value < 0 or (amount.value == 0 and not may_be_none)):
        raise RecordingError("Enter an amount above nought.", field="quantity")
    if amount.value is None:
        return None if lot.remaining is None else int(lot.remaining)
    if lot.item.unit == "piece":
        if amount.value != int(amount.value):
            raise RecordingError("Count whole pieces.", field="quantity")
        return int(amount.value)
    brix = None
    if lot.solids_remaining is not None and lot.remaining:
        brix = 100 * int(lot.solids_remaining) / int(lot.remaining)
    return liquid_mass(amount, brix)


def draw(
    writer: Writer, step: Step, sources: Sequence[Source], at: datetime | None = None
) -> _ledger.Taken:
    """Draw every source; returns the mass and solids of the ingredients (aids left out).

    ``at`` is the time of the act inside a running step; else the step's own.
    """
    mass: int | None = 0
    solids: int | None = 0
    for source in sources:
        if isinstance(source, FromVessel):
            taken = _redivide.take(
                writer,
                step,
                source.vessel,
                source.amount,
                at=at or step.ended_at or step.started_at,
                emptied=source.emptied,
                accept_difference=source.accept_difference,
            )
        else:
            quantity = pieces_or_milligrams(source.lot, source.amount)
            drawn = _ledger.take(
                writer, step, source.lot, quantity, source.role, place=source.place
            )
            if source.role not in _ledger.SHARES:
                continue
            taken = _ledger.Taken(_mass_of(source.lot, quantity), drawn.solids)
        mass = None if mass is None or taken.quantity is None else mass + taken.quantity
        solids = None if solids is None or taken.solids is None else solids + taken.solids
    return _ledger.Taken(mass, solids)


def _mass_of(lot: Lot, quantity: int | None) -> int | None:
    if quantity is None or lot.item.unit != "piece":
        return quantity
    return None if lot.piece_mg is None else lot.piece_mg * quantity


def brix_of(taken: _ledger.Taken) -> float | None:
    """Return the true °Brix of what was taken together."""
    if not taken.quantity or taken.solids is None:
        return None
    return float(rounding.brix_of(taken.quantity, taken.solids))

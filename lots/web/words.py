"""Quantities and stories in sentences that can be read aloud."""

from lots.models import Lot
from lots.quantities.rounding import brix_of, fixed, volume_of
from lots.tracing.story import Story


def amount_words(lot: Lot, quantity: int | None) -> str:
    """Return a quantity of a lot: pieces, or kilograms with gallons where the density is known."""
    if quantity is None:
        return "not measured"
    if lot.item.unit == "piece":
        return f"{quantity} pieces"
    text = f"{fixed(quantity / 1_000_000, 1)} kg"
    if lot.made and lot.solids_made is not None:
        unit = lot.facility.volume_unit
        brix = float(brix_of(lot.made, lot.solids_made))
        text += f" ({fixed(volume_of(quantity, brix, unit), 1)} {unit})"
    return text


def lot_sentence(story: Story) -> str:
    """Return the first thing said of a lot: what it is, where it came from and where it is."""
    lot, account = story.lot, story.accounting
    name = lot.printed_code.text if lot.printed_code else lot.code
    parts = [f"{name}: {amount_words(lot, lot.made)} of {lot.item.name}, {lot.made_at:%-d %B %Y}."]
    if story.woods:
        parts.append(f"Sap from {', '.join(story.woods)}.")
    if story.suppliers:
        parts.append(f"Bought in from {', '.join(story.suppliers)}.")
    shipped = len({name for name, _, _ in story.customers})
    parts.append(
        f"{amount_words(lot, account.shipped)} shipped, {amount_words(lot, account.stock_total)} "
        f"in store, {amount_words(lot, account.removed)} removed, "
        f"{amount_words(lot, account.used)} used in later steps."
    )
    if shipped:
        parts.append(f"It reached {shipped} customer{'s' if shipped != 1 else ''}.")
    if account.unexplained:
        parts.append(f"{amount_words(lot, account.unexplained)} unexplained.")
    elif account.unexplained == 0:
        parts.append("All of it is accounted for.")
    return " ".join(parts)

"""Re-verify the journal and re-derive every stored quantity; name the first row that is wrong."""

import hashlib
from collections.abc import Iterator

from django.db.models import F, Sum

from lots.models import Chain, Draw, DrawRole, JournalEntry, Lot, LotState, Stock


def chain_faults(chain: Chain) -> Iterator[str]:
    """Yield what is wrong with one chain, in order; memory stays flat."""
    previous, expected = "0" * 64, 1
    entries = JournalEntry.objects.filter(chain=chain).order_by("seq").iterator(2000)
    for entry in entries:
        where = f"{chain.name}, entry {entry.seq}"
        if entry.seq != expected:
            yield f"{where}: entry {expected} is missing."
            return
        if entry.previous != previous:
            yield f"{where}: does not follow the entry before it."
            return
        digest = hashlib.sha256(f"{previous}\n{entry.body}".encode()).hexdigest()
        if digest != entry.digest:
            yield f"{where}: its text was changed after it was written."
            return
        previous, expected = digest, expected + 1
    if chain.seq != expected - 1 or chain.head != previous:
        yield f"{chain.name}: the head does not match the last entry."


def ledger_faults() -> Iterator[str]:
    """Yield each lot whose stored quantities differ from its live draws and stock rows."""
    drawn = _sums(Draw.objects.exclude(role=DrawRole.RETURNED))
    returned = _sums(Draw.objects.filter(role=DrawRole.RETURNED))
    shipped = _sums(Draw.objects.filter(role=DrawRole.SHIPPED))
    stock = dict(
        Stock.objects.values_list("lot").annotate(total=Sum("quantity")).values_list("lot", "total")
    )
    for lot in Lot.objects.order_by("pk").iterator(2000):
        found = {
            "drawn": (lot.drawn, drawn.get(lot.pk, (0, 0))[0]),
            "solids drawn": (lot.solids_drawn, drawn.get(lot.pk, (0, 0))[1]),
            "shipped": (lot.shipped, shipped.get(lot.pk, (0, 0))[0]),
            "returned": (lot.returned, returned.get(lot.pk, (0, 0))[0]),
        }
        if lot.remaining is not None and lot.state != LotState.VOID:
            found["stock by place"] = (int(lot.remaining), stock.get(lot.pk, 0))
        for name, (stored, derived) in found.items():
            if stored != derived:
                yield f"Lot {lot.code}: {name} is stored as {stored}, its records give {derived}."
    strays = Draw.objects.exclude(from_step=F("lot__made_by")).values_list("uuid", flat=True)
    for uuid in strays.iterator():
        yield f"Draw {uuid}: does not come from its lot's maker."


def _sums(draws: object) -> dict[int, tuple[int, int]]:
    rows = (
        draws.filter(ended_at=None)  # type: ignore[attr-defined]
        .values_list("lot")
        .annotate(mass=Sum("quantity"), solids=Sum("solids"))
    )
    return {lot: (mass or 0, solids or 0) for lot, mass, solids in rows}

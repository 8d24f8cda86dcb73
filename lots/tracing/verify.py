"""Re-verify the journal and re-derive every stored quantity; name the first row that is wrong."""

import hashlib
import json
from collections.abc import Iterator
from typing import Any

from django.apps import apps
from django.db.models import F, Sum

from lots.models import Adjustment, Chain, Draw, DrawRole, JournalEntry, Lot, LotState, Stock

from .images import after_images


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
        told = json.loads(entry.body)
        for name in ("action", "label"):
            if getattr(entry, name) != told.get(name, getattr(entry, name))[:200]:
                yield f"{where}: its {name} was changed after it was written."
                return
        previous, expected = digest, expected + 1
    if chain.seq != expected - 1 or chain.head != previous:
        yield f"{chain.name}: the head does not match the last entry."


def image_faults() -> Iterator[str]:
    """Yield each row that differs from what the journal last said of it, or that it never told."""
    last: dict[tuple[str, str], str] = {}
    for body in (
        JournalEntry.objects.order_by("chain_id", "seq")
        .values_list("body", flat=True)
        .iterator(500)
    ):
        for image in json.loads(body)["rows"]:
            if "uuid" in image:
                last[image["table"], image["uuid"]] = _fingerprint(image)
    for model in apps.get_app_config("lots").get_models():
        if not any(field.name == "uuid" for field in model._meta.fields):
            continue
        keys = list(model._base_manager.order_by("pk").values_list("pk", flat=True))
        for start in range(0, len(keys), 500):
            rows = model._base_manager.filter(pk__in=keys[start : start + 500])
            for image in after_images(rows):
                told = last.get((image["table"], image["uuid"]))
                name = image.get("code") or image.get("name") or image["uuid"]
                if told is None:
                    yield f"{image['table']} {name}: the journal never told of it."
                elif told != _fingerprint(image):
                    yield f"{image['table']} {name}: differs from what the journal last said of it."


def _fingerprint(image: dict[str, Any]) -> str:
    text = json.dumps(image, sort_keys=True, ensure_ascii=False)
    return hashlib.sha256(text.encode()).hexdigest()


def ledger_faults() -> Iterator[str]:
    """Yield each lot whose stored quantities differ from its live draws and stock rows."""
    drawn = _sums(Draw.objects.exclude(role=DrawRole.RETURNED))
    returned = _sums(Draw.objects.filter(role=DrawRole.RETURNED))
    adjusted = _sums(Adjustment.objects.all())
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
            "adjusted": (lot.adjusted, adjusted.get(lot.pk, (0, 0))[0]),
        }
        if lot.remaining is not None and lot.state != LotState.VOID:
            found["stock by place"] = (int(lot.remaining), stock.get(lot.pk, 0))
        for name, (stored, derived) in found.items():
            if stored != derived:
                yield f"Lot {lot.code}: {name} is stored as {stored}, its records give {derived}."
    strays = Draw.objects.exclude(from_step=F("lot__made_by")).values_list("uuid", flat=True)
    for uuid in strays.iterator():
        yield f"Draw {uuid}: does not come from its lot's maker."


def _sums(rows: Any) -> dict[int, tuple[int, int]]:
    sums = (
        rows.filter(ended_at=None)
        .values_list("lot")
        .annotate(mass=Sum("quantity"), solids=Sum("solids"))
    )
    return {lot: (mass or 0, solids or 0) for lot, mass, solids in sums}

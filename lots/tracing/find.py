"""Find a lot by anything printed or written: its code, the printed code, a supplier's code."""

from datetime import date, datetime, time, timedelta
from zoneinfo import ZoneInfo

from django.db.models import Q, QuerySet

from lots.identification import lot_code
from lots.models import Facility, ItemKind, Lot


def lots_by_code(facility: Facility, text: str) -> QuerySet[Lot]:
    """Return the lots a code may mean, exact first; O for 0 and I for 1 are tolerated."""
    clean = lot_code.normalise(text)
    keys = {text.strip(), clean, lot_code.search_key(clean)}
    return (
        Lot.objects.filter(facility=facility)
        .filter(Q(code__in=keys) | Q(printed_code__text__in=keys) | Q(supplier_code__in=keys))
        .select_related("item", "made_by__partner", "printed_code")
        .order_by("made_at", "pk")
    )


def nearest(facility: Facility, text: str, limit: int = 8) -> list[Lot]:
    """Return lots whose code begins like the text, for an unknown code."""
    clean = lot_code.normalise(text)[:4]
    if not clean:
        return []
    rows = Lot.objects.filter(facility=facility).filter(
        Q(code__istartswith=clean) | Q(printed_code__text__istartswith=clean)
    )
    return list(rows.select_related("item", "printed_code").order_by("-made_at")[:limit])


def packed_between(facility: Facility, first: date, last: date) -> QuerySet[Lot]:
    """Return the packed lots of some days, both included, by the facility's clock."""
    zone = ZoneInfo(facility.zone)
    return (
        Lot.objects.filter(
            facility=facility,
            item__kind=ItemKind.PACKED,
            made_at__gte=datetime.combine(first, time.min, zone),
            made_at__lt=datetime.combine(last + timedelta(days=1), time.min, zone),
        )
        .select_related("item", "printed_code", "made_by__partner")
        .order_by("made_at", "pk")
    )

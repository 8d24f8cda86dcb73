"""Find a lot by anything printed or written: its codes, its item, who sold it or who got it."""

from datetime import date, datetime, time, timedelta
from zoneinfo import ZoneInfo

from django.db.models import Q, QuerySet

from lots.identification import lot_code
from lots.identification.folding import fold
from lots.models import Draw, DrawRole, Facility, Item, ItemKind, Lot, Partner


def lots_by_code(facility: Facility, text: str) -> QuerySet[Lot]:
    """Return the lots a code may mean, exact first; O for 0 and I for 1 are tolerated."""
    text = text.replace("\x00", "")  # which one engine refuses to look for
    clean = lot_code.normalise(text)
    keys = {text.strip(), clean, lot_code.search_key(clean)} - {""}
    return (
        Lot.objects.filter(facility=facility)
        .filter(Q(code__in=keys) | Q(printed_code__text__in=keys) | Q(supplier_code__in=keys))
        .select_related("item", "made_by__partner", "printed_code")
        .order_by("made_at", "pk")
    )


def lots_by_words(facility: Facility, text: str) -> QuerySet[Lot]:
    """Return the lots that carry a code, or else those that every word leads to.

    A word leads to a lot by its item, its supplier, who got some of it, or the start of a code.
    Items and partners are few, so they are folded here: no engine folds as people type.
    """
    exact = lots_by_code(facility, text)
    if exact.exists():
        return exact
    rows = Lot.objects.filter(facility=facility)
    words = fold(text.replace("\x00", "")).split()
    if not words:
        return rows.none()
    items = [
        (pk, fold(name))
        for pk, name in Item.objects.filter(facility=facility).values_list("pk", "name")
    ]
    partners = [
        (pk, fold(name))
        for pk, name in Partner.objects.filter(facility=facility).values_list("pk", "name")
    ]
    for word in words:
        rows = rows.filter(
            Q(item__in=[pk for pk, name in items if word in name])
            | _of_partners([pk for pk, name in partners if word in name])
            | _code_begins(word)
        )
    return rows


def _of_partners(partners: list[int]) -> Q:
    if not partners:
        return Q(pk__in=[])
    got = Draw.objects.filter(
        role=DrawRole.SHIPPED, ended_at=None, step__partner__in=partners
    ).values("lot")
    return Q(made_by__partner__in=partners) | Q(pk__in=got)


def _code_begins(word: str) -> Q:
    """A code has a figure in it; a word without one is the start of none."""
    if not any(letter.isdigit() for letter in word):
        return Q(pk__in=[])
    start = lot_code.normalise(word)
    return (
        Q(code__istartswith=start)
        | Q(printed_code__text__istartswith=start)
        | Q(supplier_code__istartswith=start)
    )


def nearest(facility: Facility, text: str, limit: int = 8) -> list[Lot]:
    """Return lots whose code begins like the text, for an unknown code."""
    clean = lot_code.normalise(text.replace("\x00", ""))[:4]
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

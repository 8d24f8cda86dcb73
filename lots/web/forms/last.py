"""Same as last: what a form offers beforehand from the last records of its kind.

A form names its ``kind`` and, in ``same``, each choice to offer again with the reader that finds
it: ``{"woods": place, "tank": put_in}`` says that a collection's woods section is where its step
stands, and its tank where its lot was put. ``offer`` asks the readers about the running step, if
the form belongs to one, then about the last few steps of the kind that were recorded and not
voided; the first answer that is still among the form's choices becomes the field's initial value,
and the page names what was filled in so. Only an untouched form is filled: what was typed, sent
or kept is never replaced.

Choices alone are offered, never a number. Left out on purpose is what differs each time, where a
value left standing would mislead a trace or a count: the lot that is sold, moved or graded, the
customer, the drum, the vessel that was cleaned.
"""

from collections.abc import Callable, Iterable
from typing import Any

from django import forms
from django.db.models import Model

from lots.models import DrawRole, Item, Lot, Place, PrintedCode, Step

Reader = Callable[[Step], Any]
LOOKED_AT = 3  # an opened fill has no store yet: the one before it has


def offer(form: Any) -> list[tuple[str, str]]:
    """Fill in the form's choices as they were last; return (label, words) of each."""
    if not form.same:
        return []
    steps, offered = list(_steps(form)), []
    for name, reader in form.same.items():
        field = form.fields.get(name)
        if field is None:
            continue
        for value in (reader(step) for step in steps):
            words = _among(field, value)
            if words:
                form.initial[name] = value.pk if isinstance(value, Model) else value
                offered.append((str(field.label or name.replace("_", " ").capitalize()), words))
                break
    return offered


def _steps(form: Any) -> Iterable[Step]:
    """Yield the steps to look at, the nearest first; of one form's steps, its first."""
    if form.step is not None:
        yield form.step
    rows = Step.objects.filter(facility=form.facility, kind=form.kind, voided_at=None)
    seen = set()
    for step in rows.select_related("place").order_by("-pk")[:LOOKED_AT]:
        if step.group and step.group not in seen:
            seen.add(step.group)
            yield rows.filter(group=step.group).order_by("pk")[0]
        elif not step.group:
            yield step


def _among(field: forms.Field, value: Any) -> str:
    """Return a value's words if it is still one of the field's choices; else an empty string."""
    if value is None:
        return ""
    if isinstance(field, forms.ModelChoiceField):
        found = field.queryset.filter(pk=value.pk).first()
        return field.label_from_instance(found) if found is not None else ""
    return str(value) if value in dict(getattr(field, "choices", ())) else ""


def place(step: Step) -> Place | None:
    """Return where the step stands: woods section, machine, evaporator, room."""
    return step.place


def put_in(step: Step) -> Place | None:
    """Return where its first lot was put."""
    lot = step.made_lots.select_related("put_in").order_by("pk").first()
    return lot.put_in if lot else None


def vessel(number: int = 1) -> Reader:
    """Return the reader of the vessel that was drawn from first, second or third."""

    def read(step: Step) -> Place | None:
        takes = step.takes.select_related("vessel").order_by("pk")[number - 1 : number]
        return takes[0].vessel if takes else None

    return read


def fed_from(step: Step) -> Place | None:
    """Return the vessel that was drawn from last."""
    take = step.takes.select_related("vessel").order_by("-pk").first()
    return take.vessel if take else None


def drawn_into(step: Step) -> Place | None:
    """Return the vessel of the last draw-off."""
    event = step.events.filter(kind="draw-off").order_by("-at", "-pk").first()
    if event is None:
        return None
    return Place.objects.filter(facility=step.facility, name=event.detail.get("into")).first()


def product(step: Step) -> Item | None:
    """Return what was made, or what the code of an opened run was reserved for."""
    lot = step.made_lots.select_related("item").order_by("pk").first()
    if lot is not None:
        return lot.item
    code = PrintedCode.objects.filter(uuid=step.detail.get("printed_code") or None).first()
    return code.item if code else None


def used(kind: str, role: DrawRole = DrawRole.AID) -> Reader:
    """Return the reader of the lot of a material in use: an aid, a case of bottles, a roll."""

    def read(step: Step) -> Lot | None:
        draw = step.draws.filter(role=role, lot__item__kind=kind, ended_at=None).first()
        return draw.lot if draw else None

    return read


def detail(key: str) -> Reader:
    """Return the reader of a choice that the step keeps among its details."""

    def read(step: Step) -> str | None:
        return step.detail.get(key) or None

    return read


def come_from(step: Step) -> Place | None:
    """Return where moved goods came from."""
    return Place.objects.filter(uuid=step.detail.get("from_uuid") or None).first()

"""What every screen says the same way: states, codes, amounts, times and form parts."""

from collections.abc import Iterable
from datetime import UTC, datetime
from decimal import ROUND_HALF_UP, Decimal
from functools import cache
from typing import Any, NamedTuple
from zoneinfo import ZoneInfo

from django import template
from django.forms import BaseForm, MultiWidget
from django.forms.boundfield import BoundField
from django.template.context import Context
from django.utils.html import format_html
from django.utils.safestring import SafeString

register = template.Library()

MILLIGRAMS = {
    "kg": Decimal(1_000_000),
    "g": Decimal(1_000),
    "mg": Decimal(1),
    "lb": Decimal("453592.37"),
    "oz": Decimal("28349.523125"),
}
MARKS = {
    "pass": "pass",
    "released": "pass",
    "intact": "pass",
    "borderline": "borderline",
    "fail": "fail",
    "failed": "fail",
    "rejected": "fail",
    "broken": "fail",
    "held": "held",
    "hold": "held",
    "on hold": "held",
    "open": "open",
    "running": "open",
}
WORDS = {"hold": "held", "notset": "not set", "unset": "not set"}
NOT_MEASURED = "not measured"
NO_BREAK = "\u00a0"
MONTHS = ("Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec")


class Group(NamedTuple):
    """The fields that stand together in a form."""

    legend: str
    fields: list[BoundField]
    folded: bool

    @property
    def has_errors(self) -> bool:
        """Whether a field of the group was refused; a folded group then opens."""
        return any(field.errors for field in self.fields)


@register.inclusion_tag("components/_state.html")
def state(value: object, word: str = "") -> dict[str, str]:
    """Draw a state: its mark and, always, its word."""
    key = str(value or "not set").lower().replace("_", " ").replace("-", " ")
    return {"mark": MARKS.get(key, "not-set"), "word": word or WORDS.get(key, key)}


@register.filter
def state_mark(value: object) -> str:
    """Return the mark of a state, for a class name."""
    key = str(value or "").lower().replace("_", " ").replace("-", " ")
    return MARKS.get(key, "not-set")


@register.filter
def mono(value: object) -> SafeString:
    """Set a code or a hash in the face that keeps O and 0, I and 1 apart."""
    return format_html('<span class="mono">{}</span>', value)


@register.filter
def quantity(milligrams: int | None, unit: str = "kg") -> str:
    """Return an amount in words: whole milligrams in a mass unit, anything else as a count."""
    if milligrams is None:
        return NOT_MEASURED
    factor = MILLIGRAMS.get(unit)
    if factor is None:
        return f"{milligrams:,}{NO_BREAK}{unit}".replace("-", "\u2212")
    amount = Decimal(milligrams) / factor
    places = Decimal("0.01") if 0 < abs(amount) < 10 else Decimal("0.1")
    shown = amount.quantize(places, ROUND_HALF_UP)
    return f"{shown:,}{NO_BREAK}{unit}".replace("-", "\u2212")


@cache
def _zone(name: str) -> ZoneInfo:
    return ZoneInfo(name)


def _in_zone(moment: datetime, place: object) -> datetime:
    """Return the moment in a facility's zone, or in a zone given by name."""
    name = getattr(place, "zone", place) or "UTC"
    return moment.astimezone(_zone(str(name)))


@register.filter
def local_time(moment: datetime | None, place: object = "UTC") -> str | SafeString:
    """Return day and time where the facility is, with the exact moment beneath for machines."""
    if moment is None:
        return ""
    there = _in_zone(moment, place)
    words = f"{there.day} {MONTHS[there.month - 1]} {there.year}, {there:%H:%M}"
    exact = moment.astimezone(UTC).isoformat(timespec="seconds")
    return format_html('<time datetime="{}">{}</time>', exact, words)


@register.filter
def local_clock(moment: datetime | None, place: object = "UTC") -> str:
    """Return only hours and minutes where the facility is."""
    return "" if moment is None else f"{_in_zone(moment, place):%H:%M}"


@register.filter
def focus_id(field: BoundField) -> str:
    """Return the id of the first input of a field: what a label or an error points to."""
    return field.id_for_label or f"{field.auto_id}_0"


@register.filter
def is_choice_group(field: BoundField) -> bool:
    """Whether the field is a set of choices under a legend; a number with its unit is not."""
    return field.use_fieldset and not isinstance(field.field.widget, MultiWidget)


@register.filter
def control(field: BoundField) -> SafeString:
    """Render the input; the parts of a number with its unit are described like any other."""
    described = field.aria_describedby
    return field.as_widget(attrs={"aria-describedby": described} if described else None)


def _bound(form: BaseForm, entries: Iterable[Any]) -> list[BoundField]:
    return [entry if isinstance(entry, BoundField) else form[entry] for entry in entries]


@register.simple_tag
def field_groups(form: BaseForm) -> list[Group]:
    """Return the groups of a form; a field that no group names comes last, never lost."""
    given = getattr(form, "fieldsets", None) or []
    given = given() if callable(given) else given
    groups = []
    for legend, entries, *folded in given:
        fields = [field for field in _bound(form, entries) if not field.is_hidden]
        groups.append(Group(legend, fields, bool(folded and folded[0])))
    named = {field.html_name for group in groups for field in group.fields}
    rest = [field for field in form.visible_fields() if field.html_name not in named]
    if rest:
        groups.append(Group("", rest, folded=False))
    return [group for group in groups if group.fields]


@register.simple_tag(takes_context=True)
def page_facility(context: Context) -> Any:
    """Return the facility of the page, from its context or its request."""
    return context.get("facility") or getattr(context.get("request"), "facility", None)


@register.simple_tag(takes_context=True)
def page_member(context: Context) -> Any:
    """Return who looks at the page, from its context or its request."""
    return context.get("member") or getattr(context.get("request"), "member", None)

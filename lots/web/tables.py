"""Lists: sortable, paged, cheap to draw."""

from typing import Any

import django_tables2 as tables
from django.urls import reverse
from django.utils.html import format_html

from lots.models import JournalEntry, Lot

from .words import amount_words


class LotTable(tables.Table):
    """The lots of a facility."""

    code = tables.Column(verbose_name="Lot")
    printed_code = tables.Column(verbose_name="Code on goods", accessor="printed_code__text")
    item = tables.Column(accessor="item__name")
    made_at = tables.Column(verbose_name="Made")
    state = tables.Column()
    remaining = tables.Column(verbose_name="Remaining")

    class Meta:
        model = Lot
        fields = ("code", "printed_code", "item", "made_at", "state", "remaining")
        order_by = "-made_at"
        template_name = "components/_table.html"
        empty_text = "No lot matches."

    def render_code(self, record: Lot) -> str:
        """Return the link to the lot."""
        url = reverse("lot", args=[record.facility.slug, record.uuid])
        return format_html('<a class="mono" href="{}">{}</a>', url, record.code)

    def render_made_at(self, value: Any) -> str:
        """Return the day in UTC, cheaply."""
        return f"{value:%Y-%m-%d %H:%M}"

    def render_remaining(self, record: Lot) -> str:
        """Return what is left, in words."""
        return amount_words(record, record.remaining)


class JournalTable(tables.Table):
    """The journal, newest first."""

    seq = tables.Column(verbose_name="Entry")
    recorded_at = tables.Column(verbose_name="Recorded")
    action = tables.Column()
    label = tables.Column(verbose_name="About")
    digest = tables.Column(verbose_name="Hash")

    class Meta:
        model = JournalEntry
        fields = ("seq", "recorded_at", "action", "label", "digest")
        order_by = "-seq"
        template_name = "components/_table.html"

    def render_recorded_at(self, value: Any) -> str:
        """Return the time in UTC."""
        return f"{value:%Y-%m-%d %H:%M:%S}"

    def render_digest(self, value: str) -> str:
        """Return the start of the hash."""
        return format_html('<span class="mono">{}</span>', value[:12])

"""Lists: titled, sortable, paged, in the facility's time, cheap to draw."""

from datetime import datetime
from typing import Any

import django_tables2 as tables
from django.urls import reverse
from django.utils.html import format_html

from lots.models import Facility, JournalEntry, Lot

from .templatetags.lot_tags import local_time
from .words import amount_words


class FacilityTable(tables.Table):
    """A list of one facility; its title is the caption and the name of its scroll region."""

    title = ""

    def __init__(self, facility: Facility, rows: Any, **kwargs: Any) -> None:
        self.facility = facility
        super().__init__(rows, **kwargs)

    def when(self, moment: datetime) -> str:
        """Return day and hour by the facility's clock."""
        return local_time(moment, self.facility)


class LotTable(FacilityTable):
    """The lots of a facility."""

    title = "Lots"
    code = tables.Column(verbose_name="Lot")
    printed_code = tables.Column(verbose_name="Code on goods", accessor="printed_code__text")
    item = tables.Column(accessor="item__name")
    made_at = tables.Column(verbose_name="Made")
    state = tables.Column()
    remaining = tables.Column(verbose_name="Remaining", empty_values=())

    class Meta:
        model = Lot
        fields = ("code", "printed_code", "item", "made_at", "state", "remaining")
        order_by = "-made_at"
        template_name = "components/_table.html"
        empty_text = "No lot matches."

    def render_code(self, record: Lot) -> str:
        """Return the link to the lot."""
        url = reverse("lot", args=[self.facility.slug, record.uuid])
        return format_html('<a class="mono" href="{}">{}</a>', url, record.code)

    def render_made_at(self, value: datetime) -> str:
        """Return when it was made."""
        return self.when(value)

    def render_remaining(self, record: Lot) -> str:
        """Return what is left, in words."""
        return "none left" if record.remaining == 0 else amount_words(record, record.remaining)


class JournalTable(FacilityTable):
    """The journal, newest first."""

    title = "Entries of the journal"
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

    def render_recorded_at(self, value: datetime) -> str:
        """Return when it was recorded."""
        return self.when(value)

    def render_digest(self, value: str) -> str:
        """Return the start of the hash."""
        return format_html('<span class="mono">{}</span>', value[:12])

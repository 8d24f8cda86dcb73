"""Recorded acts: the header every step shares, its events, people and readings."""

import uuid
from zoneinfo import ZoneInfo

from django.db import models
from django.db.models import F, Q

from .facility import Facility, User
from .place import Instrument, Partner, Place


class StepKind(models.TextChoices):
    RECEIVING = "receiving", "Receiving"
    OPENING_STOCK = "opening-stock", "Opening stock"
    COLLECTION = "collection", "Sap collection"
    CONCENTRATION = "concentration", "Concentration"
    BOIL = "boil", "Boil"
    CONTENTS = "contents", "Contents left"
    FILTRATION = "filtration", "Filtration"
    GRADE_READING = "grade-reading", "Grade reading"
    DRUM_FILL = "drum-fill", "Drum fill"
    BLEND = "blend", "Blend"
    TRANSFER = "transfer", "Transfer"
    REHEAT = "reheat", "Re-heat"
    MOVE = "move", "Move"
    SPLIT = "split", "Split"
    CONTAINER_FILL = "container-fill", "Container fill"
    SALE = "sale", "Sale or shipment"
    CUSTOMER_RETURN = "customer-return", "Customer return"
    SUPPLIER_RETURN = "supplier-return", "Return to supplier"
    REMOVAL = "removal", "Removal"
    REWORK = "rework", "Rework"
    ADJUSTMENT = "adjustment", "Count adjustment"
    CLEANING = "cleaning", "Cleaning"


MAKERS = frozenset({StepKind.COLLECTION, StepKind.RECEIVING, StepKind.OPENING_STOCK})


class Step(models.Model):
    """One recorded act: one mixture, at a time, at a place, by people; it may be running."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    facility = models.ForeignKey(Facility, on_delete=models.PROTECT, related_name="steps")
    kind = models.CharField(max_length=16, choices=StepKind.choices)
    group = models.UUIDField(null=True, blank=True)
    started_at = models.DateTimeField()
    ended_at = models.DateTimeField(null=True, blank=True)
    place = models.ForeignKey(Place, null=True, blank=True, on_delete=models.PROTECT)
    partner = models.ForeignKey(Partner, null=True, blank=True, on_delete=models.PROTECT)
    document = models.CharField(max_length=80, blank=True)
    detail = models.JSONField(default=dict)
    note = models.TextField(blank=True)
    people = models.CharField(max_length=200, blank=True)
    late = models.BooleanField(default=False)
    voided_at = models.DateTimeField(null=True, blank=True)
    recorded_at = models.DateTimeField()
    recorded_by = models.ForeignKey(User, on_delete=models.PROTECT, related_name="steps")

    class Meta:
        indexes = [
            models.Index(fields=["facility", "kind", "started_at"], name="step_by_kind"),
            models.Index(fields=["place", "started_at"], name="step_by_place"),
        ]
        constraints = [
            models.CheckConstraint(
                name="step_ends_after_start",
                condition=Q(ended_at=None) | Q(ended_at__gte=F("started_at")),
            ),
        ]

    def __str__(self) -> str:
        return f"{self.get_kind_display()} {self.started_at:%Y-%m-%d %H:%M} UTC"

    def in_words(self, zone: str) -> str:
        """Return what it is and when it began, by the clock of a zone."""
        moment = self.started_at.astimezone(ZoneInfo(zone))
        return f"{self.get_kind_display()} {moment:%Y-%m-%d %H:%M}"


class StepEvent(models.Model):
    """One whole record inside a running step: a feed, draw-off, put-back, reading or stop."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    step = models.ForeignKey(Step, on_delete=models.PROTECT, related_name="events")
    kind = models.CharField(max_length=12)
    at = models.DateTimeField()
    detail = models.JSONField(default=dict)
    recorded_at = models.DateTimeField()
    recorded_by = models.ForeignKey(User, on_delete=models.PROTECT)

    def __str__(self) -> str:
        return f"{self.kind} {self.at:%H:%M}"


class ReadingKind(models.TextChoices):
    BRIX = "brix", "Density"
    TEMPERATURE = "temperature", "Temperature"
    FILL_TEMPERATURE = "fill-temperature", "Fill temperature"
    TRANSMITTANCE = "transmittance", "Colour"
    CLARITY = "clarity", "Clarity"
    FLAVOUR = "flavour", "Flavour"
    WATER_BOILING = "water-boiling", "Boiling point of water"
    PRESSURE = "pressure", "Pressure"


class Reading(models.Model):
    """One measurement, as read and as corrected, with the method and its version."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    step = models.ForeignKey(Step, on_delete=models.PROTECT, related_name="readings")
    lot = models.ForeignKey("Lot", null=True, on_delete=models.PROTECT, related_name="readings")
    kind = models.CharField(max_length=18, choices=ReadingKind.choices)
    at = models.DateTimeField()
    typed_value = models.CharField(max_length=40)
    typed_unit = models.CharField(max_length=12, blank=True)
    sample_typed = models.CharField(max_length=20, blank=True)
    sample_unit = models.CharField(max_length=8, blank=True)
    corrected = models.CharField(max_length=24, blank=True)
    corrected_unit = models.CharField(max_length=12, blank=True)
    method = models.CharField(max_length=60, blank=True)
    instrument = models.ForeignKey(Instrument, null=True, blank=True, on_delete=models.PROTECT)

    def __str__(self) -> str:
        return f"{self.get_kind_display()} {self.typed_value} {self.typed_unit}"


class Amendment(models.Model):
    """A correction of a recorded fact: the old value stays readable beside the new one."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    step = models.ForeignKey(Step, on_delete=models.PROTECT, related_name="amendments")
    field = models.CharField(max_length=40)
    old = models.TextField(blank=True)
    new = models.TextField(blank=True)
    reason = models.CharField(max_length=400)
    at = models.DateTimeField()
    by = models.ForeignKey(User, on_delete=models.PROTECT, related_name="+")

    def __str__(self) -> str:
        return f"{self.field}: {self.old} → {self.new}"

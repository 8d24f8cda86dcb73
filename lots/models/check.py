"""Judgements and decisions: checks, holds, releases and corrective actions."""

import uuid

from django.db import models
from django.db.models import Q

from .facility import Facility, User
from .lot import Lot
from .step import Reading, Step


class Check(models.Model):
    """One rule applied to readings, with the limit and source it used."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    lot = models.ForeignKey(Lot, on_delete=models.PROTECT, related_name="checks")
    step = models.ForeignKey(Step, on_delete=models.PROTECT, related_name="checks")
    reading = models.ForeignKey(Reading, null=True, on_delete=models.PROTECT)
    rule = models.CharField(max_length=30)
    stage = models.CharField(max_length=12)
    outcome = models.CharField(max_length=16)
    sentence = models.TextField()
    limit = models.CharField(max_length=24, blank=True)
    unit = models.CharField(max_length=12, blank=True)
    source = models.CharField(max_length=240)
    mark = models.CharField(max_length=16)
    rule_set = models.CharField(max_length=40)
    rule_set_hash = models.CharField(max_length=64)
    at = models.DateTimeField()

    def __str__(self) -> str:
        return f"{self.rule}: {self.outcome}"


class Hold(models.Model):
    """A lot set apart, with its reason; open until a signed decision ends it."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    lot = models.ForeignKey(Lot, on_delete=models.PROTECT, related_name="holds")
    reason = models.CharField(max_length=400)
    official = models.BooleanField(default=False)
    placed_at = models.DateTimeField()
    placed_by = models.ForeignKey(User, on_delete=models.PROTECT, related_name="+")
    ended_at = models.DateTimeField(null=True)
    ended_by = models.ForeignKey(User, null=True, on_delete=models.PROTECT, related_name="+")
    decision = models.CharField(max_length=12, blank=True)
    decision_reason = models.CharField(max_length=400, blank=True)
    shown_hash = models.CharField(max_length=64, blank=True)

    class Meta:
        constraints = [
            models.CheckConstraint(
                name="hold_decision_signed",
                condition=Q(ended_at=None, ended_by=None, decision="")
                | (Q(ended_at__isnull=False, ended_by__isnull=False) & ~Q(decision="")),
            )
        ]

    def __str__(self) -> str:
        return f"Hold on {self.lot_id}: {self.reason}"


class CorrectiveAction(models.Model):
    """What was done about a deviation; opened short, completed before release."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    hold = models.ForeignKey(Hold, on_delete=models.PROTECT, related_name="actions")
    deviation = models.CharField(max_length=400)
    opened_at = models.DateTimeField()
    opened_by = models.ForeignKey(User, on_delete=models.PROTECT, related_name="+")
    cause = models.TextField(blank=True)
    correction = models.TextField(blank=True)
    prevention = models.TextField(blank=True)
    evaluation = models.TextField(blank=True)
    completed_at = models.DateTimeField(null=True)
    completed_by = models.ForeignKey(User, null=True, on_delete=models.PROTECT, related_name="+")

    def __str__(self) -> str:
        return self.deviation


class UnpostedEntry(models.Model):
    """An act that happened but cannot stand in the ledger yet: kept, never lost."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    facility = models.ForeignKey(Facility, on_delete=models.PROTECT, related_name="unposted")
    kind = models.CharField(max_length=16)
    happened_at = models.DateTimeField()
    typed = models.JSONField(default=dict)
    reason = models.CharField(max_length=400)
    lots = models.ManyToManyField(Lot, related_name="unposted")
    recorded_at = models.DateTimeField()
    recorded_by = models.ForeignKey(User, on_delete=models.PROTECT, related_name="+")
    settled_at = models.DateTimeField(null=True)
    settled_by = models.ForeignKey(User, null=True, on_delete=models.PROTECT, related_name="+")
    settled_as = models.CharField(max_length=12, blank=True)
    settled_reason = models.CharField(max_length=400, blank=True)

    def __str__(self) -> str:
        return f"{self.kind} not posted: {self.reason}"

"""The append-only, hash-chained log of every change, and the ids that make a form count once."""

import uuid

from django.db import models

from .facility import Chain, Facility, User
from .step import Step


class JournalEntry(models.Model):
    """One change: the exact hashed bytes as text, chained to the entry before it."""

    chain = models.ForeignKey(Chain, on_delete=models.PROTECT, related_name="entries")
    seq = models.BigIntegerField()
    previous = models.CharField(max_length=64)
    digest = models.CharField(max_length=64)
    body = models.TextField()
    action = models.CharField(max_length=40)
    label = models.CharField(max_length=200)
    recorded_at = models.DateTimeField()

    class Meta:
        ordering = ["chain_id", "seq"]
        constraints = [
            models.UniqueConstraint(fields=["chain", "seq"], name="journal_seq_once"),
            models.UniqueConstraint(fields=["chain", "previous"], name="journal_previous_once"),
        ]

    def __str__(self) -> str:
        return f"{self.seq} {self.label}"


class ClientEntry(models.Model):
    """A form's own id with the hash of its content: the same form sent twice is recorded once."""

    facility = models.ForeignKey(Facility, on_delete=models.PROTECT)
    client_id = models.UUIDField(default=uuid.uuid4)
    content_hash = models.CharField(max_length=64)
    step = models.ForeignKey(Step, null=True, on_delete=models.PROTECT)

    class Meta:
        constraints = [
            models.UniqueConstraint(fields=["facility", "client_id"], name="client_entry_once")
        ]

    def __str__(self) -> str:
        return str(self.client_id)


class AccessLog(models.Model):
    """What an inspector looked at, kept apart from the journal."""

    facility = models.ForeignKey(Facility, on_delete=models.PROTECT)
    user = models.ForeignKey(User, on_delete=models.PROTECT)
    path = models.CharField(max_length=300)
    at = models.DateTimeField()

    def __str__(self) -> str:
        return f"{self.user} {self.path}"

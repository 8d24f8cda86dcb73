"""People, facilities, and who may do what where."""

import uuid

from django.contrib.auth.models import AbstractUser
from django.db import models

from lots.rules.roles import Role


class User(AbstractUser):
    """A person who logs in."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)

    def __str__(self) -> str:
        return self.get_full_name() or self.username


class Chain(models.Model):
    """The head of one journal: locked first by every write, so that writers never deadlock."""

    name = models.CharField(max_length=80, unique=True)
    seq = models.BigIntegerField(default=0)
    head = models.CharField(max_length=64, default="0" * 64)
    last_at = models.DateTimeField(null=True)

    def __str__(self) -> str:
        return f"{self.name} #{self.seq}"


class Facility(models.Model):
    """One sugarhouse or plant: address, zone, units, rule set, season start, code pattern."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    slug = models.SlugField(max_length=40, unique=True)
    name = models.CharField(max_length=120)
    address = models.CharField(max_length=240, blank=True)
    zone = models.CharField(max_length=64, default="America/New_York")
    rule_set = models.CharField(max_length=40, default="us-federal")
    season_start_month = models.PositiveSmallIntegerField(default=1)
    code_pattern = models.CharField(max_length=40, default="S{YY}{DDD}{LETTER}")
    volume_unit = models.CharField(max_length=8, default="US gal")
    mass_unit = models.CharField(max_length=8, default="lb")
    temperature_unit = models.CharField(max_length=8, default="°F")
    pressure_unit = models.CharField(max_length=8, default="inHg")
    release_needs_person = models.BooleanField(default=False)
    gauge_tolerance_percent = models.PositiveSmallIntegerField(default=5)
    fictional = models.BooleanField(default=False)
    chain = models.OneToOneField(Chain, on_delete=models.PROTECT, related_name="facility")

    def __str__(self) -> str:
        return self.name


class Membership(models.Model):
    """A person's role at one facility."""

    facility = models.ForeignKey(Facility, on_delete=models.PROTECT, related_name="memberships")
    user = models.ForeignKey(User, on_delete=models.PROTECT, related_name="memberships")
    role = models.CharField(max_length=12, choices=[(role.value, role.value) for role in Role])
    active = models.BooleanField(default=True)

    class Meta:
        constraints = [
            models.UniqueConstraint(fields=["facility", "user"], name="membership_once"),
        ]

    def __str__(self) -> str:
        return f"{self.user} as {self.role} at {self.facility}"


class Counter(models.Model):
    """The next number of a series, taken under the facility's lock; gaps are fine."""

    facility = models.ForeignKey(Facility, on_delete=models.PROTECT)
    key = models.CharField(max_length=40)
    next = models.BigIntegerField(default=0)

    class Meta:
        constraints = [models.UniqueConstraint(fields=["facility", "key"], name="counter_once")]

    def __str__(self) -> str:
        return f"{self.key} → {self.next}"

"""Where things are: rooms, woods sections and the vessels that hold contents; and partners."""

import uuid

from django.db import models

from .facility import Facility


class PartnerKind(models.TextChoices):
    SUPPLIER = "supplier", "Supplier"
    CUSTOMER = "customer", "Customer"
    CARRIER = "carrier", "Carrier"
    BRAND_OWNER = "brand-owner", "Brand owner"


class Partner(models.Model):
    """A one-up or one-down firm or person."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    facility = models.ForeignKey(Facility, on_delete=models.PROTECT, related_name="partners")
    name = models.CharField(max_length=120)
    kind = models.CharField(max_length=12, choices=PartnerKind.choices)
    address = models.CharField(max_length=240, blank=True)
    phone = models.CharField(max_length=40, blank=True)
    email = models.CharField(max_length=120, blank=True)
    contact_salt = models.CharField(max_length=32, blank=True)

    class Meta:
        constraints = [
            models.UniqueConstraint(fields=["facility", "name", "kind"], name="partner_once")
        ]

    def __str__(self) -> str:
        return self.name


class PlaceKind(models.TextChoices):
    WOODS = "woods", "Woods section"
    ROOM = "room", "Room or store"
    TANK = "tank", "Tank"
    RO = "ro", "RO machine"
    EVAPORATOR = "evaporator", "Evaporator"
    PRESS = "press", "Filter press"
    BATCH_TANK = "batch-tank", "Batch tank"
    CANNER = "canner", "Canner"
    TOTE = "tote", "Tote"
    DRUM = "drum", "Drum"


VESSELS = frozenset(PlaceKind) - {PlaceKind.WOODS, PlaceKind.ROOM}


class Place(models.Model):
    """A place; a vessel is a place that holds contents and may itself stand in a place."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    facility = models.ForeignKey(Facility, on_delete=models.PROTECT, related_name="places")
    name = models.CharField(max_length=80)
    kind = models.CharField(max_length=12, choices=PlaceKind.choices)
    stands_in = models.ForeignKey("self", null=True, blank=True, on_delete=models.PROTECT)
    capacity_ml = models.BigIntegerField(null=True, blank=True)
    working_ml = models.BigIntegerField(null=True, blank=True)
    tare_mg = models.BigIntegerField(null=True, blank=True)
    material = models.CharField(max_length=80, blank=True)
    food_grade_statement = models.CharField(max_length=160, blank=True)
    active = models.BooleanField(default=True)

    class Meta:
        constraints = [
            models.UniqueConstraint(fields=["facility", "name"], name="place_name_once"),
            models.CheckConstraint(
                name="place_capacity_positive",
                condition=models.Q(capacity_ml=None) | models.Q(capacity_ml__gt=0),
            ),
        ]

    def __str__(self) -> str:
        return self.name

    @property
    def is_vessel(self) -> bool:
        """Whether the place holds contents."""
        return self.kind in VESSELS


class Instrument(models.Model):
    """A hydrometer, refractometer, thermometer, scale or colour meter on the register."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    facility = models.ForeignKey(Facility, on_delete=models.PROTECT, related_name="instruments")
    tag = models.CharField(max_length=40)
    kind = models.CharField(max_length=20)
    reference_celsius = models.FloatField(null=True, blank=True)
    compensates = models.BooleanField(default=False)

    class Meta:
        constraints = [
            models.UniqueConstraint(fields=["facility", "tag"], name="instrument_tag_once")
        ]

    def __str__(self) -> str:
        return self.tag

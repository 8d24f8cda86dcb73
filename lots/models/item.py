"""What a lot is of, and the products that are packed."""

import uuid

from django.db import models

from .facility import Facility
from .place import Partner


class ItemKind(models.TextChoices):
    SAP = "sap", "Sap"
    CONCENTRATE = "concentrate", "Concentrate"
    SYRUP = "syrup", "Syrup"
    CONTENTS = "contents", "In-process contents"
    PACKED = "packed", "Packed product"
    FILTER_AID = "filter-aid", "Filter aid"
    FILTER_PAPER = "filter-paper", "Filter paper"
    DEFOAMER = "defoamer", "Defoamer"
    CONTAINER = "container", "Container"
    CLOSURE = "closure", "Closure"
    LABEL = "label", "Label stock"
    CLEANER = "cleaner", "Cleaning agent"


LIQUIDS = frozenset({ItemKind.SAP, ItemKind.CONCENTRATE, ItemKind.SYRUP, ItemKind.CONTENTS})
MATERIALS = frozenset(ItemKind) - LIQUIDS - {ItemKind.PACKED}


class Unit(models.TextChoices):
    MILLIGRAM = "mg", "mass"
    PIECE = "piece", "pieces"


class Item(models.Model):
    """A kind of thing kept in lots; its unit is fixed once it has a lot."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    facility = models.ForeignKey(Facility, on_delete=models.PROTECT, related_name="items")
    name = models.CharField(max_length=120)
    kind = models.CharField(max_length=14, choices=ItemKind.choices)
    unit = models.CharField(max_length=5, choices=Unit.choices)
    allergens = models.CharField(max_length=160, blank=True)
    size_value = models.CharField(max_length=12, blank=True)
    size_unit = models.CharField(max_length=8, blank=True)
    label_grade = models.CharField(max_length=40, blank=True)
    label_version = models.CharField(max_length=40, blank=True)
    gtin = models.CharField(max_length=14, blank=True)
    brand_owner = models.ForeignKey(Partner, null=True, blank=True, on_delete=models.PROTECT)
    active = models.BooleanField(default=True)

    class Meta:
        constraints = [models.UniqueConstraint(fields=["facility", "name"], name="item_name_once")]

    def __str__(self) -> str:
        return self.name

    @property
    def is_liquid(self) -> bool:
        """Whether the item carries soluble solids by mass."""
        return self.kind in LIQUIDS


class PrintedCode(models.Model):
    """A code on the goods; taken once for a product and text, shared by splits and returns."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    facility = models.ForeignKey(Facility, on_delete=models.PROTECT)
    item = models.ForeignKey(Item, on_delete=models.PROTECT, related_name="printed_codes")
    text = models.CharField(max_length=10)

    class Meta:
        constraints = [models.UniqueConstraint(fields=["item", "text"], name="printed_code_once")]

    def __str__(self) -> str:
        return self.text

"""The ledger: lots, what was drawn from them, and where the rest stands.

``lot --draw--> step --makes--> lot``. A lot is made by exactly one step; quantities are whole
milligrams or whole pieces; what remains is made + adjusted − drawn, held by the database.
"""

import uuid

from django.db import models
from django.db.models import Case, F, Q, When

from .facility import Facility, User
from .item import Item, PrintedCode
from .place import Place
from .step import Step


class GoodsKind(models.TextChoices):
    OWN_SYRUP = "own-syrup", "Own syrup"
    RECEIVED_SYRUP = "received-syrup", "Received syrup"
    MADE_PRODUCT = "made-product", "Made product"
    KIT = "kit", "Kit"
    OPENING_STOCK = "opening-stock", "Opening stock"
    OTHER = "other", "Other"


class LotState(models.TextChoices):
    OPEN = "open", "open (being made)"
    WAITING = "waiting", "waiting"
    RELEASED = "released", "released"
    REJECTED = "rejected", "rejected"
    VOID = "void", "void"


def _whole(**kwargs: object) -> models.BigIntegerField:
    """Return a ledger column: whole milligrams or pieces."""
    return models.BigIntegerField(**kwargs)


class Lot(models.Model):
    """A quantity of one item made or received under like conditions."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    facility = models.ForeignKey(Facility, on_delete=models.PROTECT, related_name="lots")
    item = models.ForeignKey(Item, on_delete=models.PROTECT, related_name="lots")
    code = models.CharField(max_length=20)
    printed_code = models.ForeignKey(
        PrintedCode, null=True, blank=True, on_delete=models.PROTECT, related_name="lots"
    )
    supplier_code = models.CharField(max_length=60, blank=True)
    made_by = models.ForeignKey(Step, on_delete=models.PROTECT, related_name="made_lots")
    goods_kind = models.CharField(max_length=16, choices=GoodsKind.choices, default=GoodsKind.OTHER)
    state = models.CharField(max_length=10, choices=LotState.choices, default=LotState.WAITING)
    made_at = models.DateTimeField()
    best_before_date = models.DateField(null=True, blank=True)
    estimated = models.BooleanField(default=False)
    # Where it was first put, and whether its quantity follows from what its step drew: then a
    # re-division of the step's draws re-makes it.
    put_in = models.ForeignKey(Place, null=True, blank=True, on_delete=models.PROTECT)
    derived = models.BooleanField(default=False)
    typed_value = models.CharField(max_length=24, blank=True)
    typed_unit = models.CharField(max_length=8, blank=True)
    made = _whole(null=True)
    adjusted = _whole(default=0)
    drawn = _whole(default=0)
    shipped = _whole(default=0)
    returned = _whole(default=0)
    solids_made = _whole(null=True)
    solids_adjusted = _whole(default=0)
    solids_drawn = _whole(default=0)
    piece_mg = _whole(null=True)
    piece_solids_mg = _whole(null=True)
    remaining = models.GeneratedField(
        expression=F("made") + F("adjusted") - F("drawn"),
        output_field=models.BigIntegerField(null=True),
        db_persist=True,
    )
    solids_remaining = models.GeneratedField(
        expression=F("solids_made") + F("solids_adjusted") - F("solids_drawn"),
        output_field=models.BigIntegerField(null=True),
        db_persist=True,
    )

    class Meta:
        indexes = [
            models.Index(fields=["made_by"], name="lot_by_step"),
            models.Index(fields=["facility", "state", "made_at"], name="lot_by_state"),
        ]
        constraints = [
            models.UniqueConstraint(fields=["facility", "code"], name="lot_code_once"),
            models.CheckConstraint(
                name="lot_quantities_not_negative",
                condition=(Q(made=None) | Q(made__gte=0))
                & Q(drawn__gte=0)
                & Q(shipped__gte=0)
                & Q(returned__gte=0)
                & Q(solids_drawn__gte=0),
            ),
            models.CheckConstraint(
                name="lot_not_overdrawn",
                condition=Q(made=None) | Q(made__gte=F("drawn") - F("adjusted")),
            ),
            models.CheckConstraint(
                name="lot_solids_not_overdrawn",
                condition=Q(solids_made=None)
                | Q(solids_made__gte=F("solids_drawn") - F("solids_adjusted")),
            ),
            models.CheckConstraint(
                name="lot_returned_within_shipped",
                condition=Q(returned__lte=F("shipped")) & Q(shipped__lte=F("drawn")),
            ),
        ]

    def __str__(self) -> str:
        return self.code


class VesselTake(models.Model):
    """What a step asked of a vessel, as typed: a re-division asks the same again.

    No amount is all of it. The draws are the answer; this is the question.
    """

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    step = models.ForeignKey(Step, on_delete=models.PROTECT, related_name="takes")
    vessel = models.ForeignKey(Place, on_delete=models.PROTECT, related_name="takes")
    at = models.DateTimeField()
    typed_value = models.CharField(max_length=24, blank=True)
    typed_unit = models.CharField(max_length=8, blank=True)
    emptied = models.BooleanField(default=False)
    accept_difference = models.BooleanField(default=False)

    class Meta:
        indexes = [models.Index(fields=["vessel", "at"], name="take_by_vessel")]

    def __str__(self) -> str:
        return f"{self.vessel_id} at {self.at:%Y-%m-%d %H:%M}"


class DrawRole(models.TextChoices):
    INGREDIENT = "ingredient", "Ingredient"
    AID = "aid", "Processing aid"
    PACKAGING = "packaging", "Packaging"
    CLEANING = "cleaning", "Cleaning agent"
    CARRY_OVER = "carry-over", "Carry-over"
    RESIDUE = "residue", "Residue"
    SHIPPED = "shipped", "Shipped"
    REMOVED = "removed", "Removed"
    RETURNED = "returned", "Returned"
    BETWEEN = "between-facilities", "Between facilities"


def _live(column: str) -> models.GeneratedField:
    """Return a key that is NULL once the draw has ended, so that a walk joins on it alone."""
    return models.GeneratedField(
        expression=Case(When(ended_at__isnull=True, then=F(column)), default=None),
        output_field=models.BigIntegerField(null=True),
        db_persist=True,
    )


class Draw(models.Model):
    """One lot's quantity used by one step; ended, never updated."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    facility = models.ForeignKey(Facility, on_delete=models.PROTECT)
    lot = models.ForeignKey(Lot, on_delete=models.PROTECT, related_name="draws")
    from_step = models.ForeignKey(Step, on_delete=models.PROTECT, related_name="draws_out")
    step = models.ForeignKey(Step, on_delete=models.PROTECT, related_name="draws")
    role = models.CharField(max_length=18, choices=DrawRole.choices)
    quantity = models.BigIntegerField(null=True)
    solids = models.BigIntegerField(null=True)
    returns = models.ForeignKey("self", null=True, on_delete=models.PROTECT)
    from_place = models.ForeignKey(Place, null=True, on_delete=models.PROTECT)
    asked = models.ForeignKey(VesselTake, null=True, on_delete=models.PROTECT, related_name="draws")
    recorded_at = models.DateTimeField()
    ended_at = models.DateTimeField(null=True)
    ended_by = models.ForeignKey(User, null=True, on_delete=models.PROTECT)
    live_from = _live("from_step")
    live_step = _live("step")
    live_lot = _live("lot")

    class Meta:
        indexes = [
            models.Index(fields=["live_from", "step", "lot", "role"], name="draw_forward"),
            models.Index(fields=["live_step", "from_step", "lot", "role"], name="draw_back"),
            models.Index(fields=["live_lot", "step"], name="draw_of_lot"),
        ]
        constraints = [
            models.CheckConstraint(
                name="draw_not_negative",
                condition=(Q(quantity=None) | Q(quantity__gte=0))
                & (Q(solids=None) | Q(solids__gte=0)),
            ),
            models.CheckConstraint(
                name="draw_ended_both_or_neither",
                condition=Q(ended_at=None, ended_by=None)
                | Q(ended_at__isnull=False, ended_by__isnull=False),
            ),
        ]

    def __str__(self) -> str:
        return f"{self.lot_id} → {self.step_id} ({self.role})"


class Stock(models.Model):
    """Where a lot stands: the quantities of its places sum to what remains of it."""

    lot = models.ForeignKey(Lot, on_delete=models.PROTECT, related_name="stock")
    place = models.ForeignKey(Place, on_delete=models.PROTECT, related_name="stock")
    quantity = models.BigIntegerField()

    class Meta:
        constraints = [
            models.UniqueConstraint(fields=["lot", "place"], name="stock_once"),
            models.CheckConstraint(name="stock_positive", condition=Q(quantity__gte=0)),
        ]

    def __str__(self) -> str:
        return f"{self.quantity} of {self.lot_id} at {self.place_id}"


class Adjustment(models.Model):
    """A difference a step booked on a lot: a count, a gauge, material above its book."""

    uuid = models.UUIDField(default=uuid.uuid4, unique=True, editable=False)
    step = models.ForeignKey(Step, on_delete=models.PROTECT, related_name="adjustments")
    lot = models.ForeignKey(Lot, on_delete=models.PROTECT, related_name="adjustments")
    place = models.ForeignKey(Place, on_delete=models.PROTECT)
    quantity = models.BigIntegerField()
    solids = models.BigIntegerField(default=0)
    ended_at = models.DateTimeField(null=True)
    ended_by = models.ForeignKey(User, null=True, on_delete=models.PROTECT)

    def __str__(self) -> str:
        return f"{self.quantity:+d} of {self.lot_id}"

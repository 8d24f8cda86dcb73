"""A season's totals: what came in, what was made of it, what was sold; read by a few statements."""

from dataclasses import dataclass
from datetime import date, datetime
from zoneinfo import ZoneInfo

from django.db.models import (
    Count,
    DurationField,
    Exists,
    ExpressionWrapper,
    F,
    Max,
    Min,
    OuterRef,
    Q,
    QuerySet,
    Sum,
)
from django.db.models.functions import Coalesce, TruncDate

from lots.models import Draw, DrawRole, Facility, ItemKind, Lot, LotState, Step, StepKind, Unit

MATTER = (DrawRole.INGREDIENT, DrawRole.CARRY_OVER)
# The steps that ought to give out the solids they take in, in the order of the work.
KEEPING = (
    StepKind.CONCENTRATION,
    StepKind.BOIL,
    StepKind.FILTRATION,
    StepKind.BLEND,
    StepKind.TRANSFER,
    StepKind.REHEAT,
    StepKind.DRUM_FILL,
    StepKind.CONTAINER_FILL,
    StepKind.REWORK,
)


@dataclass(frozen=True)
class Amount:
    """Some lots of a liquid added up; what was not measured is counted, never guessed."""

    mass: int = 0
    solids: int = 0
    mass_of_solids: int = 0
    lots: int = 0
    unmeasured: int = 0

    def __add__(self, other: "Amount") -> "Amount":
        return Amount(
            self.mass + other.mass,
            self.solids + other.solids,
            self.mass_of_solids + other.mass_of_solids,
            self.lots + other.lots,
            self.unmeasured + other.unmeasured,
        )

    @property
    def brix(self) -> float | None:
        """Return the mean °Brix by mass, of what had a reading."""
        return self.solids * 100 / self.mass_of_solids if self.mass_of_solids else None


@dataclass(frozen=True)
class SapRow:
    """The sap of one woods section into one tank."""

    woods: str
    tank: str
    amount: Amount


@dataclass(frozen=True)
class Runs:
    """The runs of one kind of step: how many, how many still open, how long in all."""

    number: int
    open: int
    hours: float


@dataclass(frozen=True)
class ProductRow:
    """One product: packed in how many runs, sold, come back; pieces, or milligrams in bulk."""

    name: str
    unit: str
    runs: int = 0
    made: int = 0
    sold: int = 0
    returned: int = 0
    sales: int = 0
    mass: int = 0


@dataclass(frozen=True)
class BalanceRow:
    """The solids of one kind of step, of the records where all of them are known."""

    kind: StepKind
    steps: int
    left_out: int
    solids_in: int
    solids_out: int


@dataclass(frozen=True)
class DayRow:
    """One day's sap and syrup."""

    day: date
    sap: Amount
    syrup: Amount
    boils: int


@dataclass(frozen=True)
class Season:
    """Everything the season page shows, as plain rows."""

    year: int
    first: datetime
    after: datetime
    sap: list[SapRow]
    concentrate: Amount
    ro: Runs
    boils: Runs
    syrup: Amount
    drums: Amount
    bought: Amount
    products: list[ProductRow]
    customers: int
    balance: list[BalanceRow]
    days: list[DayRow]

    @property
    def sap_total(self) -> Amount:
        """Return all sap together."""
        return sum((row.amount for row in self.sap), Amount())


def start_of(facility: Facility, year: int) -> datetime:
    """Return when a season begins where the facility is: its month's first midnight."""
    return datetime(year, facility.season_start_month, 1, tzinfo=ZoneInfo(facility.zone))


def year_of(facility: Facility, moment: datetime) -> int:
    """Return the year in which the season of a moment began."""
    there = moment.astimezone(ZoneInfo(facility.zone))
    return there.year if there.month >= facility.season_start_month else there.year - 1


def years(facility: Facility) -> list[int]:
    """Return the seasons that have records, newest first."""
    ends = Step.objects.filter(facility=facility, voided_at=None).aggregate(
        first=Min("started_at"), last=Max("started_at")
    )
    if ends["first"] is None:
        return []
    first, last = year_of(facility, ends["first"]), year_of(facility, ends["last"])
    return list(range(last, first - 1, -1))


def of_year(facility: Facility, year: int) -> Season:
    """Return a season's totals."""
    first, after = start_of(facility, year), start_of(facility, year + 1)
    steps = Step.objects.filter(
        facility=facility, started_at__gte=first, started_at__lt=after, voided_at=None
    )
    lots = (
        Lot.objects.filter(made_by__in=steps.order_by().values("pk"))
        .exclude(state=LotState.VOID)
        .order_by()
    )
    syrup = lots.filter(item__kind=ItemKind.SYRUP)
    return Season(
        year=year,
        first=first,
        after=after,
        sap=_sap(lots),
        concentrate=_amount(lots.filter(made_by__kind=StepKind.CONCENTRATION)),
        ro=_runs(steps, StepKind.CONCENTRATION),
        boils=_runs(steps, StepKind.BOIL),
        syrup=_amount(syrup.filter(made_by__kind=StepKind.BOIL)),
        drums=_amount(syrup.filter(made_by__kind=StepKind.DRUM_FILL)),
        bought=_amount(syrup.filter(made_by__kind=StepKind.RECEIVING)),
        products=_products(lots, steps),
        customers=steps.filter(kind=StepKind.SALE, partner__isnull=False)
        .values("partner")
        .distinct()
        .count(),
        balance=_balance(steps),
        days=_days(facility, lots, steps),
    )


_SUMS = {
    "mass": Sum("made"),
    "solids": Sum("solids_made"),
    "mass_of_solids": Sum("made", filter=Q(solids_made__isnull=False)),
    "lots": Count("pk"),
    "unmeasured": Count("pk", filter=Q(made=None)),
}


def _plain(row: dict) -> Amount:
    return Amount(**{name: int(row[name] or 0) for name in _SUMS})


def _amount(lots: QuerySet[Lot]) -> Amount:
    return _plain(lots.aggregate(**_SUMS))


def _sap(lots: QuerySet[Lot]) -> list[SapRow]:
    rows = (
        lots.filter(made_by__kind=StepKind.COLLECTION)
        .values("made_by__place__name", "put_in__name")
        .annotate(**_SUMS)
        .order_by("made_by__place__name", "put_in__name")
    )
    return [
        SapRow(
            row["made_by__place__name"] or "not recorded",
            row["put_in__name"] or "not recorded",
            _plain(row),
        )
        for row in rows
    ]


def _runs(steps: QuerySet[Step], kind: StepKind) -> Runs:
    lasted = ExpressionWrapper(F("ended_at") - F("started_at"), output_field=DurationField())
    found = steps.filter(kind=kind).aggregate(
        number=Count("pk"), open=Count("pk", filter=Q(ended_at=None)), lasted=Sum(lasted)
    )
    hours = found["lasted"].total_seconds() / 3600 if found["lasted"] else 0.0
    return Runs(found["number"], found["open"], hours)


def _products(lots: QuerySet[Lot], steps: QuerySet[Step]) -> list[ProductRow]:
    made = (
        lots.filter(made_by__kind=StepKind.CONTAINER_FILL)
        .values("item__name", "item__unit")
        .annotate(runs=Count("made_by", distinct=True), mass=Sum(F("made") * F("piece_mg")))
        .annotate(made=Sum("made"))
    )
    out = (
        Draw.objects.filter(step__in=steps.order_by().values("pk"), ended_at=None)
        .filter(role__in=(DrawRole.SHIPPED, DrawRole.RETURNED))
        .order_by()
        .values("lot__item__name", "lot__item__unit")
        .annotate(
            sold=Sum("quantity", filter=Q(role=DrawRole.SHIPPED)),
            returned=Sum("quantity", filter=Q(role=DrawRole.RETURNED)),
            sales=Count("step", filter=Q(role=DrawRole.SHIPPED), distinct=True),
        )
    )
    rows: dict[str, dict] = {}
    for row in made:
        told = {"unit": row["item__unit"], "runs": row["runs"], "made": int(row["made"] or 0)}
        rows[row["item__name"]] = told | {"mass": int(row["mass"] or 0)}
    for row in out:
        told = rows.setdefault(row["lot__item__name"], {"unit": row["lot__item__unit"]})
        told |= {name: int(row[name] or 0) for name in ("sold", "returned", "sales")}
    return [
        ProductRow(name, **told)
        for name, told in sorted(
            rows.items(), key=lambda one: (one[1]["unit"] != Unit.PIECE, one[0])
        )
    ]


def _balance(steps: QuerySet[Step]) -> list[BalanceRow]:
    """Return the solids in and out of each kind of step; a record with a gap is left out."""
    drawn = Draw.objects.filter(step=OuterRef("pk"), ended_at=None, role__in=MATTER)
    made = Lot.objects.filter(made_by=OuterRef("pk")).exclude(state=LotState.VOID)
    kept = steps.filter(kind__in=KEEPING).annotate(
        gap=Exists(
            drawn.filter(solids=None).filter(Q(quantity=None) | Q(lot__piece_solids_mg=None))
        )
        | Exists(made.filter(solids_made=None, piece_solids_mg=None))
        | Exists(made.filter(made=None))
        | ~Exists(drawn)
    )
    whole = kept.filter(gap=False, ended_at__isnull=False).order_by().values("pk")
    ins = dict(
        Draw.objects.filter(step__in=whole, ended_at=None, role__in=MATTER)
        .order_by()
        .values_list("step__kind")
        .annotate(into=Sum(Coalesce(F("solids"), F("quantity") * F("lot__piece_solids_mg"))))
    )
    solids = Coalesce(F("solids_made"), F("made") * F("piece_solids_mg"))
    outs = dict(
        Lot.objects.filter(made_by__in=whole)
        .exclude(state=LotState.VOID)
        .order_by()
        .values_list("made_by__kind")
        .annotate(out=Sum(solids))
    )
    counts = dict(
        steps.filter(kind__in=KEEPING).order_by().values_list("kind").annotate(Count("pk"))
    )
    known = dict(
        Step.objects.filter(pk__in=whole).order_by().values_list("kind").annotate(Count("pk"))
    )
    return [
        BalanceRow(
            kind,
            known.get(kind, 0),
            counts[kind] - known.get(kind, 0),
            int(ins.get(kind) or 0),
            int(outs.get(kind) or 0),
        )  # fmt: skip
        for kind in KEEPING
        if counts.get(kind)
    ]


def _days(facility: Facility, lots: QuerySet[Lot], steps: QuerySet[Step]) -> list[DayRow]:
    zone = ZoneInfo(facility.zone)
    sap = _by_day(lots.filter(made_by__kind=StepKind.COLLECTION), zone)
    syrup = _by_day(lots.filter(made_by__kind=StepKind.BOIL, item__kind=ItemKind.SYRUP), zone)
    boils = dict(
        steps.filter(kind=StepKind.BOIL)
        .order_by()
        .annotate(day=TruncDate("started_at", tzinfo=zone))
        .values_list("day")
        .annotate(Count("pk"))
    )
    return [
        DayRow(day, sap.get(day, Amount()), syrup.get(day, Amount()), boils.get(day, 0))
        for day in sorted({*sap, *syrup, *boils})
    ]


def _by_day(lots: QuerySet[Lot], zone: ZoneInfo) -> dict[date, Amount]:
    rows = (
        lots.annotate(day=TruncDate("made_by__started_at", tzinfo=zone))
        .values("day")
        .annotate(**_SUMS)
    )
    return {row["day"]: _plain(row) for row in rows}

"""A season in sentences and tables."""

from dataclasses import dataclass
from datetime import timedelta
from decimal import Decimal

from lots.documents.season_chart import Series
from lots.models import Facility, Unit
from lots.quantities.rounding import volume_of
from lots.quantities.units import convert
from lots.rules import loss, rule_set
from lots.rules.verdict import Verdict
from lots.tracing.season import Amount, BalanceRow, ProductRow, Season

from .words import counted, day_words

MOST_BRIX = 85  # what the density of a sugar solution is known for


def volume(amount: Amount, facility: Facility) -> float | None:
    """Return some liquid's volume in the facility's unit, at its mean °Brix; none without one."""
    brix = amount.brix
    if brix is None or brix > MOST_BRIX:
        return None
    return float(volume_of(amount.mass, brix, facility.volume_unit))


def mass_words(milligrams: int, facility: Facility) -> str:
    """Return a mass in the facility's unit."""
    kilograms = Decimal(milligrams) / 1_000_000
    found = convert(kilograms, "kg", facility.mass_unit)
    return f"{found:,.1f} {facility.mass_unit}"


def amount_words(amount: Amount, facility: Facility) -> str:
    """Return some liquid in words: by volume where its density is known, else by mass."""
    if not amount.mass:
        return "not measured" if amount.unmeasured else "none"
    found = volume(amount, facility)
    if found is None:
        return mass_words(amount.mass, facility)
    return f"{found:,.0f} {facility.volume_unit}"


def brix_words(amount: Amount) -> str:
    """Return the mean °Brix of some liquid."""
    return "no reading" if amount.brix is None else f"{amount.brix:.1f} °Brix"


def sentence(season: Season, facility: Facility) -> str:
    """Return the first thing said of a season."""
    last = (season.after - timedelta(hours=12)).date()
    when = f"Season of {day_words(season.first.date())} to {day_words(last)}"
    sap = season.sap_total
    if not sap.lots and not season.boils.number and not season.products:
        return f"{when}: nothing is recorded."
    days = sum(1 for row in season.days if row.sap.lots)
    boils = counted(season.boils.number, "boil")
    made = f"{boils} made {amount_words(season.syrup, facility)} of syrup."
    parts = [f"{when}: {amount_words(sap, facility)} of sap on {counted(days, 'day')}; {made}"]
    parts += _ratio(season, facility)
    packed = [row for row in season.products if row.unit == Unit.PIECE]
    runs = sum(row.runs for row in packed)
    if runs:
        made = sum(row.made for row in packed)
        parts.append(f"{counted(runs, 'fill')} packed {made:,} containers.")
    sold = sum(row.sold for row in packed)
    if sold:
        parts.append(f"{sold:,} were sold, to {counted(season.customers, 'customer')} by name.")
    return " ".join(parts)


def _ratio(season: Season, facility: Facility) -> list[str]:
    sap, syrup = volume(season.sap_total, facility), volume(season.syrup, facility)
    return [f"That is {sap / syrup:.0f} of sap to 1 of syrup by volume."] if sap and syrup else []


def facts(season: Season, facility: Facility) -> list[tuple[str, str]]:
    """Return what stands between the sap and the shelf."""

    def run_words(number: int, running: int, hours: float) -> str:
        told = [str(number), f"{hours:,.1f} h"] if number else ["none"]
        return ", ".join([*told, f"{running} running"] if running else told)

    def liquid(amount: Amount) -> str:
        if not amount.lots:
            return "none"
        told = f"{amount_words(amount, facility)} in {counted(amount.lots, 'lot')}"
        told += f", {brix_words(amount)}"
        return told + (f", {amount.unmeasured} not measured" if amount.unmeasured else "")

    return [
        ("RO runs", run_words(season.ro.number, season.ro.open, season.ro.hours)),
        ("Concentrate", liquid(season.concentrate)),
        ("Boils", run_words(season.boils.number, season.boils.open, season.boils.hours)),
        ("Syrup made", liquid(season.syrup)),
        ("Drums filled", liquid(season.drums)),
        ("Syrup bought in", liquid(season.bought)),
    ]


@dataclass(frozen=True)
class ProductLine:
    """A product's line: packed, sold and come back, in words."""

    name: str
    runs: str
    made: str
    mass: str
    sold: str
    returned: str
    sales: int


def product_lines(season: Season, facility: Facility) -> list[ProductLine]:
    """Return what was packed and sold of each product, bulk last."""

    def words(row: ProductRow, number: int) -> str:
        return f"{number:,}" if row.unit == Unit.PIECE else mass_words(number, facility)

    return [
        ProductLine(
            row.name,
            str(row.runs) if row.runs else "",
            words(row, row.made) if row.runs else "",
            mass_words(row.mass, facility) if row.mass else "",
            words(row, row.sold),
            words(row, row.returned),
            row.sales,
        )
        for row in season.products
    ]


@dataclass(frozen=True)
class BalanceLine:
    """A kind of step's solids: in, out, lost, and whether that is usual."""

    name: str
    went_in: str
    came_out: str
    words: str
    verdict: Verdict
    band: str


_BANDS = {
    "loss-pass": "within the {limit} % usual",
    "loss-high": "above the {limit} % usual",
    "loss-gain": "more out than in: check the readings and amounts",
    "loss-not-set": "no band is set for it",
}


def balance_lines(season: Season, facility: Facility) -> list[BalanceLine]:
    """Return the solids of each kind of step, the loss told in words."""
    rules = rule_set.load(facility.rule_set)
    lines = []
    for row in season.balance:
        verdict = loss.check(rules, row.kind, row.solids_in, row.solids_out)
        lines.append(
            BalanceLine(
                str(row.kind.label),
                mass_words(row.solids_in, facility),
                mass_words(row.solids_out, facility),
                loss_words(row, facility),
                verdict,
                _BANDS[verdict.message].format(limit=verdict.limit),
            )
        )
    return lines


def loss_words(row: BalanceRow, facility: Facility) -> str:
    """Return a loss in a sentence, and how many records could not be counted."""
    lost = row.solids_in - row.solids_out
    if not row.steps:
        told = "No record of it has all its quantities measured."
    elif lost == 0:
        told = "As much came out as went in."
    else:
        share = abs(lost) * 100 / row.solids_in if row.solids_in else 0.0
        word = "lost" if lost > 0 else "more came out than went in"
        told = f"{mass_words(abs(lost), facility)} {word}, {share:.1f} % of what went in."
    if row.left_out and row.steps:
        told += f" {counted(row.left_out, 'record')} left out: still open or not all measured."
    return told


def series(season: Season, facility: Facility) -> list[Series]:
    """Return the two panels of the season's chart."""
    panels = []
    for name, fill, kind in (("Sap", "#BFD8CC", "sap"), ("Syrup", "#D08A2E", "syrup")):
        values = {row.day: volume(getattr(row, kind), facility) or 0.0 for row in season.days}
        panels.append(Series(name, facility.volume_unit, fill, values))
    return panels


def day_lines(season: Season, facility: Facility) -> list[tuple[object, str, str, int, str]]:
    """Return the chart's table: day, sap, its °Brix, boils, syrup."""
    return [
        (
            row.day,
            amount_words(row.sap, facility) if row.sap.lots else "none",
            f"{row.sap.brix:.1f}" if row.sap.brix is not None else "",
            row.boils,
            amount_words(row.syrup, facility) if row.syrup.lots else "none",
        )
        for row in season.days
    ]


def title(season: Season) -> str:
    """Return a season's name: its year, or its two years."""
    last = season.after - timedelta(hours=12)
    same = last.year == season.first.year
    return str(season.year) if same else f"{season.year} to {last.year}"

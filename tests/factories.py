"""Builds the small sugarhouse of the tests, by the recording functions alone."""

from dataclasses import dataclass, field
from datetime import UTC, datetime, timedelta
from decimal import Decimal

from lots.models import Facility, Item, Lot, Partner, Place, Step, StepKind, User
from lots.recording import boil, container_fill, receiving, sap, setup, syrup
from lots.recording._sources import FromLot, FromVessel
from lots.recording.context import Context
from lots.recording.measures import DensityReading, Typed
from lots.rules.roles import Role

NOON = datetime(2026, 4, 2, 16, 0, tzinfo=UTC)


def gallons(number: str) -> Typed:
    return Typed(Decimal(number), "US gal")


def fahrenheit(number: str) -> Typed:
    return Typed(Decimal(number), "°F")


def pieces(number: int) -> Typed:
    return Typed(Decimal(number), "pieces")


def brix(number: str, at_fahrenheit: str = "60") -> DensityReading:
    return DensityReading(Decimal(number), sample=fahrenheit(at_fahrenheit))


@dataclass
class House:
    """The facility, its people and registers, and the clock of its records."""

    facility: Facility
    owner: User
    lead: User
    recorder: User
    inspector: User
    places: dict[str, Place] = field(default_factory=dict)
    items: dict[str, Item] = field(default_factory=dict)
    supplier: Partner | None = None
    customer: Partner | None = None

    def at(self, hours: float = 0) -> datetime:
        return NOON + timedelta(hours=hours)

    def context(self, by: User | None = None, hours: float = 0) -> Context:
        return Context(self.facility, by or self.recorder, now=self.at(hours))

    def collect(self, amount: str = "400", tank: str = "Tank 1", hours: float = 0) -> Lot:
        step = sap.record_collection(
            self.context(hours=hours),
            at=self.at(hours),
            woods=self.places["North woods"],
            tank=self.places[tank],
            item=self.items["sap"],
            amount=gallons(amount),
            brix=DensityReading(Decimal("2.0"), device="refractometer"),
        )
        return step.made_lots.get()

    def boil(self, hours: float = 4, into: str = "Batch tank", out: str = "8") -> Step:
        return boil.record_boil(
            self.context(hours=hours),
            at=self.at(hours - 3),
            ended_at=self.at(hours),
            evaporator=self.places["Evaporator"],
            sources=[FromVessel(self.places["Tank 1"])],
            draw_offs=[
                boil.DrawOff(self.at(hours - 1), self.places[into], gallons(out), brix("67.2"))
            ],
            syrup=self.items["syrup"],
            contents=self.items["contents"],
            stays=gallons("5"),
            stays_brix=brix("30"),
        )

    def filter(self, hours: float = 5, aid: Lot | None = None) -> Lot:
        sources = [FromVessel(self.places["Batch tank"])]
        if aid is not None:
            from lots.models import DrawRole

            sources.append(FromLot(aid, Typed(Decimal("1"), "lb"), DrawRole.AID))
        step = syrup.record_mixture(
            self.context(hours=hours),
            kind=StepKind.FILTRATION,
            at=self.at(hours),
            sources=sources,
            into=self.places["Canner"],
            item=self.items["syrup"],
        )
        return step.made_lots.get()

    def fill(self, hours: float = 6, *, made: int = 20, density: str = "67.2", heat: str = "186"):
        run = container_fill.Run(
            product=self.items["quart"],
            made=made,
            into=self.places["Store"],
            fill_temperatures=[fahrenheit(heat)],
            brix=brix(density),
            transmittance=Typed(Decimal("62"), "%Tc"),
        )
        step = container_fill.record_container_fill(
            self.context(hours=hours),
            at=self.at(hours),
            sources=[FromVessel(self.places["Canner"], gallons(str(made / 4)))],
            run=run,
        )
        return step.made_lots.get()

    def receive_aid(self, hours: float = -24) -> Lot:
        step = receiving.record_receiving(
            self.context(hours=hours),
            at=self.at(hours),
            supplier=self.supplier,
            item=self.items["aid"],
            amount=Typed(Decimal("50"), "lb"),
            place=self.places["Store"],
            supplier_code="DE-77",
        )
        return step.made_lots.get()

    def jars(self, **fill) -> Lot:
        """A whole chain: sap, boil, press, fill."""
        aid = self.receive_aid()
        self.collect()
        self.boil()
        self.filter(aid=aid)
        return self.fill(**fill)


def sugarhouse(slug: str = "maple-ridge") -> House:
    """Make an invented sugarhouse under Vermont's rules."""
    owner = User.objects.create_user(f"{slug}-owner", password="pass-word-1")
    facility = setup.create_facility(
        slug=slug, name="Maple Ridge (fictional)", owner=owner, rule_set="vermont", fictional=True,
        now=NOON - timedelta(days=30),
    )  # fmt: skip
    early = Context(facility, owner, now=NOON - timedelta(days=30))
    people = {
        role: setup.add_person(
            early, username=f"{slug}-{role.value}", password="pass-word-1", role=role
        ).user
        for role in (Role.LEAD, Role.RECORDER, Role.INSPECTOR)
    }
    house = House(facility, owner, people[Role.LEAD], people[Role.RECORDER], people[Role.INSPECTOR])
    for name, kind in (
        ("North woods", "woods"), ("South woods", "woods"), ("Tank 1", "tank"), ("Tank 2", "tank"),
        ("RO", "ro"), ("Evaporator", "evaporator"), ("Batch tank", "batch-tank"),
        ("Canner", "canner"), ("Drum 1", "drum"), ("Drum 2", "drum"), ("Store", "room"),
    ):  # fmt: skip
        house.places[name] = setup.add_place(early, name=name, kind=kind)
    for key, name, kind, unit in (
        ("sap", "Sap", "sap", "mg"), ("concentrate", "Concentrate", "concentrate", "mg"),
        ("syrup", "Syrup", "syrup", "mg"), ("contents", "Pan contents", "contents", "mg"),
        ("aid", "Filter aid", "filter-aid", "mg"), ("bottle", "Quart bottle", "container", "piece"),
    ):  # fmt: skip
        house.items[key] = setup.add_item(early, name=name, kind=kind, unit=unit)
    house.items["quart"] = setup.add_item(
        early, name="Amber quart", kind="packed", unit="piece", size_value="1", size_unit="qt",
        label_grade="Amber",
    )  # fmt: skip
    house.supplier = setup.add_partner(early, name="Aid Supply (fictional)", kind="supplier")
    house.customer = setup.add_partner(early, name="Corner Shop (fictional)", kind="customer")
    return house

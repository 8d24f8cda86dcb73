"""The demo's invented sugarhouse: its people, registers and clock."""

from dataclasses import dataclass, field
from datetime import datetime, timedelta
from decimal import Decimal
from typing import Any

from lots.models import Facility, Instrument, Item, Lot, Partner, Place, Step, User
from lots.recording import setup
from lots.recording.context import Context
from lots.recording.measures import NOT_MEASURED, DensityReading, Typed
from lots.rules.roles import Role

PASSWORD = "sugaring-2026"  # noqa: S105 - printed for the demo alone


def measure(pair: list[str] | None) -> Typed:
    """Return a typed amount from a fixture's [number, unit]."""
    return Typed(Decimal(pair[0]), pair[1]) if pair else NOT_MEASURED


@dataclass
class Season:
    """The demo's registers and its clock."""

    facility: Facility
    people: dict[str, User]
    start: datetime
    tags: dict[str, Lot] = field(default_factory=dict)
    sales: dict[str, Step] = field(default_factory=dict)
    tools: dict[str, Instrument] = field(default_factory=dict)

    def at(self, day: float, hour: float) -> datetime:
        """Return a moment of the season."""
        return self.start + timedelta(days=day, hours=hour)

    def context(self, row: dict[str, Any], role: str = "recorder") -> Context:
        """Return who records a row, minutes after the act or days late."""
        hour = row.get("end", row["hour"])
        now = self.at(row["day"] + row.get("late", 0), hour) + timedelta(minutes=5)
        return Context(self.facility, self.people[role], now=now)

    def place(self, name: str) -> Place:
        """Return a place by name."""
        return Place.objects.get(facility=self.facility, name=name)

    def item(self, name: str) -> Item:
        """Return an item by name."""
        return Item.objects.get(facility=self.facility, name=name)

    def partner(self, name: str) -> Partner:
        """Return a partner by name."""
        return Partner.objects.get(facility=self.facility, name=name)

    def density(self, pair: list[str]) -> DensityReading:
        """Return a 60 °F hydrometer reading from [reading, sample °F]."""
        sample = Typed(Decimal(pair[1]), "°F")
        return DensityReading(Decimal(pair[0]), sample=sample, instrument=self.tools["H-1"])

    def compensated(self, number: str) -> DensityReading:
        """Return a reading by a compensating refractometer."""
        return DensityReading(
            Decimal(number),
            device="refractometer",
            compensates=True,
            instrument=self.tools["R-1"],
        )

    def material(self, name: str) -> Lot:
        """Return the lot in use of a material."""
        return Lot.objects.filter(item=self.item(name)).order_by("made_at").get()


def prepare(data: dict[str, Any], start: datetime, suffix: str) -> Season:
    """Make the facility, its people, places, items, partners and instruments."""
    owner = User.objects.create_user(f"demo-owner{suffix}", password=PASSWORD)
    facility = setup.create_facility(owner=owner, fictional=True, now=start, **data["facility"])
    early = Context(facility, owner, now=start)
    people = {"owner": owner}
    for role in (Role.LEAD, Role.RECORDER, Role.INSPECTOR):
        member = setup.add_person(
            early,
            username=f"demo-{role.value}{suffix}",
            password=PASSWORD,
            role=role,
            full_name=data["people"][role.value],
        )
        people[role.value] = member.user
    for name, kind in (*data["places"], *((name, "drum") for name in data["drums"])):
        setup.add_place(early, name=name, kind=kind)
    for name, kind, unit in data["items"]:
        setup.add_item(early, name=name, kind=kind, unit=unit)
    for name, size, unit in data["products"]:
        setup.add_item(
            early, name=name, kind="packed", unit="piece", size_value=size, size_unit=unit,
            label_grade="Amber", label_version="3",
        )  # fmt: skip
    for kind in ("supplier", "customer"):
        for number, name in enumerate(data[f"{kind}s"]):
            setup.add_partner(
                early, name=name, kind=kind, phone=f"802-555-01{number:02d}",
                email=f"{kind}{number}@example.com", address=f"{number + 1} Example Street",
            )  # fmt: skip
    tools = {
        tag: setup.add_instrument(
            early, tag=tag, kind=kind, reference_celsius=celsius, compensates=compensates
        )
        for tag, kind, celsius, compensates in data["instruments"]
    }
    return Season(facility, people, start, tools=tools)

"""Load the fictional demo season by the same recording functions that people use."""

import json
from collections.abc import Callable
from datetime import datetime, timedelta
from decimal import Decimal
from pathlib import Path
from typing import Any
from zoneinfo import ZoneInfo

from django.conf import settings

from lots.models import (
    DrawRole,
    Hold,
    Lot,
    Step,
    StepKind,
)
from lots.recording import (
    boil,
    container_fill,
    decisions,
    goods_out,
    receiving,
    sap,
    syrup,
    upkeep,
)
from lots.recording._sources import FromLot, FromVessel
from lots.recording.measures import NOT_MEASURED, Typed

from .season_house import PASSWORD, Season, measure, prepare

__all__ = ["PASSWORD", "Season", "load"]


def load(now: datetime, suffix: str = "") -> Season:
    """Make the facility and replay the season so that it ends the day before ``now``.

    ``suffix`` sets a second copy's log-ins and address apart: for measurements.
    """
    path = Path(settings.BASE_DIR) / "fixtures" / "demo-season.json"
    data = json.loads(path.read_text(encoding="utf-8"))
    zone = ZoneInfo(data["facility"]["zone"])
    midnight = now.astimezone(zone).replace(hour=0, minute=0, second=0, microsecond=0)
    start = midnight - timedelta(days=data["last_day"] + 1)
    data["facility"]["slug"] += suffix
    season = prepare(data, start.astimezone(ZoneInfo("UTC")), suffix)
    for row in data["records"]:
        ACTS[row["do"]](season, row, season.at(row["day"], row["hour"]))
    return season


def _receive(season: Season, row: dict[str, Any], at: datetime) -> None:
    receiving.record_receiving(
        season.context(row), at=at, supplier=season.partner(row["supplier"]),
        item=season.item(row["item"]), amount=measure(row["amount"]),
        place=season.place(row["place"]), supplier_code=row["code"], document=row["document"],
        statement=row["statement"], decision=row.get("decision", "accept"),
        decision_reason=row.get("reason", ""),
        brix=season.density(row["brix"]) if "brix" in row else None,
    )  # fmt: skip


def _opening(season: Season, row: dict[str, Any], at: datetime) -> None:
    receiving.record_opening_stock(
        season.context(row), at=at, item=season.item("Syrup"), amount=measure(row["amount"]),
        place=season.place(row["drum"]), document=row["document"], code=row["code"],
        brix=season.density(row["brix"]),
    )  # fmt: skip


def _clean(season: Season, row: dict[str, Any], at: datetime) -> None:
    agent = season.material("Cleaner") if row.get("agent") else None
    upkeep.record_cleaning(
        season.context(row), at=at, vessel=season.place(row["vessel"]), break_kind=row["kind"],
        agent=agent, amount=Typed(Decimal("0.5"), "lb") if agent else NOT_MEASURED,
        strength=row.get("strength", ""), verified_by=row.get("verified", ""),
    )  # fmt: skip


def _collect(season: Season, row: dict[str, Any], at: datetime) -> None:
    sap.record_collection(
        season.context(row), at=at, woods=season.place(row["woods"]),
        tank=season.place(row["tank"]), item=season.item("Sap"), amount=measure(row["amount"]),
        brix=season.compensated(row["brix"]), note="Read from a paper page" if row["late"] else "",
    )  # fmt: skip


def _concentrate(season: Season, row: dict[str, Any], at: datetime) -> None:
    sap.record_concentration(
        season.context(row), at=at, ended_at=at + timedelta(hours=1.5),
        machine=season.place("RO"), into=season.place(row["into"]),
        sources=[FromVessel(season.place(name)) for name in row["sources"]],
        item=season.item("Concentrate"), amount=measure(row["amount"]),
        brix=season.compensated(row["brix"]), permeate=measure(row["permeate"]),
    )  # fmt: skip


def _boil_open(season: Season, row: dict[str, Any], at: datetime) -> None:
    fire = boil.open_boil(
        season.context(row), at=at, evaporator=season.place("Evaporator"),
        water_boiling=Typed(Decimal(row["water"]), "°F"), since_last_run="left as they were",
    )  # fmt: skip
    defoamer = FromLot(
        season.material("Defoamer"), Typed(Decimal(row["defoam"]), "lb"), DrawRole.AID
    )
    sources = [*(FromVessel(season.place(name)) for name in row["sources"]), defoamer]
    boil.feed_boil(season.context(row), boil=fire, at=at, sources=sources)


def _running(season: Season) -> Step:
    return Step.objects.get(facility=season.facility, kind=StepKind.BOIL, ended_at=None)


def _boil_off(season: Season, row: dict[str, Any], at: datetime) -> None:
    draw = boil.DrawOff(
        at, season.place("Batch tank"), measure(row["amount"]), season.density(row["brix"]),
        Typed(Decimal("218.9"), "°F"),
    )  # fmt: skip
    boil.draw_off(season.context(row), boil=_running(season), item=season.item("Syrup"), draw=draw)


def _boil_light(season: Season, row: dict[str, Any], at: datetime) -> None:
    amount = Typed(Decimal(row["amount"]), "US gal")
    light = boil.DrawOff(at, season.place("Filtered tank"), amount, season.density(row["brix"]))
    fire = _running(season)
    lot = boil.draw_off(season.context(row), boil=fire, item=season.item("Syrup"), draw=light)
    boil.put_back(
        season.context(row), boil=fire, lot=lot, at=at + timedelta(minutes=4), amount=amount
    )


def _boil_close(season: Season, row: dict[str, Any], at: datetime) -> None:
    boil.close_boil(
        season.context(row), boil=_running(season), at=at, contents=season.item("Pan contents"),
        stays=measure(row["stays"]), brix=season.compensated(row["stays_brix"]),
    )  # fmt: skip


def _filter(season: Season, row: dict[str, Any], at: datetime) -> None:
    aids = [
        FromLot(season.material("Filter aid"), Typed(Decimal(row["aid"]), "lb"), DrawRole.AID),
        FromLot(
            season.material("Filter paper"), Typed(Decimal(row["paper"]), "pieces"), DrawRole.AID
        ),
    ]
    syrup.record_mixture(
        season.context(row), kind=StepKind.FILTRATION, at=at, machine=season.place("Press"),
        sources=[FromVessel(season.place("Batch tank")), *aids],
        into=season.place("Filtered tank"), item=season.item("Syrup"),
        amount=measure(row["amount"]), brix=season.density(row["brix"]),
        detail={"clarity": row["clarity"], "filter": "press"},
    )  # fmt: skip


def _drums(season: Season, row: dict[str, Any], at: datetime) -> None:
    drums = [
        syrup.Drum(
            season.place(drum["vessel"]),
            Typed(Decimal(drum["amount"]), "US gal"),
            Typed(Decimal(drum["fill"]), "°F"),
            drum["seal"],
        )  # fmt: skip
        for drum in row["drums"]
    ]
    syrup.record_drum_fill(
        season.context(row), at=at, sources=[FromVessel(season.place("Filtered tank"))],
        drums=drums, item=season.item("Syrup"), brix=season.density(row["brix"]),
        transmittance=Typed(Decimal(row["tc"]), "%Tc"),
    )  # fmt: skip


def _blend(season: Season, row: dict[str, Any], at: datetime) -> None:
    syrup.record_mixture(
        season.context(row), kind=StepKind.BLEND, at=at, item=season.item("Syrup"),
        sources=[FromVessel(season.place(name)) for name in row["sources"]],
        into=season.place(row["into"]), brix=season.density(row["brix"]),
    )  # fmt: skip


def _reheat(season: Season, row: dict[str, Any], at: datetime) -> None:
    syrup.record_mixture(
        season.context(row), kind=StepKind.REHEAT, at=at, into=season.place("Canner"),
        sources=[FromVessel(season.place(row["drum"]))], item=season.item("Syrup"),
    )  # fmt: skip


def _bottle(season: Season, row: dict[str, Any], at: datetime) -> None:
    used = [row["container"], "Closure", "Label, amber, version 3"]
    run = container_fill.Run(
        product=season.item(row["product"]), made=row["made"], rejected=row["rejected"],
        into=season.place("Store"), brix=season.density(row["brix"]),
        fill_temperatures=[Typed(Decimal(one), "°F") for one in row["temps"]],
        transmittance=Typed(Decimal(row["tc"]), "%Tc"),
        best_before=(at + timedelta(days=730)).date(),
        packaging=[container_fill.Packaging(season.material(name)) for name in used],
    )  # fmt: skip
    step = container_fill.record_container_fill(
        season.context(row), at=at, sources=[FromVessel(season.place("Canner"))], run=run
    )
    season.tags[row["tag"]] = step.made_lots.get()


def _resolve(season: Season, row: dict[str, Any], at: datetime) -> None:
    lot, lead = season.tags[row["tag"]], season.context(row, "lead")
    for hold in Hold.objects.filter(lot=lot, ended_at=None):
        for action in hold.actions.all():
            decisions.complete_action(
                lead, action=action, cause="The canner's thermostat had been turned down.",
                correction="The jars are opened back to bulk and heated again.",
                prevention="The setting is read and noted before the first jar.",
                evaluation="Filled too cool to keep; none was sold.",
            )  # fmt: skip
    upkeep.record_rework(
        season.context(row), at=at, lot=lot, amount=NOT_MEASURED,
        into=season.place("Batch tank 2"), item=season.item("Syrup"),
    )  # fmt: skip
    for hold in Hold.objects.filter(lot=lot, ended_at=None):
        decisions.decide_hold(
            lead, hold=hold, decision="reject", reason="Reworked; not sold as filled.",
            shown=decisions.shown_hash(Lot.objects.get(pk=lot.pk)),
        )  # fmt: skip


def _sell(season: Season, row: dict[str, Any], at: datetime) -> None:
    lot = season.tags[row["tag"]]
    if not upkeep.released(Lot.objects.get(pk=lot.pk)):
        shown = decisions.shown_hash(Lot.objects.get(pk=lot.pk))
        decisions.release_lot(
            season.context(row, "lead"), lot=lot, shown=shown,
            reason="A second reading by the lead agrees with the first.",
        )  # fmt: skip
    customer = season.partner(row["customer"]) if row["customer"] else None
    season.sales[row["tag"]] = goods_out.record_sale(
        season.context(row), at=at, customer=customer, document=row["document"],
        sold=[FromLot(lot, Typed(Decimal(row["amount"]), "pieces"))],
    )  # fmt: skip


def _return(season: Season, row: dict[str, Any], at: datetime) -> None:
    goods_out.record_customer_return(
        season.context(row), at=at, sale=season.sales[row["tag"]], lot=season.tags[row["tag"]],
        amount=Typed(Decimal(row["amount"]), "pieces"), into=season.place("Store"),
        reason=row["reason"],
    )  # fmt: skip


def _void(season: Season, row: dict[str, Any], at: datetime) -> None:
    sold = [FromLot(season.tags[row["tag"]], Typed(Decimal(row["amount"]), "pieces"))]
    wrong = goods_out.record_sale(season.context(row), at=at, sold=sold)
    decisions.void_step(
        season.context(row, "lead"), step=wrong, reason="Entered as a counter sale; it was not."
    )
    goods_out.record_sale(
        season.context(row), at=at, sold=sold, customer=season.partner(row["customer"])
    )


def _supplier_return(season: Season, row: dict[str, Any], at: datetime) -> None:
    lot = Lot.objects.get(facility=season.facility, supplier_code=row["code"])
    receiving.record_supplier_return(
        season.context(row), at=at, lot=lot, amount=NOT_MEASURED, reason="Rejected on receipt"
    )


def _release_opening(season: Season, row: dict[str, Any], at: datetime) -> None:
    lot = Lot.objects.get(facility=season.facility, code=row["code"])
    decisions.release_lot(
        season.context(row, "lead"), lot=lot, shown=decisions.shown_hash(lot),
        reason="Tasted and read against the cellar card.",
    )  # fmt: skip


def _remove(season: Season, row: dict[str, Any], at: datetime) -> None:
    goods_out.record_removal(
        season.context(row), at=at, lot=season.tags[row["tag"]], reason=row["reason"],
        amount=Typed(Decimal(row["amount"]), "pieces"),
    )  # fmt: skip


ACTS: dict[str, Callable[[Season, dict[str, Any], datetime], None]] = {
    "blend": _blend,
    "boil-close": _boil_close,
    "boil-light": _boil_light,
    "boil-off": _boil_off,
    "boil-open": _boil_open,
    "bottle": _bottle,
    "clean": _clean,
    "collect": _collect,
    "drums": _drums,
    "filter": _filter,
    "opening": _opening,
    "receive": _receive,
    "reheat": _reheat,
    "release-opening": _release_opening,
    "remove": _remove,
    "resolve-hold": _resolve,
    "return": _return,
    "ro": _concentrate,
    "sell": _sell,
    "supplier-return": _supplier_return,
    "void-and-again": _void,
}

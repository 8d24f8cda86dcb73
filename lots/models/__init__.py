"""Tables and constraints; import from this package, never from its modules."""

from .check import Check, CorrectiveAction, Hold, UnpostedEntry
from .facility import Chain, Counter, Facility, Membership, User
from .item import LIQUIDS, MATERIALS, Item, ItemKind, PrintedCode, Unit
from .journal import AccessLog, ClientEntry, JournalEntry
from .lot import Adjustment, Draw, DrawRole, GoodsKind, Lot, LotState, Stock, VesselTake
from .place import VESSELS, Instrument, Partner, PartnerKind, Place, PlaceKind
from .step import MAKERS, Amendment, Reading, ReadingKind, Step, StepEvent, StepKind

__all__ = [
    "LIQUIDS",
    "MAKERS",
    "MATERIALS",
    "VESSELS",
    "AccessLog",
    "Adjustment",
    "Amendment",
    "Chain",
    "Check",
    "ClientEntry",
    "CorrectiveAction",
    "Counter",
    "Draw",
    "DrawRole",
    "Facility",
    "GoodsKind",
    "Hold",
    "Instrument",
    "Item",
    "ItemKind",
    "JournalEntry",
    "Lot",
    "LotState",
    "Membership",
    "Partner",
    "PartnerKind",
    "Place",
    "PlaceKind",
    "PrintedCode",
    "Reading",
    "ReadingKind",
    "Step",
    "StepEvent",
    "StepKind",
    "Stock",
    "Unit",
    "UnpostedEntry",
    "User",
    "VesselTake",
]

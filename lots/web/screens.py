"""Which form records which kind of step: plain tables, so that grep finds every screen."""

from lots.models import StepKind

from .forms import boil, container_fill, goods_out, receiving, sap, syrup, upkeep, whole_boil
from .forms.base import RecordForm

SCREENS: dict[str, type[RecordForm]] = {
    StepKind.COLLECTION.value: sap.CollectionForm,
    StepKind.CONCENTRATION.value: sap.ConcentrationForm,
    StepKind.BOIL.value: boil.BoilForm,
    StepKind.FILTRATION.value: syrup.FiltrationForm,
    StepKind.DRUM_FILL.value: syrup.DrumFillForm,
    StepKind.CONTAINER_FILL.value: container_fill.ContainerFillForm,
    StepKind.SALE.value: goods_out.SaleForm,
    StepKind.RECEIVING.value: receiving.ReceivingForm,
    StepKind.CLEANING.value: upkeep.CleaningForm,
    StepKind.GRADE_READING.value: syrup.GradeForm,
    StepKind.BLEND.value: syrup.BlendForm,
    StepKind.TRANSFER.value: syrup.TransferForm,
    StepKind.REHEAT.value: syrup.ReheatForm,
    StepKind.MOVE.value: upkeep.MoveForm,
    StepKind.SPLIT.value: upkeep.SplitForm,
    StepKind.REMOVAL.value: goods_out.RemovalForm,
    StepKind.REWORK.value: upkeep.ReworkForm,
    StepKind.ADJUSTMENT.value: upkeep.CountForm,
    StepKind.CUSTOMER_RETURN.value: goods_out.CustomerReturnForm,
    StepKind.SUPPLIER_RETURN.value: receiving.SupplierReturnForm,
    StepKind.OPENING_STOCK.value: receiving.OpeningStockForm,
}
# A second screen of a kind: a step that runs, opened or recorded whole; what is done inside a
# running one is below.
OTHERS: dict[str, type[RecordForm]] = {
    "whole-boil": whole_boil.WholeBoilForm,
    "open-fill": container_fill.OpenFillForm,
}
FORMS = {**SCREENS, **OTHERS}
# What usually follows a kind of step; another of the same kind is always offered after these.
NEXT: dict[str, tuple[str, ...]] = {
    StepKind.COLLECTION.value: ("collection", "concentration", "boil"),
    StepKind.CONCENTRATION.value: ("boil",),
    StepKind.BOIL.value: ("filtration",),
    StepKind.FILTRATION.value: ("container-fill", "drum-fill"),
    StepKind.BLEND.value: ("reheat", "container-fill"),
    StepKind.TRANSFER.value: ("container-fill",),
    StepKind.REHEAT.value: ("grade-reading", "container-fill"),
    StepKind.DRUM_FILL.value: ("grade-reading",),
    StepKind.CONTAINER_FILL.value: ("grade-reading", "sale"),
    StepKind.REWORK.value: ("reheat",),
}
RUNNING: dict[str, dict[str, type[RecordForm]]] = {
    StepKind.BOIL.value: {
        "feed": boil.FeedForm,
        "draw-off": boil.DrawOffForm,
        "put-back": boil.PutBackForm,
        "close": boil.CloseBoilForm,
    },
    StepKind.CONTAINER_FILL.value: {"finish": container_fill.FinishFillForm},
}

"""Which form records which kind of step: plain tables, so that grep finds every screen."""

from lots.models import StepKind

from .forms import boil, container_fill, handling, sap, syrup, whole_boil
from .forms.base import RecordForm

SCREENS: dict[str, type[RecordForm]] = {
    StepKind.COLLECTION.value: sap.CollectionForm,
    StepKind.CONCENTRATION.value: sap.ConcentrationForm,
    StepKind.BOIL.value: boil.BoilForm,
    StepKind.FILTRATION.value: syrup.FiltrationForm,
    StepKind.DRUM_FILL.value: syrup.DrumFillForm,
    StepKind.CONTAINER_FILL.value: container_fill.ContainerFillForm,
    StepKind.SALE.value: syrup.SaleForm,
    StepKind.RECEIVING.value: syrup.ReceivingForm,
    StepKind.CLEANING.value: syrup.CleaningForm,
    StepKind.GRADE_READING.value: handling.GradeForm,
    StepKind.BLEND.value: handling.BlendForm,
    StepKind.TRANSFER.value: handling.TransferForm,
    StepKind.REHEAT.value: handling.ReheatForm,
    StepKind.MOVE.value: handling.MoveForm,
    StepKind.SPLIT.value: handling.SplitForm,
    StepKind.REMOVAL.value: handling.RemovalForm,
    StepKind.REWORK.value: handling.ReworkForm,
    StepKind.ADJUSTMENT.value: handling.CountForm,
    StepKind.CUSTOMER_RETURN.value: handling.CustomerReturnForm,
    StepKind.SUPPLIER_RETURN.value: handling.SupplierReturnForm,
    StepKind.OPENING_STOCK.value: handling.OpeningStockForm,
}
# A second screen of a kind: a step that runs, opened or recorded whole; what is done inside a
# running one is below.
OTHERS: dict[str, type[RecordForm]] = {
    "whole-boil": whole_boil.WholeBoilForm,
    "open-fill": container_fill.OpenFillForm,
}
FORMS = {**SCREENS, **OTHERS}
RUNNING: dict[str, dict[str, type[RecordForm]]] = {
    StepKind.BOIL.value: {
        "feed": boil.FeedForm,
        "draw-off": boil.DrawOffForm,
        "put-back": boil.PutBackForm,
        "close": boil.CloseBoilForm,
    },
    StepKind.CONTAINER_FILL.value: {"finish": container_fill.FinishFillForm},
}

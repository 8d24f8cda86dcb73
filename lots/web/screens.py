"""Which form records which kind of step: plain tables, so that grep finds every screen."""

from lots.models import StepKind

from .forms import container_fill, handling, sap, syrup
from .forms.base import RecordForm

SCREENS: dict[str, type[RecordForm]] = {
    StepKind.COLLECTION.value: sap.CollectionForm,
    StepKind.CONCENTRATION.value: sap.ConcentrationForm,
    StepKind.BOIL.value: sap.BoilForm,
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
# Screens that open a step and leave it running; what is done inside it is below.
OPENERS: dict[str, type[RecordForm]] = {"open-fill": container_fill.OpenFillForm}
RUNNING: dict[str, dict[str, type[RecordForm]]] = {
    StepKind.BOIL.value: {
        "feed": sap.FeedForm,
        "draw-off": sap.DrawOffForm,
        "close": sap.CloseBoilForm,
    },
    StepKind.CONTAINER_FILL.value: {"finish": container_fill.FinishFillForm},
}

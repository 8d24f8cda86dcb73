"""Why a record was refused, in sentences that say what to do."""


class RecordingError(Exception):
    """A refusal: ``field`` names the input it stands beside, or is empty for the whole form."""

    def __init__(self, message: str, *, field: str = "") -> None:
        super().__init__(message)
        self.message = message
        self.field = field


class NotAllowed(RecordingError):
    """The person's role at this facility does not cover the act."""


class NotEnough(RecordingError):
    """More was drawn than the book holds."""


class GaugeDifference(NotEnough):
    """More than the book holds, but within the gauge tolerance: taken when it is confirmed."""


class OnHold(RecordingError):
    """The lot is set apart and may not go where the record would take it."""


class NotReleased(RecordingError):
    """A sale of goods that are not released."""


class WrongTime(RecordingError):
    """The stated time cannot stand: in the future, or an end before its start."""


class WouldRedivide(RecordingError):
    """A late act on a vessel that later records drew from: to be confirmed."""


class OtherFacility(RecordingError):
    """A row that belongs to another facility."""


class CodeTaken(RecordingError):
    """A code that is already on other goods."""


class SentBefore(RecordingError):
    """The same form id came again with other content."""


class WouldLoop(RecordingError):
    """The draw would make a lot its own ancestor."""


class StillNeeded(RecordingError):
    """A void that would leave later records without their source."""

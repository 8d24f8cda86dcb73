"""Who records, where, and when: the arguments every recorder shares."""

from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from datetime import datetime
from functools import partial
from typing import Any
from uuid import UUID

from lots.models import Facility, User
from lots.rules.roles import Action

from . import _redivide
from ._door import Writer, door


@dataclass(frozen=True)
class Context:
    """The facility and the person; ``now`` is set by the demo loader alone.

    ``client`` is the form's own id and its content: the same form sent twice is recorded once.
    """

    facility: Facility
    by: User
    now: datetime | None = None
    client: tuple[UUID, Any] | None = None
    reason: str = ""
    # Confirmed: a late act may divide later draws anew, in its own transaction.
    redivide: bool = False
    # Confirmed: what a gauge shows above the book, within its tolerance, is booked.
    accept_differences: bool = False

    @contextmanager
    def open(self, name: str, action: Action = Action.RECORD) -> Iterator[Writer]:
        """Open the door for one record."""
        with door(
            facility=self.facility,
            by=self.by,
            action=action,
            name=name,
            reason=self.reason,
            now=self.now,
            client=self.client,
        ) as writer:
            writer.accepts_differences = self.accept_differences
            if self.redivide:
                writer.redividing = True
                writer.before_arrival = partial(_redivide.rewind, writer)
            yield writer
            if writer.rewound:
                _redivide.forward(writer)

"""The one door: every write goes through a ``Writer`` opened here, in one transaction.

Order inside: authorise, lock the chain's head row, read and check under the lock, write, journal.
On SQLite the IMMEDIATE transaction is the lock; on PostgreSQL the head row is.
"""

import hashlib
import json
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from datetime import datetime, timedelta
from typing import Any, TypeVar
from uuid import UUID

from django.db import models, transaction
from django.utils import timezone

from lots.models import (
    Chain,
    ClientEntry,
    Counter,
    Facility,
    Membership,
    Place,
    Step,
    StepKind,
    User,
    VesselTake,
)
from lots.rules.roles import Action, Role, may

from . import journal
from .errors import NotAllowed, OtherFacility, SentBefore, WrongTime

Row = TypeVar("Row", bound=models.Model)

LIVE_WINDOW = timedelta(minutes=15)
FUTURE_WINDOW = timedelta(minutes=10)


class AlreadyRecorded(Exception):
    """The same form came again: carries the first answer."""

    def __init__(self, step: Step | None) -> None:
        super().__init__("recorded before")
        self.step = step


class Writer:
    """An open transaction on one facility's ledger."""

    def __init__(
        self, facility: Facility, chain: Chain, by: User, now: datetime, action: str, reason: str
    ) -> None:
        self.facility = facility
        self.chain = chain
        self.by = by
        self.now = now
        self.action = action
        self.reason = reason
        self.label = action
        self.touched: list[models.Model] = []
        self.client: tuple[UUID, str] | None = None
        self.answer: Step | None = None
        # A confirmed re-division: what was taken back, asked again when the record is written.
        self.redividing = False
        self.accepts_differences = False
        self.rewound: dict[int, VesselTake] = {}
        self.before_arrival: Callable[[Place, datetime], None] = lambda place, at: None

    def touch(self, row: Row) -> Row:
        """Remember a written row for the journal."""
        self.touched.append(row)
        return row

    def own(self, *rows: Any) -> None:
        """Refuse a row of another facility: its goods are received first."""
        for row in rows:
            if row is not None and row.facility_id != self.facility.pk:
                raise OtherFacility(f"{row} is another facility's; receive it first.")

    def require(self, action: Action) -> None:
        """Refuse an act that only the record's own numbers showed to need a higher role."""
        role = role_of(self.by, self.facility)
        if role is None or not may(role, action):
            raise NotAllowed("Your role at this facility does not cover this; ask a lead.")

    def is_live(self, at: datetime) -> bool:
        """Whether an act at that time is recorded as it happens."""
        return abs(self.now - at) <= LIVE_WINDOW

    def check_time(self, at: datetime, ended_at: datetime | None = None) -> None:
        """Refuse the future and an end before its start."""
        if max(at, ended_at or at) > self.now + FUTURE_WINDOW:
            raise WrongTime("That time is in the future; check the date and the hour.", field="at")
        if ended_at is not None and ended_at < at:
            raise WrongTime("The end is before the start.", field="ended_at")

    def step(self, kind: StepKind, at: datetime, **fields: Any) -> Step:
        """Write the header of one recorded act."""
        self.check_time(at, fields.get("ended_at"))
        step = Step.objects.create(
            facility=self.facility,
            kind=kind,
            started_at=at,
            late=not self.is_live(fields.get("ended_at") or at),
            recorded_at=self.now,
            recorded_by=self.by,
            **fields,
        )
        self.label = step.in_words(self.facility.zone)
        if self.answer is None:
            self.answer = step
        return self.touch(step)

    def next_number(self, key: str) -> int:
        """Return the next number of a series; gaps are fine, repeats are not."""
        counter, _ = Counter.objects.get_or_create(facility=self.facility, key=key)
        number = counter.next
        counter.next = number + 1
        counter.save(update_fields=["next"])
        return number


def role_of(user: User, facility: Facility) -> Role | None:
    """Return the person's role at the facility, or ``None``."""
    found = Membership.objects.filter(facility=facility, user=user, active=True).first()
    return Role(found.role) if found and user.is_active else None


def content_hash(content: Any) -> str:
    """Return the hash by which a repeated form is told from a changed one."""
    text = json.dumps(content, sort_keys=True, default=str, ensure_ascii=False)
    return hashlib.sha256(text.encode()).hexdigest()


@contextmanager
def door(
    *,
    facility: Facility,
    by: User,
    action: Action = Action.RECORD,
    name: str,
    reason: str = "",
    now: datetime | None = None,
    client: tuple[UUID, Any] | None = None,
) -> Iterator[Writer]:
    """Open the ledger for one record.

    ``now`` is the record's time: only the demo loader supplies it. Raises NotAllowed, SentBefore
    and whatever the record itself refuses; then nothing is written.
    """
    role = role_of(by, facility)
    if role is None or not may(role, action):
        raise NotAllowed("Your role at this facility does not cover this; ask a lead.")
    with transaction.atomic():
        chain = Chain.objects.select_for_update(no_key=True).get(pk=facility.chain_id)
        moment = now or timezone.now()
        if chain.last_at:
            moment = max(moment, chain.last_at)
        writer = Writer(facility, chain, by, moment, name, reason)
        if client is not None:
            _refuse_repeat(writer, client)
        yield writer
        if writer.client is not None:
            ClientEntry.objects.create(
                facility=facility,
                client_id=writer.client[0],
                content_hash=writer.client[1],
                step=writer.answer,
            )
        journal.append(
            chain=chain,
            action=name,
            label=writer.label,
            rows=writer.touched,
            actor=by.username,
            reason=writer.reason,
            at=moment,
        )


def _refuse_repeat(writer: Writer, client: tuple[UUID, Any]) -> None:
    client_id, content = client
    digest = content_hash(content)
    found = ClientEntry.objects.filter(facility=writer.facility, client_id=client_id).first()
    if found is None:
        writer.client = (client_id, digest)
        return
    if found.content_hash == digest:
        raise AlreadyRecorded(found.step)
    raise SentBefore("This form was recorded before with other content; open the recorded one.")

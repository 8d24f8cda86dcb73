"""The journal's bytes: made from rows re-read after writing, hashed and chained as text.

Keys stand in fixed order, values are integers and strings only, times are UTC with microseconds,
rows are named by UUID. A later reader re-hashes exactly the stored text.
"""

import hashlib
import json
import secrets
from collections.abc import Iterable
from datetime import datetime

from django.db import models

from lots.models import Chain, JournalEntry
from lots.tracing.images import after_images, plain

SCHEMA = 1


def append(
    *,
    chain: Chain,
    action: str,
    label: str,
    rows: Iterable[models.Model],
    actor: str,
    reason: str,
    at: datetime,
    device: str = "",
) -> JournalEntry:
    """Add one entry to a chain whose head row the caller has locked.

    ``at`` is the record's time; it never runs backwards along a chain.
    """
    recorded_at = max(at, chain.last_at) if chain.last_at else at
    body = json.dumps(
        {
            "action": action,
            "actor": actor,
            "at": plain(recorded_at),
            "chain": chain.name,
            "device": device,
            "label": label,
            "previous": chain.head,
            "reason": reason,
            "rows": after_images(rows),
            "schema": SCHEMA,
            "seq": chain.seq + 1,
        },
        ensure_ascii=False,
        sort_keys=True,
        separators=(",", ":"),
    )
    entry = JournalEntry.objects.create(
        chain=chain,
        seq=chain.seq + 1,
        previous=chain.head,
        digest=digest_of(chain.head, body),
        body=body,
        action=action,
        label=label[:200],
        recorded_at=recorded_at,
    )
    chain.seq, chain.head, chain.last_at = entry.seq, entry.digest, recorded_at
    chain.save(update_fields=["seq", "head", "last_at"])
    return entry


def digest_of(previous: str, body: str) -> str:
    """Return the SHA-256 that chains an entry: over the previous digest and the exact text."""
    return hashlib.sha256(f"{previous}\n{body}".encode()).hexdigest()


def new_salt() -> str:
    """Return a random salt for hashing a person's contact data."""
    return secrets.token_hex(16)

"""After-images: what the database holds of a row, in a fixed form that can be hashed.

Keys stand in fixed order, values are integers and strings only, times are UTC with microseconds,
rows are named by UUID. Contact data of persons stands as a hash with a salt kept beside it.
"""

import hashlib
from collections.abc import Iterable
from datetime import UTC, date, datetime
from typing import Any
from uuid import UUID

from django.db import models

from lots.models import Partner

CONTACT_FIELDS = frozenset({"address", "phone", "email"})
HIDDEN_FIELDS = frozenset({"password", "last_login", "contact_salt"})


def plain(value: Any) -> Any:
    """Return a value as text, whole number or plain container."""
    if isinstance(value, datetime):
        return value.astimezone(UTC).strftime("%Y-%m-%dT%H:%M:%S.%fZ")
    if isinstance(value, date):
        return value.isoformat()
    if isinstance(value, UUID):
        return str(value)
    if isinstance(value, float):
        return f"{value:.6f}"
    if isinstance(value, dict):
        return {key: plain(item) for key, item in sorted(value.items())}
    if isinstance(value, list | tuple):
        return [plain(item) for item in value]
    return value


def _target_names(rows: list[models.Model]) -> dict[tuple[type, Any], str]:
    """Return the UUID of each row that a foreign key points to, one query a model."""
    wanted: dict[type[models.Model], set[Any]] = {}
    for row in rows:
        for field in row._meta.concrete_fields:
            key = getattr(row, field.attname)
            if field.is_relation and key is not None:
                wanted.setdefault(field.related_model, set()).add(key)
    named: dict[tuple[type, Any], str] = {}
    for model, keys in wanted.items():
        column = "uuid" if any(f.name == "uuid" for f in model._meta.fields) else "pk"
        for key, name in model._base_manager.filter(pk__in=keys).values_list("pk", column):
            named[model, key] = str(name)
    return named


def _contact_hash(partner: Partner, name: str) -> str:
    text = f"{partner.contact_salt}:{name}:{getattr(partner, name)}"
    return "sha256:" + hashlib.sha256(text.encode()).hexdigest()


def after_images(rows: Iterable[models.Model]) -> list[dict[str, Any]]:
    """Return what the database now holds of each row, in a fixed order of tables and ids."""
    fresh: list[models.Model] = []
    by_model: dict[type[models.Model], set[Any]] = {}
    for row in rows:
        by_model.setdefault(type(row), set()).add(row.pk)
    for model in sorted(by_model, key=lambda model: model._meta.db_table):
        fresh += model._base_manager.filter(pk__in=by_model[model]).order_by("pk")
    names = _target_names(fresh)
    images = []
    for row in fresh:
        image: dict[str, Any] = {"table": row._meta.db_table}
        for field in row._meta.concrete_fields:
            if field.primary_key or field.name in HIDDEN_FIELDS:
                continue
            value = getattr(row, field.attname)
            if isinstance(row, Partner) and field.name in CONTACT_FIELDS:
                image[field.name] = _contact_hash(row, field.name)
            elif field.is_relation and value is not None:
                image[field.name] = names.get((field.related_model, value), str(value))
            else:
                image[field.name] = plain(value)
        images.append(image)
    return images

"""Facilities, people and registers: who works here, what is kept, and where."""

from datetime import datetime
from typing import Any

from django.db import transaction
from django.utils import timezone

from lots.models import Chain, Facility, Instrument, Item, Membership, Partner, Place, User
from lots.rules.roles import Action, Role

from . import journal
from .context import Context
from .errors import RecordingError


def create_facility(
    *,
    slug: str,
    name: str,
    owner: User,
    now: datetime | None = None,
    **fields: Any,
) -> Facility:
    """Create a facility with its chain and owner; both stand in the installation's chain."""
    with transaction.atomic():
        head, _ = Chain.objects.get_or_create(name="installation")
        head = Chain.objects.select_for_update(no_key=True).get(pk=head.pk)
        if Facility.objects.filter(slug=slug).exists():
            raise RecordingError(f"There is already a facility at {slug}.", field="slug")
        chain = Chain.objects.create(name=f"facility {slug}")
        facility = Facility.objects.create(slug=slug, name=name, chain=chain, **fields)
        member = Membership.objects.create(facility=facility, user=owner, role=Role.OWNER.value)
        journal.append(
            chain=head,
            action="facility created",
            label=name,
            rows=[facility, owner, member],
            actor=owner.username,
            reason="",
            at=now or timezone.now(),
        )
        first = "DEMO: fictional data" if facility.fictional else name
        journal.append(
            chain=chain,
            action="book opened",
            label=first,
            rows=[facility],
            actor=owner.username,
            reason="",
            at=now or timezone.now(),
        )
        return facility


def add_person(
    context: Context, *, username: str, password: str, role: Role, full_name: str = ""
) -> Membership:
    """Give a person a log-in and a role here."""
    with context.open("person added", Action.MANAGE_PEOPLE) as writer:
        if User.objects.filter(username=username).exists():
            raise RecordingError(f"{username} is taken; choose another name.", field="username")
        first, _, last = full_name.partition(" ")
        user = User.objects.create_user(
            username, password=password, first_name=first, last_name=last
        )
        member = Membership.objects.create(facility=writer.facility, user=user, role=role.value)
        writer.label = f"{username} as {role.value}"
        writer.touch(user)
        return writer.touch(member)


def change_person(
    context: Context,
    *,
    member: Membership,
    role: Role | None = None,
    active: bool | None = None,
    password: str = "",
) -> Membership:
    """Change a role, disable or enable a log-in, or reset a password."""
    with context.open("person changed", Action.MANAGE_PEOPLE) as writer:
        if member.user_id == writer.by.pk and active is False:
            raise RecordingError("You cannot disable yourself; another owner can.")
        if role is not None:
            member.role = role.value
        if active is not None:
            member.active = active
        member.save(update_fields=["role", "active"])
        if password:
            member.user.set_password(password)
            member.user.save(update_fields=["password"])
        writer.label = f"{member.user.username}: {member.role}"
        return writer.touch(member)


def change_facility(context: Context, **fields: Any) -> Facility:
    """Change the facility's settings: rule set, units, season start, code pattern and so on."""
    with context.open("settings", Action.MANAGE_SETTINGS) as writer:
        Facility.objects.filter(pk=writer.facility.pk).update(**fields)
        writer.label = "Settings: " + ", ".join(sorted(fields))
        return writer.touch(Facility.objects.get(pk=writer.facility.pk))


def _register(context: Context, model: type, name: str, fields: dict[str, Any]) -> Any:
    with context.open(name) as writer:
        row = model.objects.create(facility=writer.facility, **fields)
        writer.label = f"{name}: {row}"
        return writer.touch(row)


def add_place(context: Context, **fields: Any) -> Place:
    """Register a woods section, room or vessel."""
    _refuse_twin(Place, context, fields["name"])
    return _register(context, Place, "place added", fields)


def add_item(context: Context, **fields: Any) -> Item:
    """Register an item or a packed product."""
    _refuse_twin(Item, context, fields["name"])
    return _register(context, Item, "item added", fields)


def add_partner(context: Context, **fields: Any) -> Partner:
    """Register a supplier, customer or carrier; contact data enters the journal hashed."""
    twins = Partner.objects.filter(
        facility=context.facility, name=fields["name"], kind=fields["kind"]
    )
    if twins.exists():
        raise RecordingError(f"{fields['name']} is registered already.", field="name")
    return _register(
        context, Partner, "partner added", {"contact_salt": journal.new_salt(), **fields}
    )


def add_instrument(context: Context, **fields: Any) -> Instrument:
    """Register a hydrometer, refractometer, thermometer, scale or colour meter."""
    if Instrument.objects.filter(facility=context.facility, tag=fields["tag"]).exists():
        raise RecordingError(f"{fields['tag']} is registered already.", field="tag")
    return _register(context, Instrument, "instrument added", fields)


def _refuse_twin(model: type, context: Context, name: str) -> None:
    if model.objects.filter(facility=context.facility, name=name).exists():
        raise RecordingError(f"{name} is registered already.", field="name")


FIXED = {Item: frozenset({"kind", "unit"}), Place: frozenset({"kind"}), Partner: frozenset()}


def change_row(context: Context, row: Place | Item | Partner, **fields: Any) -> Any:
    """Change a registered place, item or partner; what its lots stand on stays as it is."""
    model = type(row)
    used = FIXED[model] & {name for name, value in fields.items() if getattr(row, name) != value}
    with context.open(f"{model._meta.verbose_name} changed") as writer:
        writer.own(row)
        if used and model is Item and row.lots.exists():
            raise RecordingError(f"{row} has lots already; its kind stays.", field="kind")
        if used and model is Place and row.stock.exists():
            raise RecordingError(f"{row} holds something; its kind stays.", field="kind")
        name = fields.get("name", row.name)
        twins = model.objects.filter(facility=writer.facility, name=name).exclude(pk=row.pk)
        if model is Partner:
            twins = twins.filter(kind=fields.get("kind", row.kind))
        if twins.exists():
            raise RecordingError(f"{name} is registered already.", field="name")
        model.objects.filter(pk=row.pk).update(**fields)
        writer.label = f"{name} changed"
        return writer.touch(model.objects.get(pk=row.pk))

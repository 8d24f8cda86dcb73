"""Who may do what: one table."""

from enum import StrEnum


class Role(StrEnum):
    """A person's part at one facility."""

    INSPECTOR = "inspector"
    LEAD = "lead"
    OWNER = "owner"
    RECORDER = "recorder"


class Action(StrEnum):
    """What a person may be allowed to do, A–Z."""

    ADJUST_BEYOND_TOLERANCE = "adjust beyond tolerance"
    AMEND = "amend"
    HOLD = "hold"
    ISSUE_PACKET = "issue packet"
    MANAGE_PEOPLE = "manage people"
    MANAGE_SETTINGS = "manage settings"
    PRINT_LABEL = "print label"
    RECORD = "record"
    RELEASE = "release"
    TRACE = "trace"
    VIEW = "view"
    VOID = "void"


_INSPECTOR = frozenset({Action.VIEW, Action.TRACE, Action.ISSUE_PACKET})
_RECORDER = frozenset({Action.VIEW, Action.TRACE, Action.RECORD, Action.PRINT_LABEL})
_LEAD = _RECORDER | {
    Action.ADJUST_BEYOND_TOLERANCE,
    Action.AMEND,
    Action.HOLD,
    Action.ISSUE_PACKET,
    Action.RELEASE,
    Action.VOID,
}
_OWNER = _LEAD | {Action.MANAGE_PEOPLE, Action.MANAGE_SETTINGS}
ALLOWED = {
    Role.INSPECTOR: _INSPECTOR,
    Role.LEAD: _LEAD,
    Role.OWNER: _OWNER,
    Role.RECORDER: _RECORDER,
}


def may(role: Role, action: Action) -> bool:
    """Whether a role covers an action."""
    return action in ALLOWED[role]

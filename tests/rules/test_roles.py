"""Who may do what, from one table."""

import pytest

from lots.rules.roles import ALLOWED, Action, Role, may


@pytest.mark.parametrize(
    ("role", "action", "allowed"),
    [
        (Role.RECORDER, Action.RECORD, True),
        (Role.RECORDER, Action.PRINT_LABEL, True),
        (Role.RECORDER, Action.TRACE, True),
        (Role.RECORDER, Action.RELEASE, False),
        (Role.RECORDER, Action.ADJUST_BEYOND_TOLERANCE, False),
        (Role.LEAD, Action.RELEASE, True),
        (Role.LEAD, Action.ISSUE_PACKET, True),
        (Role.LEAD, Action.MANAGE_PEOPLE, False),
        (Role.INSPECTOR, Action.TRACE, True),
        (Role.INSPECTOR, Action.RECORD, False),
        (Role.INSPECTOR, Action.HOLD, False),
        (Role.OWNER, Action.MANAGE_SETTINGS, True),
    ],
)
def test_may(role, action, allowed):
    assert may(role, action) is allowed


def test_each_role_is_in_the_table_and_includes_the_one_below():
    assert set(ALLOWED) == set(Role)
    assert ALLOWED[Role.RECORDER] < ALLOWED[Role.LEAD] < ALLOWED[Role.OWNER] == frozenset(Action)
    assert all(Action.VIEW in actions for actions in ALLOWED.values())


def test_an_inspector_changes_nothing():
    looking = {Action.ISSUE_PACKET, Action.TRACE, Action.VIEW}
    assert ALLOWED[Role.INSPECTOR] <= looking


def test_actions_stand_in_order():
    names = [action.name for action in Action]
    assert names == sorted(names)

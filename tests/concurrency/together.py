"""Several acts begun at the same moment, each in a thread with its own connection."""

from collections.abc import Callable
from threading import Barrier, Thread
from typing import Any

from django.db import connection


def together(*acts: Callable[[], Any]) -> list[Any]:
    """Return what each act returned or raised, in the order given."""
    start = Barrier(len(acts), timeout=30)
    answers: list[Any] = [None] * len(acts)

    def run(place: int, act: Callable[[], Any]) -> None:
        try:
            start.wait()
            answers[place] = act()
        except Exception as error:  # noqa: BLE001 - the test judges what was raised
            answers[place] = error
        finally:
            connection.close()

    threads = [Thread(target=run, args=pair) for pair in enumerate(acts)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join(60)
    assert not any(thread.is_alive() for thread in threads), "a thread never came back"
    return answers


def raised(answers: list[Any], kind: type[Exception]) -> list[Exception]:
    """Return the answers that are refusals of one kind."""
    return [answer for answer in answers if isinstance(answer, kind)]

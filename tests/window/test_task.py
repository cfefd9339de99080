"""A task runs beside the main thread and tells how it ended."""

import threading

import pytest
from pytestqt.qtbot import QtBot

from tuner.errors import DeliveryError
from tuner.window.task import Task


def test_a_result_arrives(qtbot: QtBot) -> None:
    """What the function returns comes back, from another thread."""
    task = Task(threading.get_ident)
    with qtbot.waitSignal(task.done) as done:
        task.start()
    task.wait()
    assert done.args != [threading.get_ident()]


@pytest.mark.parametrize("kind", [DeliveryError, ZeroDivisionError])
def test_a_refusal_arrives(qtbot: QtBot, kind: type[Exception]) -> None:
    """Whatever the function raises comes back, foreseen or not."""

    def work() -> object:
        raise kind("no")

    task = Task(work)
    with qtbot.waitSignal(task.refused) as refused:
        task.start()
    task.wait()
    assert refused.args is not None
    assert isinstance(refused.args[0], kind)

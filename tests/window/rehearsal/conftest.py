"""A document, the page of its rehearsal, and a clock that goes as told."""

from collections.abc import Iterator

import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tuner.session.document import Document
from tuner.window.rehearsal import build_rehearsal
from tuner.window.rehearsal.page import RehearsalPage
from tuner.window.rehearsal.runner import Runner
from tuner.window.theme import Theme


class Clock:
    """Seconds that go by when told."""

    def __init__(self) -> None:
        self.now = 100.0

    def __call__(self) -> float:
        """Return the time."""
        return self.now


class Hours:
    """Lets a runner run by a clock of its own, slice by slice."""

    def __init__(self, runner: Runner, clock: Clock) -> None:
        self._runner, self._clock = runner, clock

    def pass_by(self, seconds: float, slice_seconds: float = 0.5) -> None:
        """Let so many seconds go by on the wall."""
        for _ in range(round(seconds / slice_seconds)):
            self._clock.now += slice_seconds
            self._runner.tick()


@pytest.fixture
def document() -> Document:
    """Return the made-up loop, opened."""
    return Document(made_up.sheet())


@pytest.fixture
def clock() -> Clock:
    """Return a clock that stands still."""
    return Clock()


@pytest.fixture
def runner(clock: Clock, qapp: QApplication) -> Iterator[Runner]:
    """Return what runs a loop by the clock."""
    del qapp
    made = Runner(clock)
    yield made
    made.close()


@pytest.fixture
def hours(runner: Runner, clock: Clock) -> Hours:
    """Return what lets time go by."""
    return Hours(runner, clock)


@pytest.fixture
def page(qtbot: QtBot, document: Document, theme: Theme, runner: Runner) -> Iterator[RehearsalPage]:
    """Return the page in sight, its loop ready and at rest."""
    page = build_rehearsal(document, theme, synchronous=True, runner=runner)
    qtbot.addWidget(page.widget)
    page.widget.resize(900, 700)
    page.widget.show()
    QApplication.processEvents()
    page.show_stale()
    yield page
    page.close()
    page.widget.hide()

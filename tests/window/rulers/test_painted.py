"""The rulers stay painted: newest sheet first, never an older one, paler when late, grey when there is nothing."""

from collections.abc import Callable, Iterator
from dataclasses import replace

import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window import made_up, made_up_footing
from tuner.errors import LoopError
from tuner.footing.classes import PaintedTrack
from tuner.session.document import Document
from tuner.window.beside import Beside
from tuner.window.rulers import painted
from tuner.window.rulers.painted import PaintedRulers
from tuner.window.rulers.painting import Painter, Painting, PaintRequest
from tuner.window.rulers.panel import RulerPanel
from tuner.window.shown import Failure, Shown
from tuner.window.worker import Assessor


class Asked(Beside[PaintRequest]):
    """A worker that only notes what it is asked; the test answers in its place."""

    def __init__(self) -> None:
        super().__init__(lambda _request, _stop: None, synchronous=True)
        self.requests: list[PaintRequest] = []

    def submit(self, request: PaintRequest) -> None:
        """Note the request."""
        self.requests.append(request)

    def answer(self, number: int) -> Painting:
        """Answer the request of a number."""
        request = next(request for request in self.requests if request.number == number)
        painting = Painter(made_up_footing.Painting()).answer(request, lambda: False)
        self.answered.emit(painting)
        return painting


@pytest.fixture
def worker() -> Asked:
    """Return a worker that waits for the test."""
    return Asked()


@pytest.fixture
def kept(document: Document, panel: RulerPanel, worker: Asked) -> Iterator[PaintedRulers]:
    """Return what keeps the rulers painted, awake."""
    kept = PaintedRulers(document, panel, worker)
    kept.wake()
    yield kept
    kept.close()


def shown(panel: RulerPanel) -> PaintedTrack | None:
    """Return what kp's ruler is painted by."""
    return panel.rulers["kp"].painted


def test_it_sleeps_until_it_is_woken(document: Document, panel: RulerPanel, worker: Asked) -> None:
    """Before the first curves nothing is asked; waking asks once, and waking again asks nothing."""
    kept = PaintedRulers(document, panel, worker)
    document.change_value("kp", 4.0)
    assert worker.requests == []
    kept.wake()
    kept.wake()
    (request,) = worker.requests
    assert request.sheet == document.sheet
    assert [track.name for track in request.tracks] == list(panel.rulers)
    kept.close()


@pytest.mark.usefixtures("kept")
def test_a_change_is_asked_for_once(document: Document, worker: Asked) -> None:
    """A change of a gain asks; one that leaves the sheet as it is does not."""
    document.change_value("kp", 4.0)
    document.keep()
    document.change_value("kp", 4.0)
    assert [request.number for request in worker.requests] == [1, 2]


@pytest.mark.usefixtures("kept")
def test_a_wider_ruler_is_asked_for(document: Document, panel: RulerPanel, worker: Asked) -> None:
    """A value beyond the end widens the ruler, whose further part needs paint as well."""
    document.change_value("kp", 5000.0)
    assert worker.requests[-1].tracks[0].values[-1] == panel.tracks()[0].values[-1] >= 5000.0


def test_answers_come_in_order(document: Document, panel: RulerPanel, worker: Asked, kept: PaintedRulers) -> None:
    """An answer to an older sheet is shown while nothing newer is there, and dropped afterwards."""
    for kp in (4.0, 5.0):
        document.change_value("kp", kp)
    second = worker.answer(2)
    assert shown(panel) is second.tracks["kp"]
    worker.answer(1)
    assert kept.painting is second
    third = worker.answer(3)
    assert shown(panel) is third.tracks["kp"]


def test_late_paint_fades_and_comes_back(
    document: Document, panel: RulerPanel, worker: Asked, kept: PaintedRulers, qtbot: QtBot
) -> None:
    """Paint that a change made untrue pales after a while, kp's own does not; it stays so until it is up to date."""
    worker.answer(1)
    document.change_value("kp", 4.0)
    sliders = {name: panel.rulers[name].slider for name in ("kp", "ki")}
    qtbot.waitUntil(lambda: sliders["ki"]._faded, timeout=10 * painted.LATE)
    assert not sliders["kp"]._faded
    document.change_value("kp", 5.0)
    worker.answer(2)
    assert sliders["ki"]._faded
    worker.answer(3)
    assert not sliders["ki"]._faded
    assert not kept._late.isActive()


@pytest.mark.usefixtures("kept")
def test_a_long_wait_is_explained(panel: RulerPanel, worker: Asked, qtbot: QtBot) -> None:
    """While nothing was painted yet, the line says what is waited for, until the first paint is there."""
    qtbot.waitUntil(lambda: panel.line.text() == painted.WAITING, timeout=10 * painted.LATE)
    worker.answer(1)
    assert panel.line.text().startswith("firm: ")


@pytest.mark.usefixtures("kept")
def test_another_loop_begins_grey(document: Document, panel: RulerPanel, worker: Asked) -> None:
    """Nothing of the loop before is shown for the next one, not even what was on the way."""
    worker.answer(1)
    document.change_value("kp", 4.0)
    for sheet in (replace(wash_bath(), limits=()), replace(wash_bath(), limits=())):
        document.start(sheet)
        assert shown(panel) is None
        worker.answer(len(worker.requests) - 1)
        assert shown(panel) is None
        worker.answer(len(worker.requests))
        assert shown(panel) is not None


@pytest.mark.usefixtures("kept")
def test_a_failure_leaves_the_rulers_grey(document: Document, panel: RulerPanel, worker: Asked) -> None:
    """The newest failure takes the paint away and is said; an older one is dropped."""
    worker.answer(1)
    document.change_value("kp", 0.0)
    worker.failed.emit(Failure(1, "old"))
    assert shown(panel) is not None
    worker.failed.emit(Failure(2, "the loop has no gain"))
    assert shown(panel) is None
    assert panel.line.text() == "the loop has no gain"


def test_in_a_thread_the_last_sheet_is_the_last_painted(document: Document, panel: RulerPanel, qtbot: QtBot) -> None:
    """After a burst of changes the rulers end with the paint of the last sheet, and the main thread painted nothing."""
    import threading

    paint = made_up_footing.Painting()
    kept = PaintedRulers(document, panel, Beside(Painter(paint).answer))
    kept.wake()
    for step in range(50):
        document.change_value("ki", 0.05 + 0.001 * step)
    qtbot.waitUntil(lambda: kept.painting is not None and kept.painting.sheet == document.sheet)
    assert threading.get_ident() not in paint.threads
    kept.close()


@pytest.fixture
def curves() -> Iterator[Assessor]:
    """Return what draws the curves; the test answers in its place."""
    assessor = Assessor(made_up.sketch, lambda sheet, _plant: made_up.judge(sheet, 1), made_up.draw, synchronous=True)
    yield assessor
    assessor.close()


def answer(curves: Assessor, *, whole: bool) -> None:
    """Say that curves came, and let them be drawn."""
    assessment = made_up.judge(made_up.sheet(), 3)
    curves.answered.emit(Shown(1, made_up.sheet(), assessment, made_up.draw(made_up.sheet(), assessment), (), whole))
    QApplication.processEvents()


def test_the_first_verdict_wakes_the_rulers(
    document: Document, panel: RulerPanel, worker: Asked, curves: Assessor
) -> None:
    """It is drawn first; from then on each change asks at once."""
    kept = PaintedRulers(document, panel, worker)
    kept.wake_after(curves)
    answer(curves, whole=False)
    document.change_value("kp", 3.5)
    assert worker.requests == []
    answer(curves, whole=True)
    document.change_value("kp", 4.0)
    answer(curves, whole=True)
    assert [request.sheet.controller.gain_1 for request in worker.requests] == [3.5, 4.0]
    kept.close()


def test_rulers_wake_where_there_is_no_verdict(panel: RulerPanel, worker: Asked, curves: Assessor) -> None:
    """So that they say why they are grey."""
    kept = PaintedRulers(Document(wash_bath()), panel, worker)
    kept.wake_after(curves)
    curves.failed.emit(Failure(2, "the loop has no gain"))
    QApplication.processEvents()
    assert len(worker.requests) == 1
    kept.close()


def test_a_hand_on_a_ruler_is_not_kept_waiting_for_edges(document: Document, panel: RulerPanel) -> None:
    """While it is there notches alone are asked for; once it is off, the edges between them too."""
    paint = made_up_footing.Painting()
    kept = PaintedRulers(document, panel, Beside(Painter(paint).answer, synchronous=True))
    kept.wake()
    panel.dragging_started.emit()
    document.change_value("ki", 0.051)
    document.change_value("ki", 0.052)
    assert paint.fine == [True, False, False]
    assert kept.painting is not None
    assert not kept.painting.fine
    panel.dragging_finished.emit()
    assert paint.fine == [True, False, False, True]
    assert kept.painting.fine
    assert kept.painting.sheet == document.sheet
    kept.close()


def test_a_hand_that_moved_nothing_asks_for_nothing(document: Document, panel: RulerPanel) -> None:
    """The paint is as fine as it was."""
    paint = made_up_footing.Painting()
    kept = PaintedRulers(document, panel, Beside(Painter(paint).answer, synchronous=True))
    kept.wake()
    panel.dragging_started.emit()
    panel.dragging_finished.emit()
    assert paint.fine == [True]
    kept.close()


Refuse = Callable[..., tuple[PaintedTrack, ...]]


def test_a_loop_without_gain_is_said_in_the_line(document: Document, panel: RulerPanel) -> None:
    """What the footing refuses ends in the line under the rulers."""

    def refuse(*_args: object, **_named: object) -> tuple[PaintedTrack, ...]:
        raise LoopError("the loop has no gain")

    kept = PaintedRulers(document, panel, Beside(Painter(refuse).answer, synchronous=True))
    kept.wake()
    assert panel.line.text() == "the loop has no gain"
    kept.close()

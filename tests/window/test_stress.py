"""Every slider dragged from end to end while the loop rings and runs away: the hand is never held up."""

import threading
from dataclasses import dataclass, field

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window import made_up, made_up_footing
from tests.window.windows import opened
from tuner.footing.classes import FIRM, LOST, SOFT
from tuner.judge.assessment import Assessment
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.window.main_window import MainWindow
from tuner.window.rulers.face import TRACK_TOP
from tuner.window.rulers.slider import RulerSlider

STEPS = 16


@dataclass(slots=True)
class Judging:
    """Assesses made-up loops, and notes in which threads."""

    threads: set[int] = field(default_factory=set)

    def __call__(self, sheet: Sheet, size: int) -> Assessment:
        """Return the assessment."""
        self.threads.add(threading.get_ident())
        return made_up.judge(sheet, size)


def sweep(slider: RulerSlider) -> None:
    """Drag the handle from one end of the slider to the other and half way back."""
    right = slider.width() - 1
    QTest.mousePress(slider, Qt.MouseButton.LeftButton, pos=QPoint(0, TRACK_TOP + 4))
    for step in (*range(STEPS + 1), *range(STEPS, STEPS // 2, -1)):
        QTest.mouseMove(slider, QPoint(right * step // STEPS, TRACK_TOP + 4))
        QApplication.processEvents()
    QTest.mouseRelease(slider, Qt.MouseButton.LeftButton, pos=QPoint(right // 2, TRACK_TOP + 4))


def is_settled(window: MainWindow) -> bool:
    """Tell whether the whole answer to the sheet as it is now is shown."""
    shown = window.shown
    return shown is not None and shown.whole and shown.sheet == window.document.sheet


@pytest.mark.parametrize("kp", [1.0, 3.4, 30.0])
def test_every_slider_from_end_to_end(qtbot: QtBot, kp: float) -> None:
    """Calm, ringing and running away: answers keep coming, in order, and no work is done in the main thread."""
    judging, painting, reasons = Judging(), made_up_footing.Painting(), made_up_footing.Reasons()
    document = Document(made_up.sheet(kp))
    with opened(document, judge=judging, paint=painting, reason_at=reasons, synchronous=False) as (window, wiring):
        assert wiring.footing is not None
        painted, numbers, paintings = wiring.footing.painted, list[int](), list[int]()
        window.assessor.answered.connect(lambda shown: numbers.append(shown.number))
        painted._worker.answered.connect(lambda answer: paintings.append(answer.number))
        window.ask()
        qtbot.waitUntil(lambda: is_settled(window))
        for ruler in window.rulers.rulers.values():
            answers = len(numbers), len(paintings)
            sweep(ruler.slider)
            qtbot.waitUntil(lambda: is_settled(window))
            qtbot.waitUntil(lambda: painted.painting is not None and painted.painting.sheet == document.sheet)
            assert (len(numbers) > answers[0], len(paintings) > answers[1]) == (True, True)
            document.change_value("kp", kp)
        assert numbers == sorted(numbers)
        assert paintings == sorted(paintings)
        window.rulers.rulers["kp"].slider.pointed.emit(1.0)
        qtbot.waitUntil(lambda: is_settled(window) and bool(reasons.asked))
        main = threading.get_ident()
        assert main not in judging.threads | painting.threads | reasons.threads


def test_the_last_answer_is_that_of_the_last_sheet(qtbot: QtBot) -> None:
    """After a wild drag verdict, curves and paint are what a fresh look at the final sheet gives."""
    with opened(synchronous=False) as (window, wiring):
        assert wiring.footing is not None
        painted = wiring.footing.painted
        window.ask()
        sweep(window.rulers.rulers["kp"].slider)
        sweep(window.rulers.rulers["ki"].slider)
        window.document.change_value("kp", 3.0)
        qtbot.waitUntil(lambda: is_settled(window))
        qtbot.waitUntil(lambda: painted.painting is not None and painted.painting.sheet == window.document.sheet)
        fresh = made_up.judge(window.document.sheet)
        assert window.shown is not None
        assert window.shown.assessment.verdict == fresh.verdict
        assert window.shown.assessment.limits == fresh.limits
        for track in window.rulers.tracks():
            expected = made_up_footing.paint(track, window.document.sheet)
            found = window.rulers.rulers[track.name].painted
            assert found is not None
            assert found.classes.tolist() == expected.classes.tolist()
            assert found.edges == expected.edges
        assert {window.rulers.rulers["kp"].grade_at(kp) for kp in (1.0, 3.0, 9.0)} == {FIRM, SOFT, LOST}


def test_a_slow_footing_is_still_painted_during_a_drag(qtbot: QtBot) -> None:
    """While the hand never rests and a painting takes long, paintings come nevertheless, and the last one is true."""
    gate = threading.Event()
    painting = made_up_footing.Painting(hold=lambda stop: _work(stop, gate))
    with opened(paint=painting, synchronous=False) as (window, wiring):
        assert wiring.footing is not None
        painted, shown = wiring.footing.painted, list[float]()
        painted._worker.answered.connect(lambda answer: shown.append(answer.sheet.controller.gain_2))
        window.ask()
        qtbot.waitUntil(lambda: len(shown) == 1)
        step = 0
        while len(shown) < 3 and step < 5000:
            step += 1
            window.document.change_value("ki", 0.05 + 1e-5 * step)
            qtbot.wait(5)
        gate.set()
        qtbot.waitUntil(lambda: painted.painting is not None and painted.painting.sheet == window.document.sheet)
        assert len(shown) >= 3
        assert len(painting.asked) > len(shown) or step < 100


def _work(stop: "made_up_footing.Stop", gate: threading.Event) -> None:
    """Take a tenth of a second unless told to stop, or nothing once the gate is open."""
    for _ in range(20):
        if gate.wait(0.005) or stop():
            return

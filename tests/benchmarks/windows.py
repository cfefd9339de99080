"""A hand that drags a ruler of the whole window, offscreen, until what it asked for is painted."""

import os
import tempfile
import time
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass

from PySide6.QtCore import QCoreApplication, QEvent, QEventLoop, QObject, QPoint, Qt, QTimer
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication

from tests.benchmarks.row import MILLI, Row, Times, summed_up, timed
from tuner.places import keep_compiled_kernels
from tuner.window.main_window import MainWindow
from tuner.window.rulers.face import TRACK_HEIGHT, TRACK_TOP
from tuner.window.rulers.slider import RulerSlider

SIZE = (1600, 1000)
RULER = "kp"
CALM, RINGING = (1.0, 3.0), (12.0, 40.0)
"""Where the hand drags: the family is stable in the first span, and rings and runs away in the second."""

MOVES = 200
PATIENCE = 20.0
"""Seconds for an answer that has kernels to compile first."""

NO_CLASSES = "Not measured: no classes are painted on the rulers yet."


@dataclass(frozen=True, slots=True)
class Drag:
    """How long it took from each move of the hand until the first curves, and until the whole family, was painted."""

    first: Times
    whole: Times


def rows() -> list[Row]:
    """Drag the ruler of a gain where the loop is calm, and where it rings and diverges."""
    with _window() as window:
        calm, ringing = _drag(window, CALM), _drag(window, RINGING)
        still = timed(window.plots.widget.grab, 50)
    curves = f"The nominal curves alone: median {calm.first.median:.1f} ms, p99 {calm.first.p99:.1f} ms."
    return [
        Row(
            "move_to_painted_ms",
            f"a move of the hand on {RULER} until the curves and overlays of a family of 25 are painted, 1600 x 1000",
            "ms",
            "<= 8, p99 <= 16.7",
            calm.whole.median,
            calm.whole.p99,
            still.median,
            calm.whole.median / still.median,
            "painting the unchanged plots once, into a picture",
            curves,
        ),
        Row("move_to_rulers_ms", "the same until all rulers are repainted", "ms", "<= 17, p99 <= 33", note=NO_CLASSES),
        Row(
            "ringing_vs_calm",
            "a move of the hand until all is painted while the loop rings and diverges",
            "ms",
            "ratio <= 2",
            ringing.whole.median,
            ringing.whole.p99,
            calm.whole.median,
            ringing.whole.median / calm.whole.median,
            "the same while it is calm",
            f"The nominal curves alone: median {ringing.first.median:.1f} ms, p99 {ringing.first.p99:.1f} ms.",
        ),
    ]


@contextmanager
def _window() -> Iterator[MainWindow]:
    """Open the program's own window on its own example, and wait for its first answer."""
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    keep_compiled_kernels()
    from tuner.window.app import built, opened

    application = QApplication.instance() or QApplication([])
    assert isinstance(application, QApplication)
    with tempfile.TemporaryDirectory() as folder:
        os.environ["XDG_CONFIG_HOME"] = folder  # the settings of the person who measures have no part in it
        window, wiring = built(application, opened(None))
    window.resize(*SIZE)
    window.show()
    window.ask()
    _wait(window)
    try:
        yield window
    finally:
        wiring.keeping.end()
        window.assessor.close()
        window.hide()
        window.deleteLater()


class _Painted(QObject):
    """Counts the paint events of a window's parts."""

    def __init__(self) -> None:
        super().__init__()
        self.count = 0

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Count, and let everything pass."""
        self.count += event.type() == QEvent.Type.Paint
        return super().eventFilter(watched, event)


def _drag(window: MainWindow, span: tuple[float, float]) -> Drag:
    """Press on the ruler, move to and fro within the span, and let go."""
    slider = window.rulers.rulers[RULER].slider
    left, right = (round(slider.x_of(value)) for value in span)
    watch = _Painted()
    for plot in window.plots.widget.findChildren(QObject):
        if plot.isWidgetType():
            plot.installEventFilter(watch)
    QTest.mousePress(slider, Qt.MouseButton.LeftButton, pos=_place(left))
    _wait(window)
    first, whole = [], []
    for move in range(MOVES):
        times = _move(window, slider, left + 1 + (7 * move) % max(right - left, 1), watch)
        first.append(times[0])
        whole.append(times[1])
    QTest.mouseRelease(slider, Qt.MouseButton.LeftButton, pos=_place(left))
    _wait(window)
    warm = MOVES // 10
    return Drag(summed_up(first[warm:]), summed_up(whole[warm:]))


def _move(window: MainWindow, slider: RulerSlider, x: int, watch: _Painted) -> tuple[float, float]:
    """Return how long after a move the first curves, and those of the family, were painted, ms."""
    start, first, count = time.perf_counter(), 0.0, watch.count
    shown = window.shown
    QTest.mouseMove(slider, _place(x))
    while True:
        _sleep()
        if window.shown is not shown and watch.count > count:
            shown, count = window.shown, watch.count
            first = first or time.perf_counter()
            if _is_answered(window):
                return MILLI * (first - start), MILLI * (time.perf_counter() - start)
        if time.perf_counter() - start > PATIENCE:
            raise TimeoutError("the window did not paint an answer")


def _is_answered(window: MainWindow) -> bool:
    return window.shown is not None and window.shown.whole and window.shown.sheet == window.document.sheet


def _wait(window: MainWindow) -> None:
    """Let the window work until it shows the whole answer to what its document holds."""
    end = time.perf_counter() + PATIENCE
    while not _is_answered(window) and time.perf_counter() < end:
        _sleep()
    QApplication.processEvents()


def _sleep() -> None:
    """Let the window sleep until something happens, as it does when no one measures, and then work it off."""
    alarm = QTimer(singleShot=True, interval=round(MILLI))
    alarm.start()
    QCoreApplication.processEvents(QEventLoop.ProcessEventsFlag.WaitForMoreEvents)


def _place(x: int) -> QPoint:
    return QPoint(x, TRACK_TOP + TRACK_HEIGHT // 2)

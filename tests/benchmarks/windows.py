"""A hand that drags a ruler of the whole window, offscreen, until what it asked for is painted."""

import os
import tempfile
import time
from collections.abc import Iterable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass

from PySide6.QtCore import QCoreApplication, QEvent, QEventLoop, QObject, QPoint, Qt, QTimer
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication

from tests.benchmarks.row import MILLI, Row, Times, summed_up, timed
from tuner.places import keep_compiled_kernels
from tuner.window.main_window import MainWindow
from tuner.window.rulers.face import TRACK_HEIGHT, TRACK_TOP
from tuner.window.rulers.painted import PaintedRulers
from tuner.window.rulers.slider import RulerSlider

SIZE = (1600, 1000)
RULER = "kp"
CALM, RINGING = (1.0, 3.0), (12.0, 40.0)
"""Where the hand drags: the family is stable in the first span, and rings and runs away in the second."""

MOVES = 200
PATIENCE = 20.0
"""Seconds for an answer that has kernels to compile first."""


@dataclass(slots=True)
class Taken:
    """How long a move of the hand took until something was painted; 0 until it is, ms.

    Parameters
    ----------
    first, family : float
        The curves of the nominal plant; those of the whole family too, with the limits of that very tuning.
    verdict : float
        All numbers of the family, the verdict among them.
    rulers : float
        The tracks of all rulers but the one in the hand, which stays true while it moves.
    """

    first: float = 0.0
    family: float = 0.0
    verdict: float = 0.0
    rulers: float = 0.0


@dataclass(frozen=True, slots=True)
class Drag:
    """The same for many moves."""

    first: Times
    family: Times
    verdict: Times
    rulers: Times


@dataclass(frozen=True, slots=True)
class Stage:
    """A window, what keeps its rulers painted, and what counts the paint events of its plots and of its rulers."""

    window: MainWindow
    painted: PaintedRulers
    on_plots: "Paints"
    on_rulers: "Paints"


def rows() -> list[Row]:
    """Drag the ruler of a gain where the loop is calm, and where it rings and diverges."""
    with stage_of_a_drag() as stage:
        calm, ringing = _drag(stage, CALM), _drag(stage, RINGING)
        still, still_rulers = timed(stage.window.plots.widget.grab, 50), timed(stage.window.rulers.grab, 50)
    curves = f"The nominal curves: median {calm.first.median:.1f} ms, p99 {calm.first.p99:.1f} ms. All numbers: "
    curves += f"median {calm.verdict.median:.1f} ms, p99 {calm.verdict.p99:.1f} ms."
    return [
        Row(
            "move_to_painted_ms",
            f"a move of the hand on {RULER} until the curves and overlays of a family of 25 are painted, 1600 x 1000",
            "ms",
            "<= 8, p99 <= 16.7",
            calm.family.median,
            calm.family.p99,
            still.median,
            calm.family.median / still.median,
            "painting the unchanged plots once, into a picture",
            curves,
        ),
        Row(
            "move_to_rulers_ms",
            "the same until all rulers are repainted by their new classes, the curves being drawn as well",
            "ms",
            "<= 17, p99 <= 33",
            calm.rulers.median,
            calm.rulers.p99,
            still_rulers.median,
            calm.rulers.median / still_rulers.median,
            "painting the unchanged rulers once, into a picture",
            f"Ringing and diverging: median {ringing.rulers.median:.1f} ms, p99 {ringing.rulers.p99:.1f} ms.",
        ),
        Row(
            "ringing_vs_calm",
            "a move of the hand until all is painted while the loop rings and diverges",
            "ms",
            "ratio <= 2",
            ringing.family.median,
            ringing.family.p99,
            calm.family.median,
            ringing.family.median / calm.family.median,
            "the same while it is calm",
            f"The nominal curves alone: median {ringing.first.median:.1f} ms, p99 {ringing.first.p99:.1f} ms.",
        ),
    ]


@contextmanager
def stage_of_a_drag() -> Iterator[Stage]:
    """Open the program's own window on its own example, and wait for its first answer and paint."""
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    keep_compiled_kernels()
    from tuner.window.app import built, opened

    application = QApplication.instance() or QApplication([])
    assert isinstance(application, QApplication)
    with tempfile.TemporaryDirectory() as folder:
        os.environ["XDG_CONFIG_HOME"] = folder  # the settings of the person who measures have no part in it
        window, wiring = built(application, opened(None))
    assert wiring.footing is not None
    window.resize(*SIZE)
    window.show()
    window.ask()
    others = [ruler.slider for name, ruler in window.rulers.rulers.items() if name != RULER]
    plots = [part for part in window.plots.widget.findChildren(QObject) if part.isWidgetType()]
    stage = Stage(window, wiring.footing.painted, Paints(plots), Paints(others))
    wait(stage)
    try:
        yield stage
    finally:
        wiring.keeping.end()
        wiring.footing.close()
        for other in (*wiring.apart, *wiring.others, window.assessor):
            other.close()
        if wiring.gain_map is not None:
            wiring.gain_map.close()
        window.hide()
        window.deleteLater()


class Paints(QObject):
    """Counts the paint events of a window's parts."""

    def __init__(self, parts: Iterable[QObject]) -> None:
        super().__init__()
        self.count = 0
        for part in parts:
            part.installEventFilter(self)

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Count, and let everything pass."""
        self.count += event.type() == QEvent.Type.Paint
        return super().eventFilter(watched, event)


def _drag(stage: Stage, span: tuple[float, float]) -> Drag:
    """Press on the ruler, move to and fro within the span, and let go."""
    slider = stage.window.rulers.rulers[RULER].slider
    left, right = (round(slider.x_of(value)) for value in span)
    QTest.mousePress(slider, Qt.MouseButton.LeftButton, pos=_place(left))
    wait(stage)
    taken = [_move(stage, slider, left + 1 + (7 * move) % max(right - left, 1)) for move in range(MOVES)]
    QTest.mouseRelease(slider, Qt.MouseButton.LeftButton, pos=_place(left))
    wait(stage)
    warm = taken[MOVES // 10 :]
    return Drag(
        summed_up([one.first for one in warm]),
        summed_up([one.family for one in warm]),
        summed_up([one.verdict for one in warm]),
        summed_up([one.rulers for one in warm]),
    )


def _move(stage: Stage, slider: RulerSlider, x: int) -> Taken:
    """Return how long after a move the curves, those of the family, and the rulers were painted."""
    taken, start = Taken(), time.perf_counter()
    shown, on_plots = stage.window.shown, stage.on_plots.count
    painting, on_rulers = stage.painted.painting, stage.on_rulers.count
    QTest.mouseMove(slider, _place(x))
    while not (taken.verdict and taken.rulers):
        _sleep()
        now = MILLI * (time.perf_counter() - start)
        if stage.window.shown is not shown and stage.on_plots.count > on_plots:
            shown, on_plots = stage.window.shown, stage.on_plots.count
            taken.first = taken.first or now
            taken.family = taken.family or (now if _is_drawn(stage.window) else 0.0)
        taken.verdict = taken.verdict or (now if taken.family and _is_answered(stage.window) else 0.0)
        if stage.painted.painting is not painting and stage.on_rulers.count > on_rulers:
            painting, on_rulers = stage.painted.painting, stage.on_rulers.count
            taken.rulers = taken.rulers or (now if _is_painted(stage) else 0.0)
        if now > MILLI * PATIENCE:
            raise TimeoutError("the window did not paint an answer")
    return taken


def _is_answered(window: MainWindow) -> bool:
    return window.shown is not None and window.shown.whole and window.shown.sheet == window.document.sheet


def _is_drawn(window: MainWindow) -> bool:
    return window.shown is not None and window.shown.has_family and window.shown.sheet == window.document.sheet


def _is_painted(stage: Stage) -> bool:
    painting = stage.painted.painting
    return painting is not None and painting.sheet == stage.window.document.sheet


def wait(stage: Stage) -> None:
    """Let the window work until it shows the whole answer to what its document holds, and its rulers are painted."""
    end = time.perf_counter() + PATIENCE
    while not (_is_answered(stage.window) and _is_painted(stage)) and time.perf_counter() < end:
        _sleep()
    QApplication.processEvents()


def _sleep() -> None:
    """Let the window sleep until something happens, as it does when no one measures, and then work it off."""
    alarm = QTimer(singleShot=True, interval=round(MILLI))
    alarm.start()
    QCoreApplication.processEvents(QEventLoop.ProcessEventsFlag.WaitForMoreEvents)


def _place(x: int) -> QPoint:
    return QPoint(x, TRACK_TOP + TRACK_HEIGHT // 2)

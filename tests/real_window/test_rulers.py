"""Every ruler is dragged with a real mouse, and curves and verdict follow, in calm loops and in wild ones."""

from collections.abc import Callable

import numpy as np
import pytest
from PySide6.QtCore import QPoint
from pytestqt.qtbot import QtBot

from tests.real_window.hand import drag, press
from tuner.window.main_window import MainWindow
from tuner.window.plot_grid import REFERENCE
from tuner.window.plots.trace_panel import TracePanel
from tuner.window.rulers.ruler import Ruler

NAMES = ("kp", "ki", "kd", "filter_time", "b", "c", "windup_time")
PATIENCE = 60_000


@pytest.mark.parametrize("name", NAMES)
def test_a_ruler_is_dragged(window: MainWindow, qtbot: QtBot, name: str) -> None:
    """The document takes the value under the hand, the plots answer for it, and one step takes it back."""
    ruler, before = window.rulers.rulers[name], window.document.sheet
    _drag_by(ruler, 60)
    assert window.document.sheet.controller.value(name) != before.controller.value(name)
    _answered(window, qtbot)
    press("ctrl+z")
    qtbot.waitUntil(lambda: window.document.sheet == before)
    _answered(window, qtbot)


def test_the_curve_follows_the_hand(window: MainWindow, qtbot: QtBot) -> None:
    """While kp is dragged the nominal curve is drawn anew again and again, before the button is let go."""
    panel = window.plots.panels[REFERENCE]
    assert isinstance(panel, TracePanel)
    drawn: list[float] = []
    _drag_by(window.rulers.rulers["kp"], 80, lambda: drawn.append(float(np.sum(panel.nominal.yData))))
    assert len(set(drawn)) >= 3
    _answered(window, qtbot)


def test_a_gain_too_far_is_called_unstable(window: MainWindow, qtbot: QtBot) -> None:
    """Dragged to its end, kp makes the loop run away: in words, its curves finite as drawn; undo brings it back."""
    _drag_to_end(window.rulers.rulers["kp"])
    _answered(window, qtbot)
    assert window.shown is not None
    assert window.shown.assessment.instability is not None
    assert window.ribbon.verdict.text() == "Unstable"
    assert window.ribbon.detail.text() == window.shown.assessment.instability.sentence
    for panel in window.plots.panels.values():
        if isinstance(panel, TracePanel):
            assert np.isfinite(panel.nominal.yData).all()
    press("ctrl+z")
    _answered(window, qtbot)
    assert window.ribbon.verdict.text() != "Unstable"


def test_a_wild_loop_can_be_dragged_on(window: MainWindow, qtbot: QtBot) -> None:
    """With a loop that rings and runs away, the hand still moves the curves: answers keep coming during the drag."""
    _drag_to_end(window.rulers.rulers["kp"])
    _answered(window, qtbot)
    answers: list[int] = []
    window.assessor.answered.connect(lambda shown: answers.append(shown.number))
    _drag_by(window.rulers.rulers["ki"], 120)
    _answered(window, qtbot)
    assert len(set(answers)) >= 3


def _drag_by(ruler: Ruler, pixels: int, between: Callable[[], None] | None = None) -> None:
    """Drag the handle to the right, or to the left where there is no room on the right."""
    slider = ruler.slider
    start = QPoint(round(slider.x_of(_value(ruler))), slider.height() // 3)
    way = pixels if start.x() + pixels < slider.width() - 10 else -pixels
    drag(slider, start, start + QPoint(way, 0), between=between)


def _drag_to_end(ruler: Ruler) -> None:
    slider = ruler.slider
    height = slider.height() // 3
    drag(slider, QPoint(round(slider.x_of(_value(ruler))), height), QPoint(slider.width() - 12, height))


def _value(ruler: Ruler) -> float | None:
    return ruler._document.sheet.controller.value(ruler.parameter.name)


def _answered(window: MainWindow, qtbot: QtBot) -> None:
    """Wait until what is shown is the verdict on the sheet as it is now."""

    def settled() -> bool:
        shown = window.shown
        return shown is not None and shown.whole and shown.sheet == window.document.sheet

    qtbot.waitUntil(settled, timeout=PATIENCE)

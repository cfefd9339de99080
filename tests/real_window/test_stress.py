"""Every ruler dragged end to end with a real mouse while a real loop rings and runs away."""

import sys
import threading
from collections.abc import Callable
from dataclasses import dataclass, field

import numpy as np
import pytest
from PySide6.QtCore import QPoint
from pytestqt.qtbot import QtBot

from tests.real_window.hand import drag
from tuner.assess import assess
from tuner.footing import reason, rulers
from tuner.window.main_window import MainWindow
from tuner.window.rulers.painted import PaintedRulers
from tuner.window.rulers.slider import RulerSlider

PATIENCE = 120_000
KP = {"rings": 5.0, "runs away": 30.0}
"""Gains of the heater at which its family rings, and at which it runs away."""


@dataclass(slots=True)
class Watch:
    """Notes the threads in which the roads from sheet to answer are gone."""

    threads: dict[str, set[int]] = field(default_factory=dict)

    def over(self, monkeypatch: pytest.MonkeyPatch, room: object, name: str) -> None:
        """Watch one function."""
        road: Callable[..., object] = getattr(room, name)

        def watched(*given: object, **named: object) -> object:
            self.threads.setdefault(name, set()).add(threading.get_ident())
            return road(*given, **named)

        monkeypatch.setattr(room, name, watched)


@pytest.mark.parametrize("kp", KP.values(), ids=KP)
def test_every_ruler_end_to_end(window: MainWindow, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch, kp: float) -> None:
    """Answers and paint keep coming, in order, and not from the window's thread; the last ones are right."""
    watch = Watch()
    for room, name in ((sys.modules["tuner.assess"], "sketched"), (rulers, "paint_rulers"), (reason, "reason_at")):
        watch.over(monkeypatch, room, name)
    (painted,) = window.rulers.findChildren(PaintedRulers)
    numbers, paintings = list[int](), list[int]()
    window.assessor.answered.connect(lambda shown: numbers.append(shown.number))
    painted._worker.answered.connect(lambda painting: paintings.append(painting.number))
    for ruler in window.rulers.rulers.values():
        window.document.change_value("kp", kp)
        before = len(numbers), len(paintings)
        _end_to_end(ruler.slider)
        _settle(window, painted, qtbot)
        assert (len(numbers) > before[0], len(paintings) > before[1]) == (True, True)
        window.document.revert()
    assert numbers == sorted(numbers)
    assert paintings == sorted(paintings)
    # Rulers are painted by another process.
    assert set(watch.threads) == {"sketched", "reason_at"}
    assert threading.get_ident() not in set().union(*watch.threads.values())
    _settle(window, painted, qtbot)
    _is_right(window, painted)


def _is_right(window: MainWindow, painted: PaintedRulers) -> None:
    """Hold that verdict, measures and paint are what a fresh look at the sheet gives."""
    sheet = window.document.sheet
    assert window.shown is not None
    assert painted.painting is not None
    fresh = assess(sheet)
    assert window.shown.assessment.verdict == fresh.verdict
    assert window.shown.assessment.nominal.measures == fresh.nominal.measures
    for expected in rulers.paint_rulers(sheet, window.rulers.tracks()):
        found = painted.painting.tracks[expected.name]
        assert np.array_equal(found.classes, expected.classes)
        assert [edge.value for edge in found.edges] == pytest.approx([edge.value for edge in expected.edges], rel=0.005)


def _end_to_end(slider: RulerSlider) -> None:
    height = slider.height() // 3
    left, right = QPoint(2, height), QPoint(slider.width() - 2, height)
    drag(slider, left, right)
    drag(slider, right, left + (right - left) * 0.6)


def _settle(window: MainWindow, painted: PaintedRulers, qtbot: QtBot) -> None:
    """Wait until verdict and paint are those of the sheet as it is now."""

    def settled() -> bool:
        shown, painting = window.shown, painted.painting
        done = shown is not None and shown.whole and shown.sheet == window.document.sheet
        return done and painting is not None and painting.sheet == window.document.sheet

    qtbot.waitUntil(settled, timeout=PATIENCE)

"""The gain map under a real mouse: one drag moves both gains, and what it shows is what the assessment says."""

import pytest
from PySide6.QtCore import QPoint
from pytestqt.qtbot import QtBot

from tests.real_window.hand import click, drag, press
from tuner.assess import assess
from tuner.footing.classes import FIRM, LOST, SOFT
from tuner.window.gain_map.page import GainMapPage
from tuner.window.main_window import MainWindow

PATIENCE = 60_000
VERDICTS = {"met": FIRM, "missed": SOFT, "unstable": LOST}


@pytest.fixture
def page(window: MainWindow, qtbot: QtBot) -> GainMapPage:
    """Return the page, chosen by its word, once its finest map is shown."""
    click(window.pages.words.buttons["Gain map"])
    page = window.pages.page
    assert isinstance(page, GainMapPage)
    qtbot.waitUntil(lambda: page.drawn.whole, timeout=PATIENCE)
    return page


def test_both_gains_are_dragged_in_one_step(window: MainWindow, page: GainMapPage, qtbot: QtBot) -> None:
    """Both follow the hand live, the map is not asked for during the drag, and one step takes all of it back."""
    before, shown = window.document.sheet, page.view.answer
    gains: set[tuple[float, float]] = set()

    def note() -> None:
        controller = window.document.sheet.controller
        gains.add((controller.gain_1, controller.gain_2))
        assert page.view.answer is shown

    start = page.view.point(page.view.values).toPoint()
    drag(page.view, start, start + QPoint(-120, 90), between=note)
    assert len(gains) >= 10
    assert window.document.sheet.controller.gain_1 < before.controller.gain_1
    assert window.document.sheet.controller.gain_2 < before.controller.gain_2
    press("ctrl+z")
    qtbot.waitUntil(lambda: window.document.sheet == before)
    assert window.document.undo_label is None


@pytest.mark.parametrize(("kp", "ki"), [(0.5, 0.005), (20.0, 0.01), (2.0, 0.058), (0.4, 0.5)])
def test_the_class_under_a_click_is_the_verdict(
    window: MainWindow, page: GainMapPage, qtbot: QtBot, kp: float, ki: float
) -> None:
    """The class painted where the mouse sets the gains is that of the verdict the window then shows."""
    place = page.view.point((kp, ki)).toPoint()
    drag(page.view, place, place)
    values = page.view.values
    painted = page.view.grade_at(values)
    assert values[0] == pytest.approx(kp, rel=0.02)
    assert values[1] == pytest.approx(ki, rel=0.02)
    assert painted == VERDICTS[assess(window.document.sheet).verdict]
    qtbot.waitUntil(lambda: page.line.text().count("  ") >= 2, timeout=PATIENCE)


def test_arrows_nudge_and_escape_leaves(window: MainWindow, page: GainMapPage, qtbot: QtBot) -> None:
    """Right raises the gain across by 1 %, Shift and Up the other by 10 %; each press is a step of its own."""
    page.view.setFocus()
    before = window.document.sheet.controller
    press("Right")
    qtbot.waitUntil(lambda: window.document.sheet.controller.gain_1 == pytest.approx(1.01 * before.gain_1, rel=1e-3))
    press("shift+Up")
    qtbot.waitUntil(lambda: window.document.sheet.controller.gain_2 == pytest.approx(1.10 * before.gain_2, rel=1e-3))
    press("ctrl+z")
    press("ctrl+z")
    qtbot.waitUntil(lambda: window.document.sheet.controller == before)

"""Pages of the plot area: only the one in sight draws, and it has the newest answer."""

from dataclasses import replace

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest

from tests.window.windows import opened


def test_the_trial_comes_first() -> None:
    """It is in sight until another is chosen, and asks for no curves over frequency."""
    with opened() as (window, _):
        assert window.pages.page is window.plots
        assert window.shown is not None
        assert window.shown.frequency is None


def test_a_page_in_sight_has_the_newest_answer() -> None:
    """Choosing the frequency page asks for its curves; going back shows the newest trial."""
    with opened() as (window, _):
        window.pages.choose("Frequency")
        assert window.shown is not None
        assert window.shown.frequency is not None
        sheet = window.document.sheet
        moved = replace(sheet, controller=sheet.controller.with_value("kp", 1.5))
        window.document.edit(moved, label="Set kp")
        assert window.frequency.panels["Nyquist plot"].shown is window.shown
        assert window.plots.panels["Effort"].shown is not window.shown
        window.pages.choose("Trial")
        assert window.plots.panels["Effort"].shown is window.shown


def test_pages_are_chosen_by_the_keyboard() -> None:
    """The arrows go from word to word."""
    with opened() as (window, _):
        first = window.pages.words.buttons["Trial"]
        first.setFocus()
        QTest.keyClick(first, Qt.Key.Key_Right)
        assert window.pages.page is window.frequency
        assert window.pages.stack.currentWidget() is window.frequency.widget


def test_a_loop_that_is_left_is_forgotten_everywhere() -> None:
    """No page shows an answer on another loop."""
    with opened() as (window, _):
        window.pages.choose("Frequency")
        window.pages.forget()
        assert window.frequency.panels["Nyquist plot"].ask() is None

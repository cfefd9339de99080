"""The pages of structures and tunings under a real hand: they follow what is dragged, kept and undone."""

from dataclasses import replace

import pytest
from PySide6.QtCore import QPoint
from pytestqt.qtbot import QtBot

from tests.real_window.hand import click, drag, press
from tuner.compare.comparison import compare_structures
from tuner.compare.figures import figures_of
from tuner.window.main_window import MainWindow
from tuner.window.structures.page import StructuresPage
from tuner.window.tunings.page import TuningsPage

PATIENCE = 60_000


@pytest.fixture
def structures(window: MainWindow, qtbot: QtBot) -> StructuresPage:
    """Return the page of structures, chosen by its word, once it is answered."""
    click(window.pages.words.buttons["Structures"])
    page = window.pages.page
    assert isinstance(page, StructuresPage)
    qtbot.waitUntil(lambda: page.compared is not None, timeout=PATIENCE)
    return page


@pytest.fixture
def tunings(window: MainWindow, qtbot: QtBot) -> TuningsPage:
    """Return the page of tunings, chosen by its word, once it is answered."""
    click(window.pages.words.buttons["Tunings"])
    page = window.pages.page
    assert isinstance(page, TuningsPage)
    qtbot.waitUntil(lambda: page.compared is not None, timeout=PATIENCE)
    return page


def test_structures_follow_a_dragged_gain(window: MainWindow, structures: StructuresPage, qtbot: QtBot) -> None:
    """When the hand is off, the page shows what the road says of the gains as they are then."""
    ruler = window.rulers.rulers["kp"]
    before = window.document.sheet.controller.gain_1
    middle = ruler.slider.rect().center()
    drag(ruler.slider, middle, middle + QPoint(-60, 0))
    assert window.document.sheet.controller.gain_1 != before

    def is_true() -> bool:
        shown = structures.compared
        return shown is not None and shown.sheet.controller.gain_1 == window.document.sheet.controller.gain_1

    qtbot.waitUntil(is_true, timeout=PATIENCE)
    assert structures.compared is not None
    for shown, true in zip(structures.compared.comparisons, compare_structures(window.document.sheet), strict=True):
        assert shown.assessment is not None
        assert true.assessment is not None
        assert figures_of(shown.assessment) == true.figures
    assert not structures.table.words.pale
    assert not structures.plots[0].stale


def test_tunings_are_kept_and_compared_by_keys(window: MainWindow, tunings: TuningsPage, qtbot: QtBot) -> None:
    """Keeping one makes a column, undoing that takes it away; as found is there from the start."""
    assert tunings.table.words.columnCount() == 2
    press("ctrl+k")
    qtbot.waitUntil(lambda: tunings.table.words.columnCount() == 3, timeout=PATIENCE)
    window.document.change_value("kp", 1.0)
    press("ctrl+z")
    press("ctrl+z")
    qtbot.waitUntil(lambda: tunings.table.words.columnCount() == 2, timeout=PATIENCE)


def test_pages_are_reached_by_keys_and_their_tables_read(window: MainWindow, qtbot: QtBot) -> None:
    """The key of the page brings it in sight; in the table the arrows go from cell to cell."""
    press("ctrl+alt+4")
    page = window.pages.page
    assert isinstance(page, StructuresPage)
    qtbot.waitUntil(lambda: page.compared is not None, timeout=PATIENCE)
    page.table.setFocus()
    page.table.setCurrentIndex(page.table.words.index(0, 0))
    press("Right")
    press("Down")
    qtbot.waitUntil(lambda: (page.table.currentIndex().row(), page.table.currentIndex().column()) == (1, 1))


def test_chips_say_what_the_controller_as_found_came_to(window: MainWindow, qtbot: QtBot) -> None:
    """The worst over the family, by the same road; forgetting it takes the words away."""
    from tuner.assess import assess

    found = window.document.sheet.controller.as_found
    assert found is not None
    expected = assess(replace(window.document.sheet, controller=found)).worst["max_sensitivity"].value
    chip = next(chip for chip in window.ribbon.chips if chip.words.measure == "max sensitivity")
    qtbot.waitUntil(lambda: bool(chip.words.earlier), timeout=PATIENCE)
    assert chip.words.earlier[0].short == f"found {expected:.3g}"
    window.document.forget_as_found()
    qtbot.waitUntil(lambda: not chip.words.earlier, timeout=PATIENCE)

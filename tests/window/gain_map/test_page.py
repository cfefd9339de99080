"""The gain map page: what the hand on it does to the document, and when it computes."""

from dataclasses import replace
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tests.window.gain_map.hand import at
from tests.window.gain_map.made_up_map import Mapping
from tests.window.windows import opened
from tuner.footing.classes import FIRM, LOST, SOFT
from tuner.session.document import Document
from tuner.window.gain_map import build_gain_map
from tuner.window.gain_map.page import GainMapPage
from tuner.window.gain_map.question import Values
from tuner.window.theme import Theme


def test_a_click_sets_both_gains_in_one_step(page: GainMapPage, document: Document) -> None:
    """Both gains are those under the pointer, round numbers, and one undo takes them back."""
    before = document.sheet
    QTest.mouseClick(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    controller = document.sheet.controller
    assert controller.gain_1 == pytest.approx(5.0, rel=0.02)
    assert controller.gain_2 == pytest.approx(0.2, rel=0.03)
    assert document.undo_label == "Set kp and ki"
    document.undo()
    assert document.sheet == before
    assert document.undo_label is None


def test_a_drag_is_one_step(page: GainMapPage, document: Document) -> None:
    """The gains follow live; releasing ends the step, and the next drag is another."""
    before, seen = document.sheet, []
    document.listen(lambda: seen.append(document.sheet.controller.gain_1))
    QTest.mousePress(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    for kp in (4.0, 3.0, 1.0):
        QTest.mouseMove(page.view, at(page, kp, 0.1))
        QApplication.processEvents()
    QTest.mouseRelease(page.view, Qt.MouseButton.LeftButton, pos=at(page, 1.0, 0.1))
    assert [round(kp, 1) for kp in seen] == [5.0, 4.0, 3.0, 1.0]
    document.undo()
    assert document.sheet == before


def test_escape_takes_a_drag_back(page: GainMapPage, document: Document) -> None:
    """The gains are those from before, and what the mouse does until it is released changes nothing."""
    before = document.sheet
    QTest.mousePress(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    QTest.keyClick(page.view, Qt.Key.Key_Escape)
    QTest.mouseRelease(page.view, Qt.MouseButton.LeftButton, pos=at(page, 3.0, 0.2))
    assert document.sheet == before
    assert document.undo_label is None


def test_escape_after_a_drag_that_came_back_undoes_nothing_else(page: GainMapPage, document: Document) -> None:
    """An earlier step stays when the drag has not moved anything."""
    QTest.mouseClick(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    before = document.sheet
    QTest.mousePress(page.view, Qt.MouseButton.LeftButton, pos=at(page, 5.0, 0.2))
    QTest.keyClick(page.view, Qt.Key.Key_Escape)
    assert document.sheet == before


def test_out_of_sight_nothing_is_computed(page: GainMapPage, document: Document, mapping: Mapping) -> None:
    """A change while the page is hidden is asked for when it comes in sight."""
    page.widget.hide()
    asked = len(mapping.asked)
    document.change_value("kd", 5.0)
    assert len(mapping.asked) == asked
    page.widget.show()
    assert len(mapping.asked) == asked + 3


def test_another_loop_begins_without_a_map(page: GainMapPage, document: Document) -> None:
    """What was shown of the loop before is gone once the page is told to forget."""
    page.widget.hide()
    document.start(replace(made_up.sheet(kp=3.0), limits=()))
    page.forget()
    assert page.view.answer is None
    assert page.choosers.chosen_measure == "overshoot"


def test_the_window_has_it(qtbot: QtBot) -> None:
    """It is a page of the window, reached by its word, and closes with it."""
    mapping = Mapping()
    with opened(paint_map=mapping) as (window, wiring):
        assert wiring.gain_map is not None
        assert mapping.asked == []
        window.pages.choose("Gain map")
        qtbot.waitUntil(lambda: len(mapping.asked) == 3)


def test_the_true_map_of_a_small_loop(qtbot: QtBot, theme: Theme) -> None:
    """On a first-order loop the classes of the real road are those of the assessment at some places."""
    from tuner.assess import assess
    from tuner.files import sheet as files
    from tuner.footing.gain_map import paint_map
    from tuner.footing.reason import reason_at

    text = (Path(__file__).parent / "small.toml").read_text(encoding="utf-8")
    document = Document(files.parse(text))
    page = build_gain_map(
        document,
        theme,
        lambda sheet, x, y, measure, *, stop: paint_map(sheet, x, y, measure, stop=stop),
        reason_at,
        synchronous=True,
    )
    qtbot.addWidget(page.widget)
    page.widget.resize(600, 400)
    page.widget.show()
    page.show_stale()
    assert page.view.answer is not None
    found = page.view.answer.map
    grades = {"met": FIRM, "missed": SOFT, "unstable": LOST}
    for row, column in ((5, 5), (30, 40), (60, 60), (45, 20)):
        places: Values = (float(found.x.values[column]), float(found.y.values[row]))
        controller = document.sheet.controller.with_value("kp", places[0]).with_value("ki", places[1])
        verdict = assess(replace(document.sheet, controller=controller), 5).verdict
        assert found.classes[row, column] == grades[verdict]
        assert page.view.grade_at(places) == grades[verdict]
    assert set(found.classes.ravel().tolist()) == {FIRM, SOFT, LOST}
    page.close()
    page.widget.hide()

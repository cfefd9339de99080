"""The pages of blocks that come and go: notch, feedforward, the disturbance's path, the gains as found."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window.editors.finding import (
    Edit,
    button,
    segments,
    typed_field,
)
from tests.window.editors.typing import enter, replace_text
from tuner.session.document import Document
from tuner.session.fields import value_at
from tuner.window.editors.intake import PAUSE
from tuner.window.editors.panel import EditorPanel


@pytest.mark.parametrize(
    ("word", "edit"),
    [
        ("notch", Edit("Controller", "controller.notch.frequency", "0.7", 0.7)),
        ("notch", Edit("Controller", "controller.notch.depth", "0.2", 0.2)),
        ("notch", Edit("Controller", "controller.notch.width", "0.5", 0.5)),
        ("static", Edit("Controller", "controller.feedforward.gain", "0.4", 0.4)),
        ("inverse", Edit("Controller", "controller.feedforward.filter_time", "7", 7.0)),
    ],
)
def test_optional_blocks_come_and_go(panel: EditorPanel, document: Document, word: str, edit: Edit) -> None:
    """A block switched on has its fields, switched off it is gone from the sheet."""
    panel.select("Controller")
    switch = segments(panel.pages["Controller"], word)
    QTest.mouseClick(switch.buttons[word], Qt.MouseButton.LeftButton)
    enter(typed_field(panel, edit.block, edit.path).line, edit.text)
    assert value_at(document.sheet, edit.path) == edit.outcome
    QTest.mouseClick(switch.buttons["none"], Qt.MouseButton.LeftButton)
    assert document.sheet == wash_bath()
    document.undo()
    assert value_at(document.sheet, edit.path) == edit.outcome


def test_a_notch_above_nyquist_is_refused(panel: EditorPanel, document: Document) -> None:
    """What the reader of files would refuse is refused in the field."""
    panel.select("Controller")
    QTest.mouseClick(segments(panel.pages["Controller"], "notch").buttons["notch"], Qt.MouseButton.LeftButton)
    before = document.sheet
    field = typed_field(panel, "Controller", "controller.notch.frequency")
    enter(field.line, "50")
    assert document.sheet == before
    assert field.fault.text() == "Expected a frequency below pi / sample_time, 3.142, found 50"


def test_the_gains_as_found_are_noted_restored_and_forgotten(panel: EditorPanel, document: Document) -> None:
    """The controller's page notes the present gains, restores and forgets them."""
    panel.select("Controller")
    page = panel.pages["Controller"]
    button(page, "Restore").click()
    assert document.sheet.controller.gain_1 == 1.5
    document.change_value("kp", 7.0)
    button(page, "Note present").click()
    document.change_value("kp", 1.0)
    button(page, "Restore").click()
    assert document.sheet.controller.gain_1 == 7.0
    button(page, "Forget").click()
    assert document.sheet.controller.as_found is None
    assert not button(page, "Restore").isEnabled()


def test_the_disturbance_path_is_a_formula(panel: EditorPanel, document: Document) -> None:
    """It is typed like the plant's, says its faults in place, and an empty one is none."""
    panel.select("Controller")
    path = panel.disturbance_path
    enter(path.text, "2 / (lag s + 1")
    assert path.fault.isVisible()
    assert document.sheet.controller.disturbance_feedforward is None
    enter(path.text, "2 / (lag s + 1)")
    assert document.sheet.controller.disturbance_feedforward is not None
    assert path.fault.isHidden()
    enter(path.text, "")
    assert document.sheet == wash_bath()


def test_undo_takes_a_block_away_under_the_hand(panel: EditorPanel, document: Document, qtbot: QtBot) -> None:
    """Undo while a field is typed in removes the block for good: what was half typed does not bring it back."""
    panel.select("Controller")
    QTest.mouseClick(segments(panel.pages["Controller"], "notch").buttons["notch"], Qt.MouseButton.LeftButton)
    field = typed_field(panel, "Controller", "controller.notch.depth")
    replace_text(field.line, "0.3")
    qtbot.waitUntil(field.line.hasFocus)
    document.undo()
    qtbot.wait(2 * PAUSE)
    assert document.sheet == wash_bath()

"""Groups of fields that come and go with their block, on whatever page they are."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window.editors.finding import Edit, segments, typed_field
from tests.window.editors.typing import enter, replace_text
from tuner.session.document import Document
from tuner.session.fields import value_at
from tuner.window.editors.intake import PAUSE
from tuner.window.editors.panel import EditorPanel


@pytest.mark.parametrize(
    ("word", "edit"),
    [
        ("notch", Edit("Filters", "controller.notch.frequency", "0.7", 0.7)),
        ("notch", Edit("Filters", "controller.notch.depth", "0.2", 0.2)),
        ("notch", Edit("Filters", "controller.notch.width", "0.5", 0.5)),
        ("lead-lag", Edit("Filters", "controller.lead_lag.lead", "3", 3.0)),
        ("lead-lag", Edit("Filters", "controller.lead_lag.lag", "1.5", 1.5)),
        ("static", Edit("Feedforward", "controller.feedforward.gain", "0.4", 0.4)),
        ("inverse", Edit("Feedforward", "controller.feedforward.filter_time", "7", 7.0)),
        ("lags", Edit("Feedforward", "controller.reference_filter.time", "2.5", 2.5)),
        ("lags", Edit("Feedforward", "controller.reference_filter.order", "3", 3)),
    ],
)
def test_optional_blocks_come_and_go(panel: EditorPanel, document: Document, word: str, edit: Edit) -> None:
    """A block switched on has its fields, switched off it is gone from the sheet."""
    panel.select(edit.block)
    switch = segments(panel.pages[edit.block], word)
    QTest.mouseClick(switch.buttons[word], Qt.MouseButton.LeftButton)
    enter(typed_field(panel, edit.block, edit.path).line, edit.text)
    assert value_at(document.sheet, edit.path) == edit.outcome
    QTest.mouseClick(switch.buttons["none"], Qt.MouseButton.LeftButton)
    assert document.sheet == wash_bath()
    document.undo()
    assert value_at(document.sheet, edit.path) == edit.outcome


def test_undo_takes_a_block_away_under_the_hand(panel: EditorPanel, document: Document, qtbot: QtBot) -> None:
    """Undo while a field is typed in removes the block for good: what was half typed does not bring it back."""
    panel.select("Filters")
    QTest.mouseClick(segments(panel.pages["Filters"], "notch").buttons["notch"], Qt.MouseButton.LeftButton)
    field = typed_field(panel, "Filters", "controller.notch.depth")
    replace_text(field.line, "0.3")
    qtbot.waitUntil(field.line.hasFocus)
    document.undo()
    qtbot.wait(2 * PAUSE)
    assert document.sheet == wash_bath()

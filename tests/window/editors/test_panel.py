"""The column of editors: every block can be chosen, reached by keys, and read."""

from dataclasses import replace

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.session.sheets import TEXT, wash_bath
from tests.window.editors.finding import (
    parameter_fields,
    typed_field,
)
from tests.window.editors.typing import enter
from tuner.model.parameters import in_section
from tuner.session.document import Document
from tuner.window.editors import build_editors
from tuner.window.editors.panel import EditorPanel
from tuner.window.theme import Theme

BLOCKS = ["Loop", "Plant", "Actuator", "Sensor", "Controller", "Trial", "Limits"]


def test_every_block_has_its_page(panel: EditorPanel, qtbot: QtBot) -> None:
    """The list names the blocks, and choosing one shows its page and tells of it."""
    assert list(panel.pages) == BLOCKS
    for block in ("Loop", *BLOCKS[2:]):
        with qtbot.waitSignal(panel.block_chosen, check_params_cb=lambda name, block=block: name == block):
            panel.select(block.lower())
        assert panel.block == block
        assert panel.pages[block].isVisible()


def test_the_list_is_walked_by_keys(panel: EditorPanel) -> None:
    """The arrows go from block to block."""
    panel.blocks.setFocus()
    QTest.keyClick(panel.blocks, Qt.Key.Key_Right)
    assert panel.block == "Actuator"


def test_every_key_of_the_table_can_be_edited(panel: EditorPanel) -> None:
    """Each key of the table that is no gain and no block of its own has a field on some page."""
    sections = (*("loop", "loop.controlled", "loop.manipulated", "actuator", "sensor", "controller", "trial"),)
    wanted = {p.path for section in sections for p in in_section(section) if not p.ruler} - {"controller.form"}
    found = {field.path for page in panel.pages.values() for field in parameter_fields(page)}
    assert wanted <= found


def test_pages_out_of_sight_follow_when_they_are_shown(panel: EditorPanel, document: Document) -> None:
    """A change made while another page was shown is there when the page is."""
    document.change(replace(document.sheet, trial=replace(document.sheet.trial, duration=123.0)), label="Set it")
    assert typed_field(panel, "Trial", "trial.duration").line.typed() == "123"


def test_another_sheet_forgets_what_was_typed(panel: EditorPanel, document: Document) -> None:
    """Wrong text goes with the sheet that it was typed for."""
    field = typed_field(panel, "Trial", "trial.duration")
    enter(field.line, "x")
    document.start(wash_bath(), TEXT)
    assert field.line.typed() == "300"
    assert field.fault.isHidden()


def test_every_page_fits_the_narrow_column(panel: EditorPanel, document: Document) -> None:
    """No page is wider than a column of 300 pixels."""
    del document
    panel.resize(300, 700)
    for block in BLOCKS:
        panel.select(block)
        QApplication.processEvents()
        assert panel.pages[block].minimumSizeHint().width() <= 300, block


def test_a_panel_that_is_gone_hears_nothing(document: Document, theme: Theme) -> None:
    """After a panel is deleted the document changes without it."""
    panel = build_editors(document, theme)
    panel.deleteLater()
    QApplication.sendPostedEvents()
    QApplication.processEvents()
    document.change_value("kp", 5.0)
    assert document.sheet.controller.gain_1 == 5.0

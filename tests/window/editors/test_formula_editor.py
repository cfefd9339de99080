"""The formula of the plant: taken as it is typed, marked where it is wrong."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window.editors.finding import (
    formula_editor,
)
from tests.window.editors.typing import enter, replace_text
from tuner.session.document import Document
from tuner.window.editors.plant_page import PlantPage


def test_a_typed_formula_brings_its_parameters(plant_page: PlantPage, document: Document, qtbot: QtBot) -> None:
    """After a short pause the formula is taken, a row stands for each name, an unused one is faded and comes back."""
    editor = formula_editor(plant_page)
    replace_text(editor.text, "gain / ((lag s + 1)(tail s + 1))")
    qtbot.waitUntil(lambda: "tail" in editor.table.rows, timeout=5000)
    assert list(editor.table.rows) == ["gain", "lag", "tail", "delay"]
    assert [name for name, row in editor.table.rows.items() if row.is_faded] == ["delay"]
    enter(editor.text, "gain exp(-delay s) / (lag s + 1)")
    assert document.sheet == wash_bath()
    assert not any(row.is_faded for row in editor.table.rows.values())


def test_half_typed_names_leave_nothing_behind(plant_page: PlantPage, document: Document) -> None:
    """Names that stood in the formula only while it was typed are no spare parameters."""
    editor = formula_editor(plant_page)
    for text in ("gain / (la s + 1)", "gain / (laz s + 1)", "gain / (lag s + 1)"):
        enter(editor.text, text)
    assert [one.name for one in document.spare_parameters] == ["delay"]


@pytest.mark.parametrize(
    ("text", "position", "sentence"),
    [
        ("gain / (lag s + 1", 7, "Expected a ')' that closes this '(' at character 8, found none"),
        ("gain / (lag s + )", 16, "Expected a number, a name or an opening bracket at character 17, found ')'"),
        ("lag s^2 + 1", None, "The plant formula is improper: its numerator has degree 2"),
    ],
)
def test_a_wrong_formula_is_marked_where_it_is(
    plant_page: PlantPage, document: Document, text: str, position: int | None, sentence: str
) -> None:
    """The character to blame is underlined, a sentence stands below, the text and the last plant stay."""
    editor = formula_editor(plant_page)
    enter(editor.text, text)
    assert document.sheet == wash_bath()
    assert editor.text.toPlainText() == text
    assert editor.text.fault_position() == position
    assert editor.text.marked_characters() == ([] if position is None else [position])
    assert editor.fault.isVisible()
    assert editor.fault.text().startswith(sentence)
    QTest.keyClick(editor.text, Qt.Key.Key_Escape)
    assert editor.text.toPlainText() == "gain exp(-delay s) / (lag s + 1)"
    assert editor.fault.isHidden()
    assert editor.text.marked_characters() == []


def test_typing_a_formula_is_one_step(plant_page: PlantPage, document: Document) -> None:
    """What was taken while it was typed is undone at once."""
    editor = formula_editor(plant_page)
    replace_text(editor.text, "gain / (lag s + 1)")
    editor.text.intake.commit()
    replace_text(editor.text, "gain / (lag s + 2)")
    QTest.keyClick(editor.text, Qt.Key.Key_Return)
    document.undo()
    assert document.sheet == wash_bath()
    assert editor.text.toPlainText() == "gain exp(-delay s) / (lag s + 1)"

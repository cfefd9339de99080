"""The page of the plant: five forms, converted into one another and undone."""

from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window.editors.finding import formula_editor, number_editor
from tests.window.editors.typing import choose, enter, replace_text
from tuner.model.plant import ExpressionPlant
from tuner.session.document import Document
from tuner.window.editors.intake import PAUSE
from tuner.window.editors.number_editors import NumberEditor
from tuner.window.editors.panel import EditorPanel
from tuner.window.editors.plant_page import PlantPage


def test_going_round_the_forms_brings_the_formula_back(plant_page: PlantPage, document: Document) -> None:
    """Looking at every form changes nothing in the one typed."""
    for word in ("Coefficients", "Zeros and poles", "State space", "Physics", "Formula"):
        choose(plant_page.form, word)
        QApplication.processEvents()
    assert document.sheet == wash_bath()
    assert formula_editor(plant_page).text.toPlainText() == "gain exp(-delay s) / (lag s + 1)"


def test_the_formula_typed_before_is_offered(plant_page: PlantPage, document: Document) -> None:
    """After other numbers the formula is theirs, and a button brings back the one typed."""
    enter(number_editor(plant_page, "Coefficients").fields["denominator"].line, "1 5")
    choose(plant_page.form, "Formula")
    assert document.sheet.plant == ExpressionPlant("0.016 exp(-4 s) / (s + 5)")
    assert plant_page.bring_back.isVisible()
    plant_page.bring_back.click()
    assert document.sheet == wash_bath()
    assert plant_page.bring_back.isHidden()


def test_undo_takes_a_form_away_under_the_hand(panel: EditorPanel, document: Document, qtbot: QtBot) -> None:
    """Undo of a switch of forms stays undone, and text typed in the other form waits there."""
    document.set_plant_form("coefficients")
    panel.select("Plant")
    editor = panel.plant.editors["coefficients"]
    assert isinstance(editor, NumberEditor)
    line = editor.fields["denominator"].line
    replace_text(line, "1 7")
    qtbot.waitUntil(line.hasFocus)
    document.undo()
    qtbot.wait(2 * PAUSE)
    assert document.sheet == wash_bath()
    document.redo()
    assert line.typed() == "1 7"

"""The plant as plain numbers: coefficients, zeros and poles, matrices."""

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest

from tests.window.editors.finding import number_editor
from tests.window.editors.typing import enter
from tuner.model.drifts import parameters_of
from tuner.model.family import family_of
from tuner.model.plant import CoefficientPlant, StateSpacePlant, ZeroPolePlant
from tuner.session.document import Document
from tuner.window.editors.plant_page import PlantPage


def test_coefficients_are_typed(plant_page: PlantPage, document: Document) -> None:
    """Converted from the formula first, then changed; the dead time has its unit."""
    editor = number_editor(plant_page, "Coefficients")
    assert [field.line.typed() for field in editor.fields.values()] == ["0.016", "1  0.02", "4", ""]
    assert editor.fields["dead_time"].unit.text() == "s"
    enter(editor.fields["denominator"].line, "1, 3, 2")
    enter(editor.fields["dead_time"].line, "")
    assert document.sheet.plant == CoefficientPlant((0.016,), (1.0, 3.0, 2.0), 0.0)


def test_numbers_that_only_fit_together_wait_for_one_another(plant_page: PlantPage, document: Document) -> None:
    """A numerator too long for the denominator waits with a sentence, and is taken with the longer denominator."""
    editor = number_editor(plant_page, "Coefficients")
    enter(editor.fields["numerator"].line, "1 2 3")
    assert editor.fields["numerator"].fault.isVisible()
    assert document.sheet.plant == CoefficientPlant((0.016,), (1.0, 0.02), 4.0)
    enter(editor.fields["denominator"].line, "1 4 5 6")
    assert document.sheet.plant == CoefficientPlant((1.0, 2.0, 3.0), (1.0, 4.0, 5.0, 6.0), 4.0)
    assert editor.fields["numerator"].fault.isHidden()


def test_zeros_and_poles_are_typed(plant_page: PlantPage, document: Document) -> None:
    """Pairs by ±; a lonely complex pole is refused with what to write."""
    editor = number_editor(plant_page, "Zeros and poles")
    enter(editor.fields["poles"].line, "-1 ± 2j; -3")
    enter(editor.fields["zeros"].line, "-5")
    enter(editor.fields["gain"].line, "-2")
    plant = ZeroPolePlant((-5 + 0j,), (-1 + 2j, -1 - 2j, -3 + 0j), -2.0, 4.0)
    assert document.sheet.plant == plant
    enter(editor.fields["poles"].line, "-1 + 2j")
    assert document.sheet.plant == plant
    assert editor.fields["poles"].fault.text().endswith('write "-1 ± 2j" for both')


def test_matrices_are_typed_in_any_order(plant_page: PlantPage, document: Document) -> None:
    """A larger state matrix waits for its columns; rows are lines."""
    editor = number_editor(plant_page, "State space")
    matrix = editor.fields["a"].line
    matrix.setFocus()
    matrix.selectAll()
    QTest.keyClicks(matrix, "0 1")
    QTest.keyClick(matrix, Qt.Key.Key_Return)
    QTest.keyClicks(matrix, "-2 -0.5")
    editor.fields["b"].line.setFocus()
    editor.fields["a"].intake.commit()
    assert editor.fields["a"].fault.isVisible()
    enter(editor.fields["b"].line, "0 1")
    enter(editor.fields["c"].line, "1 0")
    assert document.sheet.plant == StateSpacePlant(((0.0, 1.0), (-2.0, -0.5)), (0.0, 1.0), (1.0, 0.0), 0.0, 4.0)
    assert all(field.fault.isHidden() for field in editor.fields.values())


def test_the_spread_of_bare_numbers_is_typed(plant_page: PlantPage, document: Document) -> None:
    """A line each; the family drifts by it, other numbers keep it, a fault is a sentence, and undo takes it back."""
    editor = number_editor(plant_page, "Coefficients")
    spread = editor.fields["spread"]
    assert spread.line.accessibleName()
    enter(spread.line, "gain 15 %; dead time 3 to 6")
    assert [one.name for one in parameters_of(document.sheet.plant)] == ["gain", "dead time"]
    assert len(family_of(document.sheet, 9)) == 9
    enter(editor.fields["denominator"].line, "1, 3, 2")
    assert [one.name for one in parameters_of(document.sheet.plant)] == ["gain", "dead time"]
    enter(spread.line, "gain 15 %; denominator 7 10 %")
    assert "the nearest valid name is denominator" in spread.fault.text()
    assert [one.name for one in parameters_of(document.sheet.plant)] == ["gain", "dead time"]
    enter(spread.line, "")
    assert parameters_of(document.sheet.plant) == ()
    document.undo()
    assert [one.name for one in parameters_of(document.sheet.plant)] == ["gain", "dead time"]

"""The page of the plant: five forms, each typed, converted, refused in place and undone."""

from collections.abc import Iterator

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window.editors.typing import choose, enter, replace_text
from tuner.model.physics import PHYSICS
from tuner.model.plant import CoefficientPlant, ExpressionPlant, Spread, StateSpacePlant, ZeroPolePlant, spread_percent
from tuner.session.document import Document
from tuner.window.editors.formula_editor import FormulaEditor
from tuner.window.editors.number_editors import NumberEditor
from tuner.window.editors.physics_editor import PhysicsEditor
from tuner.window.editors.plant_page import PlantPage
from tuner.window.theme import Theme


@pytest.fixture
def page(qtbot: QtBot, document: Document, theme: Theme) -> Iterator[PlantPage]:
    """Return the page of the wash bath's plant, in sight, following the document."""
    page = PlantPage(document, theme)
    qtbot.addWidget(page)
    page.resize(320, 600)
    stop = document.listen(lambda: page.refresh(anew=False))
    page.refresh(anew=True)
    page.show()
    yield page
    stop()
    page.hide()


def _formula(page: PlantPage) -> FormulaEditor:
    editor = page.shown_editor()
    assert isinstance(editor, FormulaEditor)
    return editor


def _numbers(page: PlantPage, form: str) -> NumberEditor:
    choose(page.form, form)
    editor = page.shown_editor()
    assert isinstance(editor, NumberEditor)
    return editor


# The formula ----------------------------------------------------------------------------------------------------


def test_a_typed_formula_brings_its_parameters(page: PlantPage, document: Document, qtbot: QtBot) -> None:
    """After a short pause the formula is taken, a row stands for each name, an unused one is faded and comes back."""
    editor = _formula(page)
    replace_text(editor.text, "gain / ((lag s + 1)(tail s + 1))")
    qtbot.waitUntil(lambda: "tail" in editor.table.rows, timeout=5000)
    assert list(editor.table.rows) == ["gain", "lag", "tail", "delay"]
    assert [name for name, row in editor.table.rows.items() if row.is_faded] == ["delay"]
    enter(editor.text, "gain exp(-delay s) / (lag s + 1)")
    assert document.sheet == wash_bath()
    assert not any(row.is_faded for row in editor.table.rows.values())


def test_half_typed_names_leave_nothing_behind(page: PlantPage, document: Document) -> None:
    """Names that stood in the formula only while it was typed are no spare parameters."""
    editor = _formula(page)
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
    page: PlantPage, document: Document, text: str, position: int | None, sentence: str
) -> None:
    """The character to blame is underlined, a sentence stands below, the text and the last plant stay."""
    editor = _formula(page)
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


def test_typing_a_formula_is_one_step(page: PlantPage, document: Document) -> None:
    """What was taken while it was typed is undone at once."""
    editor = _formula(page)
    replace_text(editor.text, "gain / (lag s + 1)")
    editor.text.intake.commit()
    replace_text(editor.text, "gain / (lag s + 2)")
    QTest.keyClick(editor.text, Qt.Key.Key_Return)
    document.undo()
    assert document.sheet == wash_bath()
    assert editor.text.toPlainText() == "gain exp(-delay s) / (lag s + 1)"


# The parameters -------------------------------------------------------------------------------------------------


def test_parameters_are_typed_and_undone(page: PlantPage, document: Document) -> None:
    """Value, unit and spread of a parameter; a spread in percent goes along with the value."""
    row = _formula(page).table.rows["gain"]
    enter(row.value, "1,6")
    enter(row.unit, "K/%")
    gain = document.sheet.plant.parameters[0]
    assert (gain.value, gain.unit, gain.spread) == (1.6, "K/%", spread_percent(1.6, 20.0))
    enter(row.spread, "1 to 2")
    assert document.sheet.plant.parameters[0].spread == Spread(1.0, 2.0)
    enter(row.spread, "")
    assert document.sheet.plant.parameters[0].spread is None
    while document.undo_label:
        document.undo()
    assert document.sheet == wash_bath()
    assert (row.value.text(), row.unit.text(), row.spread.text()) == ("0.8", "degC/%", "20 %")


@pytest.mark.parametrize(
    ("name", "column", "text", "sentence"),
    [
        ("gain", "value", "much", 'Expected a number, found "much"'),
        ("delay", "spread", "5 to 6", 'Expected a spread that holds the value 4, found "5 to 6"'),
        ("delay", "value", "9", "Spread: expected a range that contains the value 9, found [3, 6]"),
    ],
)
def test_wrong_parameters_say_why_in_place(page: PlantPage, name: str, column: str, text: str, sentence: str) -> None:
    """A sentence under the row, the text kept."""
    row = _formula(page).table.rows[name]
    line = row.value if column == "value" else row.spread
    enter(line, text)
    assert line.text() == text
    assert row.fault.isVisible()
    assert row.fault.text() == sentence


def test_the_numbers_of_an_unused_parameter_can_be_typed(page: PlantPage, document: Document) -> None:
    """A faded row keeps what is typed into it until the formula uses it again."""
    editor = _formula(page)
    enter(editor.text, "gain / (lag s + 1)")
    enter(editor.table.rows["delay"].value, "5")
    enter(editor.text, "gain exp(-delay s) / (lag s + 1)")
    assert {one.name: one.value for one in document.sheet.plant.parameters}["delay"] == 5.0


# Numbers --------------------------------------------------------------------------------------------------------


def test_coefficients_are_typed(page: PlantPage, document: Document) -> None:
    """Converted from the formula first, then changed; the dead time has its unit."""
    editor = _numbers(page, "Coefficients")
    assert [field.line.typed() for field in editor.fields.values()] == ["0.016", "1  0.02", "4"]
    assert editor.fields["dead_time"].unit.text() == "s"
    enter(editor.fields["denominator"].line, "1, 3, 2")
    enter(editor.fields["dead_time"].line, "")
    assert document.sheet.plant == CoefficientPlant((0.016,), (1.0, 3.0, 2.0), 0.0)


def test_numbers_that_only_fit_together_wait_for_one_another(page: PlantPage, document: Document) -> None:
    """A numerator too long for the denominator waits with a sentence, and is taken with the longer denominator."""
    editor = _numbers(page, "Coefficients")
    enter(editor.fields["numerator"].line, "1 2 3")
    assert editor.fields["numerator"].fault.isVisible()
    assert document.sheet.plant == CoefficientPlant((0.016,), (1.0, 0.02), 4.0)
    enter(editor.fields["denominator"].line, "1 4 5 6")
    assert document.sheet.plant == CoefficientPlant((1.0, 2.0, 3.0), (1.0, 4.0, 5.0, 6.0), 4.0)
    assert editor.fields["numerator"].fault.isHidden()


def test_zeros_and_poles_are_typed(page: PlantPage, document: Document) -> None:
    """Pairs by ±; a lonely complex pole is refused with what to write."""
    editor = _numbers(page, "Zeros and poles")
    enter(editor.fields["poles"].line, "-1 ± 2j; -3")
    enter(editor.fields["zeros"].line, "-5")
    enter(editor.fields["gain"].line, "-2")
    plant = ZeroPolePlant((-5 + 0j,), (-1 + 2j, -1 - 2j, -3 + 0j), -2.0, 4.0)
    assert document.sheet.plant == plant
    enter(editor.fields["poles"].line, "-1 + 2j")
    assert document.sheet.plant == plant
    assert editor.fields["poles"].fault.text().endswith('write "-1 ± 2j" for both')


def test_matrices_are_typed_in_any_order(page: PlantPage, document: Document) -> None:
    """A larger state matrix waits for its columns; rows are lines."""
    editor = _numbers(page, "State space")
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


# Physics --------------------------------------------------------------------------------------------------------


def test_a_physical_model_is_chosen_and_given(page: PlantPage, document: Document) -> None:
    """The chooser names every model; its balance, quantities with units and formula are shown."""
    choose(page.form, "Physics")
    editor = page.shown_editor()
    assert isinstance(editor, PhysicsEditor)
    assert page.remark.text().startswith("Not converted")
    assert [editor.model.itemText(index) for index in range(editor.model.count())] == list(PHYSICS)
    name = list(PHYSICS)[-1]
    choose(editor.model, name)
    model = PHYSICS[name]
    assert editor.sentence.text() == model.sentence
    assert editor.formula.text() == f"Formula: {model.expression}"
    assert list(editor.table.rows) == [quantity.name for quantity in model.parameters]
    first = model.parameters[0]
    row = editor.table.rows[first.name]
    assert (row.unit.text(), row.toolTip()) == (first.unit, first.sentence)
    enter(row.value, "0.5")
    assert document.sheet.plant.parameters[0].value == 0.5


def test_a_quantity_below_its_smallest_value_is_refused(page: PlantPage, document: Document) -> None:
    """A negative resistance makes no model."""
    choose(page.form, "Physics")
    editor = page.shown_editor()
    assert isinstance(editor, PhysicsEditor)
    row = editor.table.rows["resistance"]
    before = document.sheet
    enter(row.value, "-1")
    assert document.sheet == before
    assert row.fault.text() == "Expected a number above 0, drift included, found -1"
    assert not row.fault.isHidden()


# Between the forms ----------------------------------------------------------------------------------------------


def test_going_round_the_forms_brings_the_formula_back(page: PlantPage, document: Document) -> None:
    """Looking at every form changes nothing in the one typed."""
    for word in ("Coefficients", "Zeros and poles", "State space", "Physics", "Formula"):
        choose(page.form, word)
        QApplication.processEvents()
    assert document.sheet == wash_bath()
    assert _formula(page).text.toPlainText() == "gain exp(-delay s) / (lag s + 1)"


def test_the_formula_typed_before_is_offered(page: PlantPage, document: Document) -> None:
    """After other numbers the formula is theirs, and a button brings back the one typed."""
    enter(_numbers(page, "Coefficients").fields["denominator"].line, "1 5")
    choose(page.form, "Formula")
    assert document.sheet.plant == ExpressionPlant("0.016 exp(-4 s) / (s + 5)")
    assert page.bring_back.isVisible()
    page.bring_back.click()
    assert document.sheet == wash_bath()
    assert page.bring_back.isHidden()

"""The table of the plant's parameters: typed, refused in place, faded, and seen whole."""

import pytest

from tests.session.sheets import wash_bath
from tests.window.editors.finding import (
    formula_editor,
)
from tests.window.editors.typing import enter
from tuner.model.plant import Spread, spread_percent
from tuner.session.document import Document
from tuner.window.editors.plant_page import PlantPage


def test_parameters_are_typed_and_undone(plant_page: PlantPage, document: Document) -> None:
    """Value, unit and spread of a parameter; a spread in percent goes along with the value."""
    row = formula_editor(plant_page).table.rows["gain"]
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
def test_wrong_parameters_say_why_in_place(
    plant_page: PlantPage, name: str, column: str, text: str, sentence: str
) -> None:
    """A sentence under the row, the text kept."""
    row = formula_editor(plant_page).table.rows[name]
    line = row.value if column == "value" else row.spread
    enter(line, text)
    assert line.text() == text
    assert row.fault.isVisible()
    assert row.fault.text() == sentence


def test_the_numbers_of_an_unused_parameter_can_be_typed(plant_page: PlantPage, document: Document) -> None:
    """A faded row keeps what is typed into it until the formula uses it again."""
    editor = formula_editor(plant_page)
    enter(editor.text, "gain / (lag s + 1)")
    enter(editor.table.rows["delay"].value, "5")
    enter(editor.text, "gain exp(-delay s) / (lag s + 1)")
    assert {one.name: one.value for one in document.sheet.plant.parameters}["delay"] == 5.0

"""The table of the plant's parameters: typed, refused in place, faded, and seen whole."""

from dataclasses import replace

import pytest
from PySide6.QtCore import QPoint
from PySide6.QtWidgets import QLabel
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window.editors.finding import (
    formula_editor,
)
from tests.window.editors.typing import enter
from tuner.files.sheet import read
from tuner.model.plant import ExpressionPlant, Spread, spread_percent
from tuner.places import sample_plants
from tuner.session.document import Document
from tuner.window.editors import build_editors
from tuner.window.editors.parameter_table import ParameterTable
from tuner.window.editors.plant_page import PlantPage
from tuner.window.theme import Theme

SAMPLES = ("spindle_speed", "two_mass_drive", "chiller", "heater", "levitation", "web_tension", "tank_level")


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


@pytest.mark.parametrize("width", [300, 320, 340])
@pytest.mark.parametrize("name", SAMPLES)
def test_the_sample_plants_are_seen_whole(qtbot: QtBot, theme: Theme, name: str, width: int) -> None:
    """In a column of any usual width every name, value, unit and spread has the room that its text needs."""
    panel = build_editors(Document(read(sample_plants() / f"{name}.toml")), theme)
    qtbot.addWidget(panel)
    panel.resize(width, 700)
    panel.show()
    table = next(table for table in panel.plant.findChildren(ParameterTable) if table.isVisible())
    assert table.rows
    for row in table.rows.values():
        assert row.name.width() >= row.name.sizeHint().width()
        for line in (row.value, row.unit, row.spread):
            assert line.width() >= line.width_of_text(), line.accessibleName()
            assert line.height() >= line.sizeHint().height()
            assert row.rect().contains(line.geometry())


def test_columns_and_their_words_stand_under_one_another(plant_page: PlantPage) -> None:
    """The boxes of every row begin where the word above them does."""
    table = formula_editor(plant_page).table
    words = [label.mapTo(table, QPoint()).x() for label in table.head.findChildren(QLabel)]
    for row in table.rows.values():
        boxes = (row.value, row.unit, row.spread)
        assert [box.mapTo(table, QPoint()).x() for box in boxes] == words[1:]


def test_a_long_unit_puts_the_names_above(plant_page: PlantPage, document: Document) -> None:
    """What needs more room than a line has gets it at once; undo brings the one line back."""
    table = formula_editor(plant_page).table
    row = table.rows["gain"]
    beside = row.name.mapTo(table, QPoint()).y()
    assert row.value.mapTo(table, QPoint()).y() <= beside
    enter(row.unit, "m^3/(kg rad s^2) per mm")
    plant_page.settle()
    assert row.value.mapTo(table, QPoint()).y() > row.name.mapTo(table, QPoint()).y()
    assert row.unit.width() >= row.unit.width_of_text()
    document.undo()
    plant_page.settle()
    assert row.value.mapTo(table, QPoint()).y() <= row.name.mapTo(table, QPoint()).y() + 2


def test_rows_come_with_the_names_of_the_formula(plant_page: PlantPage) -> None:
    """A new name's row stands where the formula has it, and is in sight at once."""
    editor = formula_editor(plant_page)
    enter(editor.text, "gain / ((zeta s + 1)(lag s + 1))")
    assert list(editor.table.rows) == ["gain", "zeta", "lag", "delay"]
    plant_page.settle()
    tops = [row.mapTo(editor.table, QPoint()).y() for row in editor.table.rows.values()]
    assert all(row.isVisible() for row in editor.table.rows.values())
    assert tops == sorted(set(tops))


def test_a_plant_without_parameters_has_no_head(qtbot: QtBot, theme: Theme) -> None:
    """Words over no columns would say nothing."""
    document = Document(replace(wash_bath(), plant=ExpressionPlant("1 / (s + 1)")))
    table = ParameterTable(document, theme)
    qtbot.addWidget(table)
    table.refresh(anew=True)
    assert table.head.isHidden()
    document.change_formula("1 / (lag s + 1)")
    table.refresh(anew=False)
    assert not table.head.isHidden()

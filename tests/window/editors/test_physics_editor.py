"""The plant as a physical model."""

from tests.window.editors.finding import physics_editor
from tests.window.editors.typing import choose, enter
from tuner.model.physics import PHYSICS
from tuner.session.document import Document
from tuner.window.editors.plant_page import PlantPage


def test_a_physical_model_is_chosen_and_given(plant_page: PlantPage, document: Document) -> None:
    """The chooser names every model; its balance, quantities with units and formula are shown."""
    editor = physics_editor(plant_page)
    assert plant_page.remark.text().startswith("Not converted")
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


def test_a_quantity_below_its_smallest_value_is_refused(plant_page: PlantPage, document: Document) -> None:
    """A negative resistance makes no model."""
    editor = physics_editor(plant_page)
    row = editor.table.rows["resistance"]
    before = document.sheet
    enter(row.value, "-1")
    assert document.sheet == before
    assert row.fault.text() == "Expected a number above 0, drift included, found -1"
    assert not row.fault.isHidden()

"""What stands on the pages of the editors, found by what it is for."""

from typing import NamedTuple

from PySide6.QtWidgets import QPushButton

from tests.window.editors.typing import choose
from tuner.window.editors.field import Field, Page
from tuner.window.editors.formula_editor import FormulaEditor
from tuner.window.editors.number_editors import NumberEditor
from tuner.window.editors.panel import EditorPanel
from tuner.window.editors.parameter_field import NumberField, ParameterField, TextField
from tuner.window.editors.physics_editor import PhysicsEditor
from tuner.window.editors.plant_page import PlantPage
from tuner.window.editors.segments import Segments


class Edit(NamedTuple):
    """Something typed into the field of a key on the page of a block, and what comes of it."""

    block: str
    path: str
    text: str
    outcome: object


def parameter_fields(page: Page) -> list[ParameterField]:
    """Return the fields of a page that stand for keys of the table."""
    return [field for field in page.findChildren(Field) if isinstance(field, ParameterField)]


def field(panel: EditorPanel, block: str, path: str) -> ParameterField:
    """Return the field of a key on the page of a block, which is shown."""
    panel.select(block)
    return next(field for field in parameter_fields(panel.pages[block]) if field.path == path)


def typed_field(panel: EditorPanel, block: str, path: str) -> NumberField | TextField:
    """Return the field of a key that is typed."""
    found = field(panel, block, path)
    assert isinstance(found, NumberField | TextField)
    return found


def segments(page: Page, word: str) -> Segments:
    """Return the switch of a page that has a word."""
    return next(part for part in page.findChildren(Segments) if word in part.buttons)


def button(page: Page, word: str) -> QPushButton:
    """Return the button of a page that says a word."""
    return next(button for button in page.findChildren(QPushButton) if button.text() == word)


def formula_editor(page: PlantPage) -> FormulaEditor:
    """Return the editor of the formula, which is in sight."""
    editor = page.shown_editor()
    assert isinstance(editor, FormulaEditor)
    return editor


def number_editor(page: PlantPage, form: str) -> NumberEditor:
    """Choose a form of plain numbers and return its editor."""
    choose(page.form, form)
    editor = page.shown_editor()
    assert isinstance(editor, NumberEditor)
    return editor


def physics_editor(page: PlantPage) -> PhysicsEditor:
    """Choose a physical model and return its editor."""
    choose(page.form, "Physics")
    editor = page.shown_editor()
    assert isinstance(editor, PhysicsEditor)
    return editor

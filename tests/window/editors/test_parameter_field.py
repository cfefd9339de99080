"""Fields made from the table: taken, refused in place, undone."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication

from tests.session.sheets import wash_bath
from tests.window.editors import finding
from tests.window.editors.finding import (
    Edit,
    typed_field,
)
from tests.window.editors.typing import enter
from tuner.errors import Fault, SheetError
from tuner.model.parameters import Kind, find
from tuner.session.document import Document
from tuner.session.fields import value_at
from tuner.window.editors.panel import EditorPanel
from tuner.window.editors.parameter_field import BY_KIND, ChoiceField, FlagField

EDITS = [
    Edit("Loop", "loop.title", "Rinse bath", "Rinse bath"),
    Edit("Loop", "loop.story", "Rinses.", "Rinses."),
    Edit("Loop", "loop.controlled.unit", "K", "K"),
    Edit("Loop", "loop.controlled.low", "-10", -10.0),
    Edit("Loop", "loop.controlled.high", "", None),
    Edit("Loop", "loop.manipulated.resting", "25 %", 25.0),
    Edit("Loop", "loop.manipulated.rate", "", None),
    Edit("Actuator", "actuator.lag", "2", 2.0),
    Edit("Sensor", "sensor.lag", "1.5", 1.5),
    Edit("Sensor", "sensor.noise", "0,02", 0.02),
    Edit("Sensor", "sensor.resolution", "0.1", 0.1),
    Edit("Controller", "controller.sample_time", "0.5", 0.5),
    Edit("Controller", "controller.delay_samples", "2", 2),
    Edit("Filters", "controller.measurement_filter.time", "3", 3.0),
    Edit("Trial", "trial.reference", "-4", -4.0),
    Edit("Trial", "trial.disturbance", "10", 10.0),
    Edit("Trial", "trial.duration", "400", 400.0),
    Edit("Trial", "trial.settling_band", "5", 5.0),
]
REFUSED = [
    Edit("Loop", "loop.controlled.low", "200", "Expected a number below loop.controlled.high, 100, found 200"),
    Edit("Actuator", "actuator.lag", "-1", 'Expected a number of at least 0, found "-1"'),
    Edit("Controller", "controller.delay_samples", "1.5", "Expected a whole number of at least 0 and at most 1000"),
    Edit("Trial", "trial.duration", "0", 'Expected a number above 0, found "0"'),
    Edit("Trial", "trial.duration", "", "Expected a number above 0, found nothing"),
]


@pytest.mark.parametrize("edit", EDITS)
def test_typed_keys_are_taken_and_undone(panel: EditorPanel, document: Document, edit: Edit) -> None:
    """What is typed is what the sheet holds; undo brings the sheet and the text back."""
    field = typed_field(panel, edit.block, edit.path)
    before = field.line.typed()
    enter(field.line, edit.text)
    assert value_at(document.sheet, edit.path) == edit.outcome
    assert field.fault.isHidden()
    document.undo()
    assert document.sheet == wash_bath()
    assert field.line.typed() == before


@pytest.mark.parametrize("edit", REFUSED)
def test_refused_keys_say_why_in_place(panel: EditorPanel, document: Document, edit: Edit) -> None:
    """A sentence stands under the field, the text stays, the sheet stays."""
    field = typed_field(panel, edit.block, edit.path)
    enter(field.line, edit.text)
    assert document.sheet == wash_bath()
    assert field.line.typed() == edit.text
    assert field.fault.isVisible()
    assert field.fault.text().startswith(str(edit.outcome))


def test_choices_and_flags_are_taken_and_undone(panel: EditorPanel, document: Document) -> None:
    """Words and switches of the table."""
    unit = finding.field(panel, "Loop", "loop.time_unit")
    assert isinstance(unit, ChoiceField)
    QTest.mouseClick(unit.segments.buttons["min"], Qt.MouseButton.LeftButton)
    assert document.sheet.loop.time_unit == "min"
    document.undo()
    assert unit.segments.buttons["s"].isChecked()
    feedback = finding.field(panel, "Controller", "controller.feedback")
    assert isinstance(feedback, FlagField)
    QTest.keyClick(feedback.box, Qt.Key.Key_Space)
    assert not document.sheet.controller.feedback
    document.undo()
    assert feedback.box.isChecked()


def test_every_kind_of_value_has_a_field() -> None:
    """No kind of the table is without an editor."""
    assert set(BY_KIND) == set(Kind)


def test_units_follow_the_loop(panel: EditorPanel, document: Document) -> None:
    """A changed unit is beside the fields at once."""
    field = typed_field(panel, "Loop", "loop.controlled.low")
    enter(typed_field(panel, "Loop", "loop.controlled.unit").line, "K")
    assert field.unit.text() == "K"
    assert document.sheet.loop.controlled.unit == "K"


def test_typing_in_one_field_is_one_step(panel: EditorPanel, document: Document) -> None:
    """Several takes while a field is typed in are undone at once."""
    field = typed_field(panel, "Trial", "trial.duration")
    field.line.setFocus()
    for text in ("4", "40", "400"):
        field.line.selectAll()
        QTest.keyClicks(field.line, text)
        field.intake.commit()
    QTest.keyClick(field.line, Qt.Key.Key_Return)
    assert document.sheet.trial.duration == 400.0
    document.undo()
    assert document.sheet == wash_bath()


def test_sentences_are_those_of_the_table(panel: EditorPanel) -> None:
    """Each field explains itself in the words of the table."""
    field = finding.field(panel, "Sensor", "sensor.resolution")
    assert field.toolTip() == find("sensor.resolution").sentence


def test_a_refused_choice_says_why_and_stays(
    panel: EditorPanel, document: Document, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A word or a switch that the sheet may not have is refused in place, and shows what holds."""

    def refuse(*_args: object, **_keys: object) -> None:
        raise SheetError([Fault("loop.time_unit", "another unit", "this one")])

    monkeypatch.setattr(document, "edit", refuse)
    field = finding.field(panel, "Loop", "loop.time_unit")
    assert isinstance(field, ChoiceField)
    QTest.mouseClick(field.segments.buttons["min"], Qt.MouseButton.LeftButton)
    assert field.fault.text() == "Expected another unit, found this one"
    assert field.segments.buttons["s"].isChecked()
    flag = finding.field(panel, "Controller", "controller.feedback")
    assert isinstance(flag, FlagField)
    QTest.keyClick(flag.box, Qt.Key.Key_Space)
    assert flag.fault.text() == "loop.time_unit: expected another unit, found this one"
    assert flag.box.isChecked()


def test_a_story_is_one_line_however_it_was_pasted(panel: EditorPanel, document: Document) -> None:
    """The story has the whole width and some lines of room; line breaks of a paste become spaces."""
    field = typed_field(panel, "Loop", "loop.story")
    assert field.line.width() > panel.width() - 40
    QApplication.clipboard().setText("Rinses and dries,\nthen waits.")
    field.line.setFocus()
    field.line.selectAll()
    field.line.paste()
    QTest.keyClick(field.line, Qt.Key.Key_Return)
    assert document.sheet.loop.story == "Rinses and dries, then waits."
    assert field.line.typed() == "Rinses and dries, then waits."


def test_fields_are_named_by_their_place_in_the_sheet(panel: EditorPanel) -> None:
    """Two fields called low or unit are told apart by a screen reader."""
    names = [
        finding.field(panel, "Loop", f"loop.{signal}.low").control.accessibleName()
        for signal in ("controlled", "manipulated")
    ]
    assert names == ["loop controlled low", "loop manipulated low"]
    word = finding.field(panel, "Loop", "loop.time_unit")
    assert isinstance(word, ChoiceField)
    assert word.segments.buttons["min"].accessibleName() == "loop time unit: min"

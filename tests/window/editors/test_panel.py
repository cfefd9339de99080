"""The column of editors: every block can be chosen, edited and undone."""

from collections.abc import Iterator
from dataclasses import replace
from typing import NamedTuple

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QPushButton
from pytestqt.qtbot import QtBot

from tests.session.sheets import TEXT, wash_bath
from tests.window.editors.typing import enter, replace_text
from tuner.errors import Fault, SheetError
from tuner.model.parameters import Kind, find, in_section
from tuner.session.document import Document
from tuner.session.fields import value_at
from tuner.window.editors import build_editors
from tuner.window.editors.field import Field, Page
from tuner.window.editors.intake import PAUSE
from tuner.window.editors.number_editors import NumberEditor
from tuner.window.editors.panel import EditorPanel
from tuner.window.editors.parameter_field import ChoiceField, FlagField, NumberField, ParameterField, TextField
from tuner.window.editors.segments import Segments
from tuner.window.theme import Theme

BLOCKS = ["Loop", "Plant", "Actuator", "Sensor", "Controller", "Trial", "Limits"]


class Edit(NamedTuple):
    """Something typed into the field of a key on the page of a block, and what comes of it."""

    block: str
    path: str
    text: str
    outcome: object


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
    Edit("Controller", "controller.measurement_filter.time", "3", 3.0),
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


@pytest.fixture
def panel(qtbot: QtBot, document: Document, theme: Theme) -> Iterator[EditorPanel]:
    """Return the editors of the wash bath, in sight."""
    panel = build_editors(document, theme)
    qtbot.addWidget(panel)
    panel.resize(320, 700)
    panel.show()
    yield panel
    panel.hide()


def _field(panel: EditorPanel, block: str, path: str) -> ParameterField:
    panel.select(block)
    return next(field for field in _parameter_fields(panel.pages[block]) if field.path == path)


def _parameter_fields(page: Page) -> list[ParameterField]:
    return [field for field in page.findChildren(Field) if isinstance(field, ParameterField)]


def _typed_field(panel: EditorPanel, block: str, path: str) -> NumberField | TextField:
    field = _field(panel, block, path)
    assert isinstance(field, NumberField | TextField)
    return field


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
    found = {field.path for page in panel.pages.values() for field in _parameter_fields(page)}
    assert wanted <= found


@pytest.mark.parametrize("edit", EDITS)
def test_typed_keys_are_taken_and_undone(panel: EditorPanel, document: Document, edit: Edit) -> None:
    """What is typed is what the sheet holds; undo brings the sheet and the text back."""
    field = _typed_field(panel, edit.block, edit.path)
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
    field = _typed_field(panel, edit.block, edit.path)
    enter(field.line, edit.text)
    assert document.sheet == wash_bath()
    assert field.line.typed() == edit.text
    assert field.fault.isVisible()
    assert field.fault.text().startswith(str(edit.outcome))


def test_choices_and_flags_are_taken_and_undone(panel: EditorPanel, document: Document) -> None:
    """Words and switches of the table."""
    unit = _field(panel, "Loop", "loop.time_unit")
    assert isinstance(unit, ChoiceField)
    QTest.mouseClick(unit.segments.buttons["min"], Qt.MouseButton.LeftButton)
    assert document.sheet.loop.time_unit == "min"
    document.undo()
    assert unit.segments.buttons["s"].isChecked()
    feedback = _field(panel, "Controller", "controller.feedback")
    assert isinstance(feedback, FlagField)
    QTest.keyClick(feedback.box, Qt.Key.Key_Space)
    assert not document.sheet.controller.feedback
    document.undo()
    assert feedback.box.isChecked()


def test_every_kind_of_value_has_a_field() -> None:
    """No kind of the table is without an editor."""
    from tuner.window.editors.parameter_field import BY_KIND

    assert set(BY_KIND) == set(Kind)


def test_units_follow_the_loop(panel: EditorPanel, document: Document) -> None:
    """A changed unit is beside the fields at once."""
    field = _typed_field(panel, "Loop", "loop.controlled.low")
    enter(_typed_field(panel, "Loop", "loop.controlled.unit").line, "K")
    assert field.unit.text() == "K"
    assert document.sheet.loop.controlled.unit == "K"


def _segments(page: Page, word: str) -> Segments:
    return next(part for part in page.findChildren(Segments) if word in part.buttons)


@pytest.mark.parametrize(
    ("word", "edit"),
    [
        ("notch", Edit("Controller", "controller.notch.frequency", "0.7", 0.7)),
        ("notch", Edit("Controller", "controller.notch.depth", "0.2", 0.2)),
        ("notch", Edit("Controller", "controller.notch.width", "0.5", 0.5)),
        ("static", Edit("Controller", "controller.feedforward.gain", "0.4", 0.4)),
        ("inverse", Edit("Controller", "controller.feedforward.filter_time", "7", 7.0)),
    ],
)
def test_optional_blocks_come_and_go(panel: EditorPanel, document: Document, word: str, edit: Edit) -> None:
    """A block switched on has its fields, switched off it is gone from the sheet."""
    panel.select("Controller")
    switch = _segments(panel.pages["Controller"], word)
    QTest.mouseClick(switch.buttons[word], Qt.MouseButton.LeftButton)
    enter(_typed_field(panel, edit.block, edit.path).line, edit.text)
    assert value_at(document.sheet, edit.path) == edit.outcome
    QTest.mouseClick(switch.buttons["none"], Qt.MouseButton.LeftButton)
    assert document.sheet == wash_bath()
    document.undo()
    assert value_at(document.sheet, edit.path) == edit.outcome


def test_a_notch_above_nyquist_is_refused(panel: EditorPanel, document: Document) -> None:
    """What the reader of files would refuse is refused in the field."""
    panel.select("Controller")
    QTest.mouseClick(_segments(panel.pages["Controller"], "notch").buttons["notch"], Qt.MouseButton.LeftButton)
    before = document.sheet
    field = _typed_field(panel, "Controller", "controller.notch.frequency")
    enter(field.line, "50")
    assert document.sheet == before
    assert field.fault.text() == "Expected a frequency below pi / sample_time, 3.142, found 50"


def _button(page: Page, word: str) -> QPushButton:
    return next(button for button in page.findChildren(QPushButton) if button.text() == word)


def test_the_gains_as_found_are_noted_restored_and_forgotten(panel: EditorPanel, document: Document) -> None:
    """The controller's page notes the present gains, restores and forgets them."""
    panel.select("Controller")
    page = panel.pages["Controller"]
    _button(page, "Restore").click()
    assert document.sheet.controller.gain_1 == 1.5
    document.change_value("kp", 7.0)
    _button(page, "Note present").click()
    document.change_value("kp", 1.0)
    _button(page, "Restore").click()
    assert document.sheet.controller.gain_1 == 7.0
    _button(page, "Forget").click()
    assert document.sheet.controller.as_found is None
    assert not _button(page, "Restore").isEnabled()


def test_the_disturbance_path_is_a_formula(panel: EditorPanel, document: Document) -> None:
    """It is typed like the plant's, says its faults in place, and an empty one is none."""
    panel.select("Controller")
    path = panel.disturbance_path
    enter(path.text, "2 / (lag s + 1")
    assert path.fault.isVisible()
    assert document.sheet.controller.disturbance_feedforward is None
    enter(path.text, "2 / (lag s + 1)")
    assert document.sheet.controller.disturbance_feedforward is not None
    assert path.fault.isHidden()
    enter(path.text, "")
    assert document.sheet == wash_bath()


def test_pages_out_of_sight_follow_when_they_are_shown(panel: EditorPanel, document: Document) -> None:
    """A change made while another page was shown is there when the page is."""
    document.change(replace(document.sheet, trial=replace(document.sheet.trial, duration=123.0)), label="Set it")
    assert _typed_field(panel, "Trial", "trial.duration").line.typed() == "123"


def test_another_sheet_forgets_what_was_typed(panel: EditorPanel, document: Document) -> None:
    """Wrong text goes with the sheet that it was typed for."""
    field = _typed_field(panel, "Trial", "trial.duration")
    enter(field.line, "x")
    document.start(wash_bath(), TEXT)
    assert field.line.typed() == "300"
    assert field.fault.isHidden()


def test_typing_in_one_field_is_one_step(panel: EditorPanel, document: Document) -> None:
    """Several takes while a field is typed in are undone at once."""
    field = _typed_field(panel, "Trial", "trial.duration")
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
    field = _field(panel, "Sensor", "sensor.resolution")
    assert field.toolTip() == find("sensor.resolution").sentence


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


def test_a_refused_choice_says_why_and_stays(
    panel: EditorPanel, document: Document, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A word or a switch that the sheet may not have is refused in place, and shows what holds."""

    def refuse(*_args: object, **_keys: object) -> None:
        raise SheetError([Fault("loop.time_unit", "another unit", "this one")])

    monkeypatch.setattr(document, "edit", refuse)
    field = _field(panel, "Loop", "loop.time_unit")
    assert isinstance(field, ChoiceField)
    QTest.mouseClick(field.segments.buttons["min"], Qt.MouseButton.LeftButton)
    assert field.fault.text() == "Expected another unit, found this one"
    assert field.segments.buttons["s"].isChecked()
    flag = _field(panel, "Controller", "controller.feedback")
    assert isinstance(flag, FlagField)
    QTest.keyClick(flag.box, Qt.Key.Key_Space)
    assert flag.fault.text() == "loop.time_unit: expected another unit, found this one"
    assert flag.box.isChecked()


def test_undo_takes_a_block_away_under_the_hand(panel: EditorPanel, document: Document, qtbot: QtBot) -> None:
    """Undo while a field is typed in removes the block for good: what was half typed does not bring it back."""
    panel.select("Controller")
    QTest.mouseClick(_segments(panel.pages["Controller"], "notch").buttons["notch"], Qt.MouseButton.LeftButton)
    field = _typed_field(panel, "Controller", "controller.notch.depth")
    replace_text(field.line, "0.3")
    qtbot.waitUntil(field.line.hasFocus)
    document.undo()
    qtbot.wait(2 * PAUSE)
    assert document.sheet == wash_bath()


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

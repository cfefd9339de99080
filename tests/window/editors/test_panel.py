"""The column of editors: every block can be chosen, reached by keys, and read."""

from dataclasses import replace

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QAbstractButton, QApplication, QLineEdit, QScrollArea, QWidget
from pytestqt.qtbot import QtBot

from tests.session.sheets import TEXT, wash_bath
from tests.window.editors.finding import (
    formula_editor,
    parameter_fields,
    segments,
    typed_field,
)
from tests.window.editors.typing import choose, enter
from tuner.model.parameters import in_section
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.session.plant_forms import PLANT_FORMS
from tuner.window.editors import build_editors
from tuner.window.editors.panel import EditorPanel
from tuner.window.tab_order import stops
from tuner.window.theme import Theme

BLOCKS = ["Loop", "Plant", "Actuator", "Sensor", "Controller", "Feedforward", "Filters", "Trial", "Limits"]


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
    found = {field.path for page in panel.pages.values() for field in parameter_fields(page)}
    assert wanted <= found


def test_pages_out_of_sight_follow_when_they_are_shown(panel: EditorPanel, document: Document) -> None:
    """A change made while another page was shown is there when the page is."""
    document.change(replace(document.sheet, trial=replace(document.sheet.trial, duration=123.0)), label="Set it")
    assert typed_field(panel, "Trial", "trial.duration").line.typed() == "123"


def test_another_sheet_forgets_what_was_typed(panel: EditorPanel, document: Document) -> None:
    """Wrong text goes with the sheet that it was typed for."""
    field = typed_field(panel, "Trial", "trial.duration")
    enter(field.line, "x")
    document.start(wash_bath(), TEXT)
    assert field.line.typed() == "300"
    assert field.fault.isHidden()


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


def _focused() -> QWidget:
    widget = QApplication.focusWidget()
    assert widget is not None
    return widget


def _walked(steps: int, key: Qt.Key = Qt.Key.Key_Tab) -> list[str]:
    """Press Tab so often and return the names of what it led to."""
    names = []
    for _ in range(steps):
        QTest.keyClick(_focused(), key)
        names.append(_focused().accessibleName())
    return names


def test_tab_goes_down_the_page(panel: EditorPanel, document: Document, qtbot: QtBot) -> None:
    """From the list of the blocks through every control as it stands, those added meanwhile too, and back."""
    enter(formula_editor(panel.plant).text, "gain / ((zeta s + 1)(lag s + 1))")
    panel.blocks.setFocus()
    qtbot.waitUntil(panel.blocks.hasFocus)
    rows = [f"{what} of {name}" for name in ("gain", "zeta", "lag", "delay") for what in ("value", "unit", "spread")]
    assert _walked(14) == ["form of the plant", "formula of the plant", *rows]
    assert _walked(2, Qt.Key.Key_Backtab) == ["unit of delay", "value of delay"]
    assert document.sheet.plant.parameters[1].name == "zeta"


def test_tab_finds_the_fields_of_a_block_that_was_added(panel: EditorPanel, qtbot: QtBot) -> None:
    """The numbers of a notch come after its switch, not at the end of the window."""
    panel.select("Filters")
    notch = segments(panel.pages["Filters"], "notch").buttons["notch"]
    QTest.mouseClick(notch, Qt.MouseButton.LeftButton)
    notch.setFocus()
    qtbot.waitUntil(notch.hasFocus)
    names = ["frequency", "depth", "width"]
    assert _walked(3) == [f"controller notch {name}" for name in names]


def test_everything_that_takes_the_focus_has_a_name(panel: EditorPanel, document: Document) -> None:
    """Every control of every page, in every form of the plant, is named, and no two of a page alike."""
    for form in PLANT_FORMS:
        document.set_plant_form(form)
        for block in BLOCKS:
            panel.select(block)
            names = [_name(stop) for stop in stops(panel.pages[block].column) if stop.isVisible()]
            assert names
            assert all(names), f"{block}, {form}: {names}"
            assert len(names) == len(set(names)), f"{block}, {form}: {names}"


def _name(stop: QWidget) -> str:
    return stop.accessibleName() or (stop.text() if isinstance(stop, QAbstractButton) else "")


def test_a_long_title_is_kept_whole(panel: EditorPanel, document: Document) -> None:
    """A hundred characters are taken, do not widen the page, and show their beginning."""
    title = ("Rinse bath of the second wash line behind the furnace " * 2)[:100]
    field = typed_field(panel, "Loop", "loop.title")
    width = panel.pages["Loop"].width()
    enter(field.line, title)
    assert document.sheet.loop.title == title
    QApplication.processEvents()
    assert panel.pages["Loop"].width() == width <= panel.width()
    assert isinstance(field.line, QLineEdit)
    assert field.line.width_of_text() > field.line.width()
    document.undo()
    assert field.line.text() == "Wash bath"


def test_twelve_parameters_scroll(panel: EditorPanel, document: Document, qtbot: QtBot) -> None:
    """A plant of many parameters can be walked to the last one by keys, which is in sight then."""
    panel.resize(300, 348)
    lags = [f"lag_number_{index}" for index in range(11)]
    document.change_formula(f"gain / ({' '.join(f'({lag} s + 1)' for lag in lags)})")
    table = formula_editor(panel.plant).table
    assert list(table.rows)[:12] == ["gain", *lags]
    (area,) = (area for area in panel.findChildren(QScrollArea) if area.isVisible())
    QApplication.processEvents()
    assert area.verticalScrollBar().maximum() > 0
    last = table.rows[lags[-1]].spread
    formula_editor(panel.plant).text.setFocus()
    qtbot.waitUntil(formula_editor(panel.plant).text.hasFocus)
    _walked(36)
    assert last.hasFocus()
    corner = last.mapTo(area.viewport(), last.rect().bottomRight())
    assert area.viewport().rect().contains(corner)


def test_each_kind_of_edit_of_the_plant_is_one_step(panel: EditorPanel, document: Document) -> None:
    """Formula, value, unit, spread and form are each taken back by one undo, and say what it takes back."""
    editor = formula_editor(panel.plant)
    row = editor.table.rows["gain"]
    sheets: list[tuple[str, Sheet]] = []

    def done(label: str) -> None:
        assert document.undo_label == label
        sheets.append((label, document.sheet))

    enter(editor.text, "gain / (lag s + 1)")
    done("Change the formula")
    enter(row.value, "0.9")
    done("Set the value of gain")
    enter(row.unit, "K/%")
    done("Set the unit of gain")
    enter(row.spread, "0.5 to 2")
    done("Set the spread of gain")
    choose(panel.plant.form, "State space")
    done("Give the plant as state space")
    while sheets:
        label, sheet = sheets.pop()
        assert (document.undo_label, document.sheet) == (label, sheet)
        document.undo()
    assert document.sheet == wash_bath()
    assert document.undo_label is None

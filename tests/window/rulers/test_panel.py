"""The rulers of a document, moved and typed."""

from collections.abc import Iterator

import numpy as np
import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.session.sheets import TEXT, wash_bath
from tuner.session.document import Document
from tuner.window.rulers import build_rulers
from tuner.window.rulers.panel import TWO_COLUMNS, RulerPanel
from tuner.window.rulers.ruler import Ruler
from tuner.window.rulers.slider import TRACK_TOP
from tuner.window.rulers.strip import FIRM
from tuner.window.theme import Theme


@pytest.fixture
def panel(qtbot: QtBot, document: Document, theme: Theme) -> Iterator[RulerPanel]:
    """Return the panel of the wash bath, in sight."""
    panel = build_rulers(document, theme)
    qtbot.addWidget(panel)
    panel.resize(900, 360)
    panel.show()
    QApplication.processEvents()
    yield panel
    panel.hide()


def _drag(ruler: Ruler, start: float, end: float) -> None:
    slider = ruler.slider
    height = slider.height() // 2
    xs = [round(slider.x_of(value)) for value in (start, end)]
    QTest.mousePress(slider, Qt.MouseButton.LeftButton, pos=QPoint(xs[0], height))
    for step in range(1, 6):
        QTest.mouseMove(slider, QPoint(xs[0] + (xs[1] - xs[0]) * step // 5, height))
        QApplication.processEvents()
    QTest.mouseRelease(slider, Qt.MouseButton.LeftButton, pos=QPoint(xs[1], height))


def _type(ruler: Ruler, text: str, *, enter: bool = True) -> None:
    ruler.box.setFocus()
    ruler.box.selectAll()
    QTest.keyClicks(ruler.box, text)
    if enter:
        QTest.keyClick(ruler.box, Qt.Key.Key_Return)


def test_there_is_a_ruler_for_every_parameter_of_the_form(panel: RulerPanel, document: Document) -> None:
    """The rulers are those that the table of parameters gives for the form, and follow it."""
    assert list(panel.rulers) == ["kp", "ki", "kd", "filter_time", "b", "c", "windup_time"]
    weight = panel.rulers["b"]
    document.set_form("standard")
    assert list(panel.rulers) == ["kc", "ti", "td", "filter_time", "b", "c", "windup_time"]
    assert panel.rulers["b"] is weight


def test_a_drag_is_one_step_and_tells_of_the_hand(panel: RulerPanel, document: Document) -> None:
    """A drag changes the gain all along, is undone whole, and starts and finishes once."""
    heard: list[str] = []
    panel.dragging_started.connect(lambda: heard.append("started"))
    panel.dragging_finished.connect(lambda: heard.append("finished"))
    values: list[float] = []
    document.listen(lambda: values.append(document.sheet.controller.gain_1))
    _drag(panel.rulers["kp"], 3.0, 20.0)
    assert heard == ["started", "finished"]
    assert len(set(values)) >= 4
    assert document.sheet.controller.gain_1 == pytest.approx(20.0, rel=0.02)
    assert panel.rulers["kp"].box.text() == f"{document.sheet.controller.gain_1:g}"
    document.undo()
    assert document.sheet == wash_bath()


@pytest.mark.parametrize(
    ("name", "text", "value"),
    [
        ("kp", "1.5", 1.5),
        ("kp", "1,5", 1.5),
        ("kp", "2e-3", 2e-3),
        ("kp", "2.5 %/degC", 2.5),
        ("kp", "3.00000123", 3.00000123),
        ("kd", "off", 0.0),
        ("windup_time", "off", None),
        ("windup_time", "30 s", 30.0),
    ],
)
def test_typed_values_are_taken_exactly(
    panel: RulerPanel, document: Document, name: str, text: str, value: float | None
) -> None:
    """Enter takes what was typed to the last digit; undo takes it back."""
    _type(panel.rulers[name], text)
    assert document.sheet.controller.value(name) == value
    document.undo()
    assert document.sheet == wash_bath()


@pytest.mark.parametrize(
    ("name", "text", "sentence"),
    [
        (
            "kp",
            "-2",
            'kp is never negative; for a plant whose output falls with the effort, choose the action "direct"',
        ),
        ("kp", "fast", 'expected a number of at least 0, found "fast"'),
        ("windup_time", "0", 'expected a number above 0, found "0"'),
        ("filter_time", "2 min", 'expected the unit s or nothing behind the number, found "min"'),
    ],
)
def test_refused_text_stays_with_a_sentence(
    panel: RulerPanel, document: Document, name: str, text: str, sentence: str
) -> None:
    """What cannot be taken stays in the box, says why under it, and the loop stays as it is; Escape reverts."""
    ruler = panel.rulers[name]
    before = ruler.box.text()
    _type(ruler, text)
    assert document.sheet == wash_bath()
    assert ruler.box.text() == text
    assert panel.fault_in_sight() == sentence
    QTest.keyClick(ruler.box, Qt.Key.Key_Escape)
    assert ruler.box.text() == before
    assert panel.fault_in_sight() == ""


def test_refused_text_outlives_other_changes(panel: RulerPanel) -> None:
    """What was typed wrong in one box stays while another ruler is moved."""
    _type(panel.rulers["ki"], "0.0.5")
    _drag(panel.rulers["kp"], 3.0, 5.0)
    assert panel.rulers["ki"].box.text() == "0.0.5"


def test_another_sheet_forgets_what_was_typed(panel: RulerPanel, document: Document) -> None:
    """Text typed for one sheet does not stand in the next one's box."""
    _type(panel.rulers["ki"], "0.0.5")
    document.start(wash_bath(), TEXT)
    assert panel.rulers["ki"].box.text() == "0.05"
    assert panel.fault_in_sight() == ""


def test_a_double_click_resets_in_one_step(panel: RulerPanel, document: Document) -> None:
    """A double click brings the value as opened; the jump of its first click leaves no step."""
    document.change_value("kp", 9.0)
    slider = panel.rulers["kp"].slider
    place = QPoint(round(slider.x_of(50.0)), slider.height() // 2)
    QTest.mouseClick(slider, Qt.MouseButton.LeftButton, pos=place)
    QTest.mouseDClick(slider, Qt.MouseButton.LeftButton, pos=place)
    assert document.sheet.controller.gain_1 == 3.0
    document.undo()
    assert document.sheet.controller.gain_1 == 9.0


def test_keys_held_are_one_step(panel: RulerPanel, document: Document) -> None:
    """Three repeats of a key are undone at once."""
    slider = panel.rulers["kp"].slider
    slider.setFocus()
    for _ in range(3):
        QTest.keyPress(slider, Qt.Key.Key_Right)
    QTest.keyRelease(slider, Qt.Key.Key_Right)
    assert document.sheet.controller.gain_1 == pytest.approx(3.0 * 1.01**3, rel=1e-3)
    document.undo()
    assert document.sheet == wash_bath()


def test_backspace_resets(panel: RulerPanel, document: Document) -> None:
    """Backspace on a slider brings the value as opened."""
    document.change_value("kp", 9.0)
    QTest.keyClick(panel.rulers["kp"].slider, Qt.Key.Key_Backspace)
    assert document.sheet.controller.gain_1 == 3.0


def test_the_menu_resets_and_turns_off(panel: RulerPanel, document: Document) -> None:
    """The right click offers the values as opened and as found, typing, and off."""
    document.change_value("kp", 9.0)
    menu = panel.rulers["kp"].menu()
    words = [action.text() for action in menu.actions()]
    assert words == ["Reset to 3 (as opened)", "Reset to 1.5 (as found)", "Type a value", "Off"]
    for action, value in zip(menu.actions(), (3.0, 1.5, 1.5, 0.0), strict=True):
        action.trigger()
        assert document.sheet.controller.gain_1 == value
    assert [action.text() for action in panel.rulers["b"].menu().actions()][-1] == "Type a value"


def test_the_form_switch_converts_or_says_why(panel: RulerPanel, document: Document) -> None:
    """A form is chosen by a click; where the gains have none, a sentence says why and the choice stays."""
    QTest.mouseClick(panel.form.segments.buttons["standard"], Qt.MouseButton.LeftButton)
    assert document.sheet.controller.form == "standard"
    assert panel.rulers["ti"].box.text() == "60"
    document.change_value("td", 100.0)
    QTest.mouseClick(panel.form.segments.buttons["series"], Qt.MouseButton.LeftButton)
    assert document.sheet.controller.form == "standard"
    assert panel.form.segments.buttons["standard"].isChecked()
    assert panel.form.sentence.text().endswith("Ti = 60 is less than 4 Td = 400")
    document.undo()
    assert panel.form.sentence.text() == ""


def test_a_ruler_is_painted_by_its_own_classes(panel: RulerPanel, theme: Theme) -> None:
    """The classes given to one ruler paint its track and no other's."""
    panel.rulers["kp"].paint_classes(np.array([FIRM] * 64))
    colours = {}
    for name in ("kp", "ki"):
        slider = panel.rulers[name].slider
        colours[name] = slider.grab().toImage().pixelColor(slider.width() // 4, TRACK_TOP + 4)
    assert colours == {"kp": theme.colour("firm"), "ki": theme.colour("line")}


def test_units_and_names_come_from_the_table(panel: RulerPanel) -> None:
    """Each ruler has its unit in the loop's, the sentence of the table, and names for assistive technology."""
    ruler = panel.rulers["ki"]
    assert ruler.unit.text() == "%/(degC s)"
    assert ruler.toolTip() == "ki: Integral gain."
    assert ruler.slider.accessibleName() == "ki ruler"
    assert ruler.slider.accessibleDescription() == "0.05 %/(degC s). Integral gain."


@pytest.mark.parametrize(("width", "columns"), [(TWO_COLUMNS + 200, 2), (600, 1)])
def test_the_width_decides_on_the_columns(panel: RulerPanel, width: int, columns: int) -> None:
    """In a wide window gains and the rest stand side by side, in a narrow one under one another."""
    panel.resize(width, 400)
    QApplication.processEvents()
    lefts = {ruler.x() for ruler in panel.rulers.values()}
    assert len(lefts) == columns


def test_a_panel_that_is_gone_hears_nothing(document: Document, theme: Theme) -> None:
    """After a panel is deleted the document changes without it."""
    panel = build_rulers(document, theme)
    panel.deleteLater()
    QApplication.sendPostedEvents()
    QApplication.processEvents()
    document.change_value("kp", 5.0)
    assert document.sheet.controller.gain_1 == 5.0

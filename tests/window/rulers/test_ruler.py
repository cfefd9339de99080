"""One ruler: moved, typed, reset, and what it says."""

from dataclasses import replace

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QLabel, QWidget
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window.rulers.hands import drag, type_in
from tuner.model.parameters import rulers
from tuner.session.document import Document
from tuner.window.rulers.panel import RulerPanel
from tuner.window.rulers.ruler import BOX_WIDTH, Ruler
from tuner.window.theme import Theme


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
    type_in(panel.rulers[name], text)
    assert document.sheet.controller.value(name) == value
    document.undo()
    assert document.sheet == wash_bath()


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


def test_backspace_resets(panel: RulerPanel, document: Document) -> None:
    """Backspace on a slider brings the value as opened."""
    document.change_value("kp", 9.0)
    QTest.keyClick(panel.rulers["kp"].slider, Qt.Key.Key_Backspace)
    assert document.sheet.controller.gain_1 == 3.0


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


def test_units_and_names_come_from_the_table(panel: RulerPanel) -> None:
    """Each ruler has its unit in the loop's, the sentence of the table, and names for assistive technology."""
    ruler = panel.rulers["ki"]
    assert ruler.unit.text() == "%/(degC s)"
    assert ruler.toolTip() == "ki: Integral gain."
    assert ruler.slider.accessibleName() == "ki ruler"
    assert ruler.slider.accessibleDescription() == "0.05 %/(degC s). Integral gain."


def made(document: Document, theme: Theme, name: str) -> Ruler:
    """Return the ruler of a number of the controller."""
    (parameter,) = (one for one in rulers(document.sheet.controller.form) if one.name == name)
    return Ruler(document, parameter, theme)


def test_it_tells_of_the_hand_and_of_faults(qtbot: QtBot, document: Document, theme: Theme) -> None:
    """Grasp and letting go once for a drag; the name and the sentence of a fault, an empty one when it is put right."""
    ruler = made(document, theme, "kp")
    qtbot.addWidget(ruler)
    ruler.resize(700, 40)
    ruler.show()
    heard: list[object] = []
    ruler.grasped.connect(lambda: heard.append("grasped"))
    ruler.let_go.connect(lambda: heard.append("let go"))
    ruler.faulted.connect(lambda name, sentence: heard.append((name, sentence)))
    drag(ruler, 3.0, 5.0)
    assert heard == ["grasped", "let go"]
    type_in(ruler, "fast")
    type_in(ruler, "4")
    assert heard[2:] == [("kp", 'expected a number of at least 0, found "fast"'), ("kp", "")]


def test_an_absent_value_is_off(qtbot: QtBot, document: Document, theme: Theme) -> None:
    """Box and screen reader say off for a value that is not there, and nothing typed makes it absent again."""
    document.change_value("windup_time", None)
    ruler = made(document, theme, "windup_time")
    qtbot.addWidget(ruler)
    assert ruler.box.text() == "off"
    assert ruler.slider.accessibleDescription().startswith("off s.")
    for text in ("20", ""):
        type_in(ruler, text)
        assert document.sheet.controller.value("windup_time") == (float(text) if text else None)
        ruler.refresh()


def test_it_follows_the_document(qtbot: QtBot, document: Document, theme: Theme) -> None:
    """Value, handle and unit are those of the document at each refresh."""
    ruler = made(document, theme, "ki")
    qtbot.addWidget(ruler)
    place = ruler.slider.value()
    loop = replace(document.sheet.loop, time_unit="min")
    document.change(replace(document.sheet, loop=loop), label="Set the time unit")
    document.change_value("ki", 0.2)
    ruler.refresh()
    assert ruler.box.text() == "0.2"
    assert ruler.slider.value() > place
    assert ruler.unit.text() == "%/(degC min)"


def test_another_sheet_forgets_the_text_of_one_box(qtbot: QtBot, document: Document, theme: Theme) -> None:
    """Wrong text stays through a refresh, and goes when it is told to be forgotten."""
    ruler = made(document, theme, "kp")
    qtbot.addWidget(ruler)
    type_in(ruler, "3..")
    ruler.refresh()
    assert ruler.box.text() == "3.."
    ruler.forget_typing()
    assert ruler.box.text() == "3"


def test_the_symbol_has_its_index(qtbot: QtBot, document: Document, theme: Theme) -> None:
    """Letters after the first stand low; a single letter stands alone."""
    for name, symbol in (("kp", "<i>k</i><sub>p</sub>"), ("b", "<i>b</i>")):
        ruler = made(document, theme, name)
        qtbot.addWidget(ruler)
        assert symbol in [label.text() for label in ruler.findChildren(QLabel)]


def test_a_fault_is_said_under_the_box(qtbot: QtBot, document: Document, theme: Theme) -> None:
    """The place for it is the lower right corner of the box, on whatever it is said."""
    ground = QWidget()
    qtbot.addWidget(ground)
    ruler = made(document, theme, "kp")
    ruler.setParent(ground)
    ruler.setGeometry(20, 30, 700, 40)
    ground.show()
    place = ruler.below_box(ground)
    assert place.x() == 20 + ruler.box.x() + BOX_WIDTH - 1
    assert 30 < place.y() < 70


def test_the_menu_begins_typing(qtbot: QtBot, document: Document, theme: Theme) -> None:
    """Its second word selects what the box holds, so that the next key replaces it."""
    ruler = made(document, theme, "b")
    qtbot.addWidget(ruler)
    ruler.show()
    (action,) = (action for action in ruler.menu().actions() if action.text() == "Type a value")
    action.trigger()
    qtbot.waitUntil(ruler.box.hasFocus)
    QTest.keyClicks(ruler.box, "0.5")
    QTest.keyClick(ruler.box, Qt.Key.Key_Return)
    assert document.sheet.controller.value("b") == 0.5

"""The switch between the forms of the gains."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tuner.model.controller import Form
from tuner.session.document import Document
from tuner.window.rulers.form_switch import FormSwitch
from tuner.window.rulers.panel import RulerPanel
from tuner.window.theme import Theme


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


@pytest.fixture
def switch(qtbot: QtBot, document: Document, theme: Theme) -> FormSwitch:
    """Return the switch, in sight, following the document."""
    switch = FormSwitch(document, theme)
    qtbot.addWidget(switch)
    switch.show()
    document.listen(switch.refresh)
    return switch


@pytest.mark.parametrize("form", ["parallel", "standard"])
def test_the_form_of_the_document_is_chosen(switch: FormSwitch, document: Document, form: Form) -> None:
    """Whoever changes it, the switch shows the one form that holds, and undo goes back."""
    document.set_form("standard")
    document.set_form(form)
    assert [word for word, button in switch.segments.buttons.items() if button.isChecked()] == [form]


def test_arrows_choose_the_neighbour(switch: FormSwitch, document: Document, qtbot: QtBot) -> None:
    """The switch is one stop of the Tab key, and the arrows go through its words."""
    button = switch.segments.buttons["parallel"]
    button.setFocus()
    qtbot.waitUntil(button.hasFocus)
    QTest.keyClick(button, Qt.Key.Key_Right)
    assert document.sheet.controller.form == "standard"
    assert switch.segments.buttons["standard"].hasFocus()
    document.undo()
    assert document.sheet == wash_bath()


def test_a_refusal_goes_with_the_next_change(switch: FormSwitch, document: Document) -> None:
    """The reason stands beside the switch as a sentence until anything else happens."""
    document.set_form("standard")
    document.change_value("td", 100.0)
    assert not document.set_form("series")
    said = switch.sentence.text()
    assert said.endswith("Ti = 60 is less than 4 Td = 400")
    assert said[0].isupper()
    document.change_value("td", 1.0)
    assert switch.sentence.text() == ""


def test_its_words_are_named_for_assistive_technology(switch: FormSwitch) -> None:
    """Each word says what it is a choice of."""
    names = [button.accessibleName() for button in switch.segments.buttons.values()]
    assert names == [f"form of the gains: {form}" for form in ("parallel", "standard", "series")]

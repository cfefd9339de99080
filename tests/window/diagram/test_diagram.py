"""The loop diagram: blocks pressed, put in and taken out, both paths switched, everything by keyboard."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tests.session.sheets import wash_bath
from tests.window.answers import shown_of
from tuner.assess import assess
from tuner.errors import Fault, SheetError
from tuner.model.controller import Feedforward
from tuner.session.document import Document
from tuner.window.diagram.diagram import LoopDiagram
from tuner.window.diagram.layout import COMPACT, FULL
from tuner.window.diagram.parts import BlockPart
from tuner.window.theme import Theme


@pytest.fixture
def document() -> Document:
    """Return an open sheet."""
    return Document(wash_bath())


@pytest.fixture
def diagram(document: Document, theme: Theme, qtbot: QtBot) -> LoopDiagram:
    """Return a diagram in sight."""
    made = LoopDiagram(document, theme)
    made.resize(1400, FULL)
    qtbot.addWidget(made)
    made.show()
    qtbot.waitExposed(made)
    return made


def click(diagram: LoopDiagram, key: str) -> None:
    """Press a part by the mouse."""
    QTest.mouseClick(diagram.parts[key], Qt.MouseButton.LeftButton)


def test_a_block_asks_for_its_editors(diagram: LoopDiagram, qtbot: QtBot) -> None:
    """Its page and its key."""
    with qtbot.waitSignal(diagram.page_wanted, check_params_cb=lambda page, key: (page, key) == ("Plant", "plant")):
        click(diagram, "plant")


def test_a_plus_puts_the_block_in(diagram: LoopDiagram, document: Document, qtbot: QtBot) -> None:
    """As one step, and asks for its editors; Delete takes it out again, undo brings it back."""
    with qtbot.waitSignal(diagram.page_wanted, check_params_cb=lambda page, _key: page == "Filters"):
        click(diagram, "notch")
    assert document.sheet.controller.notch is not None
    assert document.undo_label == "Add the notch"
    QTest.keyClick(diagram.parts["notch"], Qt.Key.Key_Delete)
    assert document.sheet == wash_bath()
    document.undo()
    assert document.sheet.controller.notch is not None


def test_the_feedback_path_opens_and_closes(diagram: LoopDiagram, document: Document) -> None:
    """The switch shows how it stands, also after undo."""
    click(diagram, "switch_back")
    assert not document.sheet.controller.feedback
    assert diagram.parts["switch_back"].accessibleName() == "Feedback path, open: close it"
    document.undo()
    assert document.sheet.controller.feedback
    assert diagram.parts["switch_back"].accessibleName() == "Feedback path, closed: open it"


def test_the_feedforward_path_remembers_what_was_there(diagram: LoopDiagram, document: Document) -> None:
    """There is no switch without feedforward; opened and closed again, the same feedforward is back."""
    assert not diagram.parts["switch_forward"].isVisible()
    click(diagram, "feedforward")
    forward = document.sheet.controller.feedforward
    assert isinstance(forward, Feedforward)
    assert diagram.parts["switch_forward"].isVisible()
    click(diagram, "switch_forward")
    assert document.sheet.controller.feedforward is None
    assert diagram.parts["switch_forward"].isVisible()
    click(diagram, "switch_forward")
    assert document.sheet.controller.feedforward == forward


def test_what_cannot_be_is_said(
    diagram: LoopDiagram, document: Document, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A block that the sheet refuses is told of in its sentence, and nothing changes."""

    def refuse(*_: object, **__: object) -> None:
        raise SheetError([Fault("controller.notch.frequency", "a lower one", "50")], "")

    monkeypatch.setattr(document, "put_block", refuse)
    with qtbot.waitSignal(diagram.refused, check_params_cb=lambda words: "expected a lower one, found 50" in words):
        click(diagram, "notch")
    assert document.sheet == wash_bath()


def test_the_menu_of_a_block(diagram: LoopDiagram, document: Document) -> None:
    """Edit and remove for one that is there, add for one that is not."""
    part = diagram.parts["notch"]
    assert isinstance(part, BlockPart)
    for words in (["Add"], ["Edit", "Remove"]):
        menu = diagram.menu_of(part)
        assert [action.text() for action in menu.actions()] == words
        menu.actions()[-1].trigger()
    assert document.sheet == wash_bath()


def test_arrows_walk_along_the_signal(diagram: LoopDiagram, qtbot: QtBot) -> None:
    """To the right along the way forward, down to the way back."""
    diagram.activateWindow()
    diagram.parts["law"].setFocus()
    qtbot.waitUntil(diagram.parts["law"].hasFocus)
    for key, expected in ((Qt.Key.Key_Right, "limits"), (Qt.Key.Key_Right, "actuator"), (Qt.Key.Key_Right, "plant")):
        QTest.keyClick(diagram.focusWidget(), key)
        assert diagram.parts[expected].hasFocus()
    QTest.keyClick(diagram.focusWidget(), Qt.Key.Key_Down)
    assert diagram.parts["sensor"].hasFocus()


def test_every_part_has_a_name_of_its_own(diagram: LoopDiagram) -> None:
    """For assistive technology; the signals are told by the diagram itself."""
    seen = [part.accessibleName() for part in diagram.parts.values() if part.isVisible()]
    assert all(seen)
    assert len(seen) == len(set(seen))


def test_values_come_with_a_verdict_and_move_nothing(diagram: LoopDiagram, document: Document) -> None:
    """They are words at the signals; every part stays where it is."""
    places = {key: part.geometry() for key, part in diagram.parts.items()}
    assert diagram.words["u"].values == ()
    diagram.show_values(shown_of(document.sheet, assess(document.sheet, 5)))
    assert diagram.words["u"].values
    assert "peak" in diagram.accessibleDescription()
    assert {key: part.geometry() for key, part in diagram.parts.items()} == places


def test_it_takes_less_room_in_a_low_window(diagram: LoopDiagram, document: Document) -> None:
    """Without the values."""
    diagram.show_values(shown_of(document.sheet, assess(document.sheet, 5)))
    diagram.be_compact(compact=True)
    assert diagram.height() == COMPACT
    assert diagram.words["u"].values == ()
    diagram.be_compact(compact=False)
    assert diagram.height() == FULL


def test_both_themes_and_every_state_are_drawn(diagram: LoopDiagram, document: Document, theme: Theme) -> None:
    """Nothing fails, and what changes shows."""
    pictures = [diagram.grab().toImage()]
    click(diagram, "switch_back")
    pictures.append(diagram.grab().toImage())
    document.change_disturbance_path("1 / (lag s + 1)")
    pictures.append(diagram.grab().toImage())
    diagram.choose("plant")
    pictures.append(diagram.grab().toImage())
    theme.choose("dark")
    pictures.append(diagram.grab().toImage())
    theme.choose("light")
    assert all(one != other for place, one in enumerate(pictures) for other in pictures[:place])

"""What of the diagram can be pressed: by mouse, by Enter and Space, with names for assistive technology."""

import pytest
from PySide6.QtCore import QPointF, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QWidget
from pytestqt.qtbot import QtBot

from tuner.session.blocks import Block
from tuner.window.diagram.parts import BlockPart, SwitchPart
from tuner.window.theme import Theme

NOTCH = Block("notch", "Notch", "2.1 rad/s", there=True, page="Filters")


@pytest.fixture
def ground(qtbot: QtBot) -> QWidget:
    """Return a window to stand in."""
    widget = QWidget()
    widget.resize(200, 60)
    qtbot.addWidget(widget)
    widget.show()
    return widget


@pytest.fixture
def part(ground: QWidget, theme: Theme) -> BlockPart:
    """Return a block."""
    made = BlockPart(NOTCH, theme, ground)
    made.setGeometry(10, 10, 100, 32)
    made.show()
    return made


@pytest.mark.parametrize("key", [Qt.Key.Key_Return, Qt.Key.Key_Enter, Qt.Key.Key_Space])
def test_it_is_pressed_by_keys(part: BlockPart, qtbot: QtBot, key: Qt.Key) -> None:
    """As by the mouse."""
    with qtbot.waitSignal(part.clicked):
        QTest.keyClick(part, key)
    with qtbot.waitSignal(part.clicked):
        QTest.mouseClick(part, Qt.MouseButton.LeftButton)


def test_delete_takes_out_what_may_go(part: BlockPart, qtbot: QtBot) -> None:
    """Not a block that makes the loop, nor one that is not there."""
    with qtbot.waitSignal(part.removal_wanted):
        QTest.keyClick(part, Qt.Key.Key_Delete)
    for block in (
        Block("plant", "Plant", "", there=True, page="Plant", may_go=False),
        Block("notch", "Notch", "", there=False, page="Filters"),
    ):
        part.show_block(block, chosen=False, idle=False)
        with qtbot.assertNotEmitted(part.removal_wanted):
            QTest.keyClick(part, Qt.Key.Key_Delete)


def test_arrows_go_on(part: BlockPart, qtbot: QtBot) -> None:
    """They say their direction."""
    with qtbot.waitSignal(part.went, check_params_cb=lambda way: way == QPointF(1.0, 0.0)):
        QTest.keyClick(part, Qt.Key.Key_Right)


def test_names_follow_what_is_shown(part: BlockPart) -> None:
    """Name and tip are the sentence of the block."""
    assert part.accessibleName() == NOTCH.sentence()
    gone = Block("notch", "Notch", "", there=False, page="Filters")
    part.show_block(gone, chosen=False, idle=False)
    assert part.accessibleName() == part.toolTip() == gone.sentence()


def test_a_switch_says_how_it_stands(ground: QWidget, theme: Theme) -> None:
    """And what a press does."""
    switch = SwitchPart("Feedback", theme, ground)
    assert switch.accessibleName() == "Feedback path, closed: open it"
    switch.show_closed(closed=False)
    assert switch.accessibleName() == "Feedback path, open: close it"


def test_it_looks_different_there_and_not_there(part: BlockPart) -> None:
    """A block, a plus, a chosen one and an idle one are four pictures."""
    pictures = []
    for block, chosen, idle in (
        (NOTCH, False, False),
        (Block("notch", "Notch", "", there=False, page="Filters"), False, False),
        (NOTCH, True, False),
        (NOTCH, False, True),
    ):
        part.show_block(block, chosen=chosen, idle=idle)
        pictures.append(part.grab().toImage())
    assert all(one != other for place, one in enumerate(pictures) for other in pictures[:place])

"""The loop diagram under a real hand: blocks pressed, put in and taken out, both paths switched, then keys alone."""

from pytestqt.qtbot import QtBot

from tests.real_window.hand import click, press
from tuner.window.main_window import MainWindow

PATIENCE = 60_000


def _answered(window: MainWindow, qtbot: QtBot) -> None:
    """Wait for the verdict on the sheet as it is now."""

    def is_true() -> bool:
        return window.shown is not None and window.shown.whole and window.shown.sheet == window.document.sheet

    qtbot.waitUntil(is_true, timeout=PATIENCE)


def test_a_block_is_pressed(window: MainWindow) -> None:
    """Its editors come in sight and it is marked."""
    click(window.diagram.parts["sensor"])
    assert window.editors.block == "Sensor"
    click(window.diagram.parts["law"])
    assert window.editors.block == "Controller"


def test_a_notch_is_put_in_and_taken_out(window: MainWindow, qtbot: QtBot) -> None:
    """A press on its plus brings block, editors and rulers; Delete takes all of it away."""
    before = window.document.sheet
    click(window.diagram.parts["notch"])
    assert window.document.sheet.controller.notch is not None
    assert window.editors.block == "Filters"
    assert {"notch.frequency", "notch.depth", "notch.width"} <= set(window.rulers.rulers)
    _answered(window, qtbot)
    click(window.diagram.parts["notch"])
    press("Delete")
    qtbot.waitUntil(lambda: window.document.sheet == before)
    assert "notch.depth" not in window.rulers.rulers
    _answered(window, qtbot)


def test_both_paths_are_switched(window: MainWindow, qtbot: QtBot) -> None:
    """Opened, the loop is judged as it is then; closed again, it is what it was."""
    click(window.diagram.parts["feedforward"])
    both = window.document.sheet
    _answered(window, qtbot)
    click(window.diagram.parts["switch_back"])
    assert not window.document.sheet.controller.feedback
    _answered(window, qtbot)
    assert window.shown is not None
    assert window.shown.assessment.nominal.margins is None
    click(window.diagram.parts["switch_back"])
    click(window.diagram.parts["switch_forward"])
    assert window.document.sheet.controller.feedforward is None
    click(window.diagram.parts["switch_forward"])
    assert window.document.sheet == both
    _answered(window, qtbot)


def test_the_keyboard_alone_puts_a_block_in(window: MainWindow, qtbot: QtBot) -> None:
    """To the diagram by its key, along the signal by the arrows, in by Enter, back by undo."""
    before = window.document.sheet
    press("ctrl+4")
    qtbot.waitUntil(lambda: any(part.hasFocus() for part in window.diagram.parts.values()))
    window.diagram.parts["sensor"].setFocus()
    press("Left")
    assert window.diagram.parts["measurement_filter"].hasFocus()
    press("Return")
    qtbot.waitUntil(lambda: window.document.sheet.controller.measurement_filter > 0.0)
    press("ctrl+z")
    qtbot.waitUntil(lambda: window.document.sheet == before)


def test_it_can_be_hidden(window: MainWindow, qtbot: QtBot) -> None:
    """Its key leaves the room to the plots, and brings it back."""
    press("ctrl+shift+d")
    qtbot.waitUntil(window.diagram.isHidden)
    assert window.layout_memory().diagram == "hidden"
    press("ctrl+shift+d")
    qtbot.waitUntil(window.diagram.isVisible)

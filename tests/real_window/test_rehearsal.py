"""The rehearsal under a real hand: it runs smoothly, is disturbed and retuned while it runs, and stops at a key."""

import time

import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.real_window.hand import click, press, xdotool
from tuner.rehearse.rehearsal import Rehearsal
from tuner.window.main_window import MainWindow
from tuner.window.rehearsal.page import RehearsalPage

PATIENCE = 60_000
FRAMES = 20
"""Pictures a second at the least, of the 30 that are aimed at: the tests' machine does other things meanwhile."""


@pytest.fixture
def page(window: MainWindow, qtbot: QtBot) -> RehearsalPage:
    """Return the page, chosen by its word, its loop ready."""
    click(window.pages.words.buttons["Rehearsal"])
    page = window.pages.page
    assert isinstance(page, RehearsalPage)
    qtbot.waitUntil(lambda: page.runner.rehearsal is not None, timeout=PATIENCE)
    return page


def loop(page: RehearsalPage) -> Rehearsal:
    """Return the loop."""
    assert page.runner.rehearsal is not None
    return page.runner.rehearsal


def test_a_disturbance_is_pushed_and_the_loop_stopped(page: RehearsalPage, qtbot: QtBot) -> None:
    """Run, hold the button down, let go, then Escape: to manual, and back by a click without a bump."""
    click(page.bar.run)
    for _ in range(5):
        click(page.bar.speed.more)
    assert page.runner.pacer.speed == 50.0
    place = page.hand.push.mapToGlobal(page.hand.push.rect().center())
    xdotool("mousemove", place.x(), place.y())
    xdotool("mousedown", 1)
    qtbot.waitUntil(lambda: loop(page).disturbance == 10.0)
    begin = loop(page).time
    qtbot.waitUntil(lambda: loop(page).time > begin + 40.0)
    xdotool("mouseup", 1)
    qtbot.waitUntil(lambda: loop(page).disturbance == 0.0)
    press("Escape")
    qtbot.waitUntil(lambda: loop(page).mode == "manual")
    assert page.runner.running
    click(page.hand.mode.buttons["Automatic"])
    qtbot.waitUntil(lambda: loop(page).mode == "automatic")


def test_the_rulers_retune_it_while_it_runs(window: MainWindow, page: RehearsalPage, qtbot: QtBot) -> None:
    """Keys on the ruler of kp reach the running loop; undo as well, and its time goes on."""
    click(page.bar.run)
    qtbot.waitUntil(lambda: loop(page).time > 0.5)
    before, time_then = window.document.sheet.controller, loop(page).time
    window.rulers.rulers["kp"].slider.setFocus()
    press("Page_Up")
    qtbot.waitUntil(lambda: loop(page).sheet.controller.gain_1 > before.gain_1)
    assert loop(page).sheet.controller == window.document.sheet.controller
    press("ctrl+z")
    qtbot.waitUntil(lambda: loop(page).sheet.controller == before)
    assert loop(page).time >= time_then


def test_it_runs_smoothly(page: RehearsalPage, qtbot: QtBot) -> None:
    """At a hundred times real time the pictures come fast enough, and the speed asked for is reached."""
    page.runner.set_speed(100.0)
    click(page.bar.run)
    qtbot.wait(2500)
    frames: list[float] = []
    page.runner.ticked.connect(lambda: frames.append(time.monotonic()))
    begin, clock = loop(page).time, time.monotonic()
    while time.monotonic() < clock + 3.0:
        QApplication.processEvents()
        time.sleep(0.001)
    assert len(frames) / 3.0 >= FRAMES
    assert (loop(page).time - begin) / 3.0 == pytest.approx(100.0, rel=0.1)
    assert not page.runner.pacer.behind

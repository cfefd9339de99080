"""The row of buttons shows what runs and says what the hand wants."""

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from tests.window import made_up
from tests.window.rehearsal.conftest import Hours
from tuner.rehearse.rehearsal import Rehearsal
from tuner.window.rehearsal.bar import Bar
from tuner.window.rehearsal.runner import Runner
from tuner.window.theme import Theme


def test_it_shows_a_runner(qtbot: QtBot, theme: Theme, runner: Runner, hours: Hours) -> None:
    """Without a loop nothing can be done but play; a record can be saved, not while that goes on."""
    bar = Bar(theme)
    qtbot.addWidget(bar)
    qtbot.addWidget(bar.apart)
    bar.show_runner(runner, saving=False)
    parts = (bar.run, bar.anew, bar.record, bar.save, bar.stop)
    assert [part.isEnabled() for part in parts] == [False] * 5
    assert bar.play.isEnabled()
    runner.begin(Rehearsal(made_up.sheet()))
    runner.set_speed(20.0)
    runner.record(True)
    runner.run()
    runner.tick()
    hours.pass_by(1.0)
    bar.show_runner(runner, saving=False)
    assert (bar.run.text(), bar.record.text(), bar.speed.value) == ("Pause", "End record", 20.0)
    assert [part.isEnabled() for part in parts] == [True] * 5
    bar.show_runner(runner, saving=True)
    assert not bar.save.isEnabled()


def test_it_says_what_is_wanted(qtbot: QtBot, theme: Theme) -> None:
    """Each button has its own signal, and changes nothing by itself."""
    bar = Bar(theme)
    qtbot.addWidget(bar)
    qtbot.addWidget(bar.apart)
    said: list[object] = []
    bar.stop_wanted.connect(lambda: said.append("stop"))
    bar.anew_wanted.connect(lambda: said.append("anew"))
    bar.play_wanted.connect(lambda: said.append("play"))
    bar.save_wanted.connect(lambda: said.append("save"))
    bar.run_wanted.connect(said.append)
    bar.record_wanted.connect(said.append)
    for button in (bar.stop, bar.anew, bar.play, bar.save, bar.run, bar.record):
        button.setEnabled(True)
        QTest.mouseClick(button, Qt.MouseButton.LeftButton)
    assert said == ["stop", "anew", "play", "save", True, True]


def test_the_stop_is_plain_to_see(qtbot: QtBot, theme: Theme) -> None:
    """It is larger than any other button, in the colour of loss, and says its keys."""
    bar = Bar(theme)
    qtbot.addWidget(bar)
    assert bar.stop.sizeHint().height() > bar.run.sizeHint().height()
    assert theme.palette.colours["lost_word"] in bar.stop.styleSheet()
    assert "Escape" in bar.stop.toolTip()

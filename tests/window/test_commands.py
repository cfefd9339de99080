"""Commands open their dialogs over the window, which goes on living beneath."""

from pathlib import Path

import pytest
from PySide6.QtWidgets import QApplication, QDialog, QLabel
from pytestqt.qtbot import QtBot

from tests.window.windows import Answers, opened
from tuner.window.cautions import CAUTION, AboutDialog
from tuner.window.commands import Commands
from tuner.window.deliver_dialog import DeliverDialog


def _dialog(qtbot: QtBot, kind: type[QDialog]) -> QDialog:
    qtbot.waitUntil(lambda: isinstance(QApplication.activeModalWidget(), kind))
    dialog = QApplication.activeModalWidget()
    assert isinstance(dialog, kind)
    return dialog


def test_the_dialog_of_a_delivery_is_for_what_is_shown(qtbot: QtBot) -> None:
    """It opens on the present verdict, with a folder beside the sheet named after the loop."""
    with opened() as (window, _):
        Commands(window, Answers(), lambda *_args, **_kinds: ()).deliver()
        dialog = _dialog(qtbot, DeliverDialog)
        assert isinstance(dialog, DeliverDialog)
        assert Path(dialog.folder.text()).name == "ink_drier_delivery"
        assert dialog.windowTitle() == "Deliver Ink drier"
        dialog.reject()


def test_the_cautions_are_one_key_away(qtbot: QtBot) -> None:
    """About says what the program is, its version, and the cautions."""
    from tuner import __version__

    with opened() as (window, wiring):
        wiring.menus.actions["about"].trigger()
        dialog = _dialog(qtbot, AboutDialog)
        said = {label.text() for label in dialog.findChildren(QLabel)}
        assert CAUTION in said
        assert f"Trimwright {__version__}" in said
        dialog.reject()
        del window


@pytest.mark.usefixtures("qtbot")
def test_a_picture_that_cannot_be_saved_is_said(tmp_path: Path) -> None:
    """The refusal is told; giving up asks nothing more."""
    asking = Answers(picture=tmp_path / "no" / "plot.png")
    with opened() as (window, _):
        panel = next(iter(window.plots.panels.values()))
        Commands(window, asking).save_picture(panel)
        assert asking.told[0][0] == "No picture"
        given_up = Answers(picture=None)
        Commands(window, given_up).save_picture(panel)
        assert given_up.told == []

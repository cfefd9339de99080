"""The one door of questions: what it says, and the endings of names."""

from pathlib import Path

import pytest
from PySide6.QtCore import QTimer
from PySide6.QtWidgets import QApplication, QFileDialog, QMessageBox, QWidget
from pytestqt.qtbot import QtBot

from tuner.window.asking import Asking, Telling


@pytest.fixture
def asking(qtbot: QtBot) -> Asking:
    """Return the door over an empty window."""
    window = QWidget()
    qtbot.addWidget(window)
    made = Asking(window)
    made.window = window  # type: ignore[attr-defined]  # kept alive with the door
    return made


def test_every_sentence_can_be_read_and_copied(qtbot: QtBot) -> None:
    """However many there are, they stand in a box that scrolls."""
    sentences = [f"controller.k{number}: expected a number, found a text" for number in range(60)]
    box = Telling("Bad", "There are 60 faults.", sentences)
    qtbot.addWidget(box)
    box.show()
    assert all(sentence in box.sentences.toPlainText() for sentence in sentences)
    assert box.sentences.verticalScrollBar().maximum() > 0
    assert box.height() < 700


@pytest.mark.parametrize(
    ("button", "answer"),
    [
        (QMessageBox.StandardButton.Save, "save"),
        (QMessageBox.StandardButton.Discard, "discard"),
        (QMessageBox.StandardButton.Cancel, "cancel"),
    ],
)
def test_unsaved_changes_have_three_answers(asking: Asking, button: QMessageBox.StandardButton, answer: str) -> None:
    """Save, discard, cancel."""
    _press(lambda box: box.button(button).click())
    assert asking.about_unsaved("drier.toml") == answer


@pytest.mark.parametrize(
    ("words", "answer"), [("Bring it back", "restore"), ("Drop it", "drop"), ("Ask again later", "later")]
)
def test_work_left_behind_has_three_answers(asking: Asking, words: str, answer: str) -> None:
    """Bring back, drop, ask again."""
    _press(lambda box: next(button for button in box.buttons() if button.text() == words).click())
    assert asking.about_left_behind("Ink drier") == answer


def test_an_action_is_agreed_to_by_its_name(asking: Asking) -> None:
    """The button carries the action; cancel is no."""
    _press(lambda box: next(button for button in box.buttons() if button.text() == "Save over it").click())
    assert asking.agree("Changed", "Somebody changed it.", "Save over it")
    _press(lambda box: box.button(QMessageBox.StandardButton.Cancel).click())
    assert not asking.agree("Changed", "Somebody changed it.", "Save over it")


def test_names_get_their_ending(asking: Asking, monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    """A name without an ending gets one; another ending stays; no name is no file."""
    for typed, found in (("drier", "drier.toml"), ("drier.txt", "drier.txt")):
        monkeypatch.setattr(QFileDialog, "getSaveFileName", lambda *_, typed=typed: (str(tmp_path / typed), ""))
        assert asking.sheet_to_save(tmp_path) == tmp_path / found
    monkeypatch.setattr(QFileDialog, "getSaveFileName", lambda *_: ("", ""))
    assert asking.picture_to_save(tmp_path) is None
    monkeypatch.setattr(QFileDialog, "getOpenFileName", lambda *_: ("", ""))
    assert asking.sheet_to_open(tmp_path) is None
    monkeypatch.setattr(QFileDialog, "getExistingDirectory", lambda *_: str(tmp_path))
    assert asking.folder(tmp_path) == tmp_path


def _press(act: object) -> None:
    """Do something to the message box that opens next."""

    def find() -> None:
        box = QApplication.activeModalWidget()
        assert isinstance(box, QMessageBox)
        act(box)  # type: ignore[operator]  # a function of the box

    QTimer.singleShot(50, find)

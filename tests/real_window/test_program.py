"""The program as a person starts it: from the command line, with keys and mouse, to the delivered controller."""

import json
import os
import subprocess
import sys
import time
from contextlib import suppress
from pathlib import Path

import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.real_window.hand import click, press, xdotool
from tests.window.windows import Answers
from tuner.places import cache, sample_plants
from tuner.session.document import Document
from tuner.window.deliver_dialog import DeliverDialog
from tuner.window.main_window import MainWindow

ROOT = Path(__file__).parents[2]
PATIENCE = 120_000


@pytest.mark.usefixtures("window")
def test_a_controller_is_delivered(qtbot: QtBot, tmp_path: Path) -> None:
    """Ctrl+D opens the dialog, a click on its button writes the files, and every one of them is proved."""
    press("ctrl+d")
    dialog = _dialog(qtbot)
    folder = tmp_path / "handed over"
    dialog.folder.setText(str(folder))
    if dialog.accept_unmet.isVisible():
        click(dialog.accept_unmet)
        dialog.accept_unmet.setChecked(True)
    qtbot.waitUntil(dialog.deliver_button.isEnabled)
    click(dialog.deliver_button)
    qtbot.waitUntil(lambda: not dialog.busy and bool(dialog.outcome.toPlainText()), timeout=PATIENCE)
    assert dialog.outcome.toPlainText().startswith("Delivered to")
    proof = json.loads((folder / "proof.json").read_text(encoding="utf-8"))
    assert {entry["file"] for entry in proof} >= {"controller.py"}
    assert (folder / "controller.json").is_file()
    press("Escape")
    qtbot.waitUntil(lambda: QApplication.activeModalWidget() is None)


def test_a_sheet_is_saved_and_opened_again(window: MainWindow, qtbot: QtBot, asking: Answers) -> None:
    """Ctrl+S on a new sheet asks for a file; that file holds the same loop and its comments."""
    window.document.change_value("kp", 2.2)
    press("ctrl+s")
    qtbot.waitUntil(lambda: not window.document.dirty)
    assert asking.told == []
    assert window.document.path is not None
    again = Document.from_file(window.document.path)
    assert again.sheet == window.document.sheet
    assert "#" in again.original_text


@pytest.mark.parametrize("is_new", [False, True], ids=["compiled before", "compiling"])
def test_the_program_starts_and_ends(tmp_path: Path, *, is_new: bool) -> None:
    """`python -m tuner SHEET` shows a window named after the loop; a key ends it, also while kernels are compiled."""
    sheet = tmp_path / "mine.toml"
    sheet.write_text((sample_plants() / "heater.toml").read_text(encoding="utf-8"), encoding="utf-8")
    # Its own folders, so that nothing is left behind from an earlier run; compiled code is shared all the same.
    kernels = str(tmp_path / "new") if is_new else os.environ.get("NUMBA_CACHE_DIR", str(cache() / "kernels"))
    own = {"XDG_CONFIG_HOME": str(tmp_path / "config"), "XDG_CACHE_HOME": str(tmp_path / "cache")}
    settings = {**os.environ, **own, "NUMBA_CACHE_DIR": kernels}
    command = [sys.executable, "-m", "tuner", str(sheet)]
    with subprocess.Popen(command, cwd=ROOT, env=settings, stderr=subprocess.PIPE) as program:
        try:
            assert _closed(program, _found(program)) == 0
        finally:
            program.kill()
        assert program.stderr is not None
        assert program.stderr.read() == b""
    assert list((tmp_path / "config").rglob("*.json"))


def _dialog(qtbot: QtBot) -> DeliverDialog:
    qtbot.waitUntil(lambda: isinstance(QApplication.activeModalWidget(), DeliverDialog), timeout=20_000)
    dialog = QApplication.activeModalWidget()
    assert isinstance(dialog, DeliverDialog)
    qtbot.waitUntil(dialog.isActiveWindow)
    return dialog


def _closed(program: "subprocess.Popen[bytes]", window: str) -> int:
    """Return how a program ends that is told to by the keyboard, again if a window not ready yet lost the key."""
    for _ in range(3):
        xdotool("windowactivate", "--sync", window)
        xdotool("key", "--clearmodifiers", "ctrl+q")
        with suppress(subprocess.TimeoutExpired):
            return program.wait(60)
    return program.wait(1)


def _found(program: "subprocess.Popen[bytes]") -> str:
    """Return the window of a program by its title, once it is there."""
    deadline = time.monotonic() + 60.0
    while time.monotonic() < deadline:
        assert program.poll() is None, "The program ended before it showed a window."
        search = ["xdotool", "search", "--onlyvisible", "--name", "Product heater outlet: mine.toml"]
        run = subprocess.run(search, capture_output=True, text=True, check=False, timeout=20)
        if run.stdout.split():
            return run.stdout.split()[0]
        time.sleep(0.1)
    raise AssertionError("The program showed no window within a minute.")

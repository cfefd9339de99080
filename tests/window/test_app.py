"""The one entry: what is opened, what is remembered, what is not loaded before the first picture."""

import subprocess
import sys
from pathlib import Path

import pytest
from PySide6.QtCore import QTimer
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tests.window import made_up, made_up_footing
from tests.window.test_sheet_files import BAD, GOOD
from tests.window.windows import Answers
from tuner.errors import SheetError
from tuner.footing.apart import Apart
from tuner.places import sample_plants
from tuner.session.document import Document
from tuner.window import app, memory
from tuner.window.app import built, open_window, opened
from tuner.window.main_window import MainWindow

ROOT = Path(__file__).parents[2]


class MadeUpApart(Apart):
    """Answers at once, in closed form, and starts no process."""

    def __init__(self) -> None:
        super().__init__()
        self.paint_rulers = made_up_footing.Painting()  # type: ignore[method-assign]

    def start(self) -> None:
        """Do nothing."""


@pytest.fixture(autouse=True)
def _made_up_sketch(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(app, "_sketch", made_up.sketch)
    monkeypatch.setattr(app, "Apart", MadeUpApart)
    monkeypatch.setattr(app, "_reason_at", made_up_footing.Reasons())
    monkeypatch.setattr(sys, "excepthook", sys.excepthook)


def test_a_sample_becomes_a_sheet_without_a_file() -> None:
    """The built-in example, named or not, is never written over."""
    for document in (opened(None), opened(sample_plants() / "heater.toml")):
        assert document.path is None
        assert document.sheet.loop.title == "Product heater outlet"
        assert not document.dirty


def test_the_rulers_are_painted_after_the_first_answer(qtbot: QtBot, qapp: QApplication) -> None:
    """The footing sleeps until the first verdict is shown, then paints every ruler; a close ends its threads."""
    memory.remember(memory.Memory(theme="light"))
    window, wiring = built(qapp, opened(None), Answers(unsaved="discard"))
    rulers = window.rulers.rulers.values()
    assert wiring.footing is not None
    wiring.footing.painted.ask()
    assert wiring.footing.painted.painting is None
    window.show()
    window.start()
    qtbot.waitUntil(lambda: all(ruler.painted is not None for ruler in rulers))
    assert window.shown is not None
    window.close()
    window.deleteLater()


def test_a_sheet_keeps_its_file(tmp_path: Path) -> None:
    """Somebody's own sheet is saved where it came from."""
    path = tmp_path / "drier.toml"
    path.write_text(GOOD, encoding="utf-8")
    assert opened(path).path == path


def test_a_bad_sheet_is_refused_before_a_window_opens(tmp_path: Path) -> None:
    """The caller gets every fault."""
    path = tmp_path / "bad.toml"
    path.write_text(BAD, encoding="utf-8")
    with pytest.raises(SheetError) as refusal:
        open_window(path)
    assert len(refusal.value.faults) == 2


def test_the_window_runs_until_it_is_closed(qtbot: QtBot, monkeypatch: pytest.MonkeyPatch) -> None:
    """It opens, answers, closes, and remembers how it stood; the status is 0."""
    del qtbot
    monkeypatch.setattr(app, "Asking", lambda _window: Answers(unsaved="discard"))

    def close_when_answered() -> None:
        windows = [widget for widget in QApplication.topLevelWidgets() if isinstance(widget, MainWindow)]
        answered = [window for window in windows if window.isVisible() and window.shown is not None]
        for window in answered:
            window.close()

    timer = QTimer(interval=20)
    timer.timeout.connect(close_when_answered)
    timer.start()
    assert open_window(None) == 0
    timer.stop()
    assert memory.recall().geometry
    QApplication.setQuitOnLastWindowClosed(True)


def test_the_theme_chosen_last_holds_again(qtbot: QtBot, qapp: QApplication) -> None:
    """A window opens in the shade that was chosen in the last run."""
    del qtbot
    memory.remember(memory.Memory(theme="dark"))
    window, wiring = built(qapp, Document(made_up.sheet()), Answers())
    assert window.theme.palette.shade == "dark"
    assert wiring.menus.actions["theme dark"].isChecked()
    window.theme.choose("light")
    assert window.close()
    assert memory.recall().theme == "light"
    window.deleteLater()


def test_slow_libraries_are_not_loaded_before_the_first_picture() -> None:
    """Importing the window and opening the example loads nothing that only a computation needs."""
    slow = ("scipy", "control", "matplotlib", "tuner.assess", "tuner.kernels", "tuner.deliver")
    text = (
        "import sys; from tuner.window import app; app.opened(None); "
        f"print([name for name in {slow!r} if name in sys.modules])"
    )
    run = subprocess.run([sys.executable, "-c", text], cwd=ROOT, capture_output=True, text=True, check=True)
    assert run.stdout.strip() == "[]"

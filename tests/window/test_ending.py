"""What still works when a window closes is waited for briefly, kept, and does not keep the program from ending."""

import subprocess
import sys
import threading
import time

import pytest
from PySide6.QtCore import QThread

from tuner.window import ending


class Busy(QThread):
    """Works until it is let go."""

    def __init__(self) -> None:
        super().__init__()
        self.go = threading.Event()

    def run(self) -> None:
        """Wait."""
        self.go.wait(30.0)


@pytest.mark.usefixtures("qtbot")
def test_a_thread_that_ends_is_waited_for() -> None:
    """And then nothing is left."""
    busy = Busy()
    busy.start()
    busy.go.set()
    ending.end(busy)
    assert busy.isFinished()
    assert not ending.some_are_left()
    ending.leave(3)  # does nothing


@pytest.mark.usefixtures("qtbot")
def test_a_thread_that_takes_long_is_left_to_itself(monkeypatch: pytest.MonkeyPatch) -> None:
    """It is kept for as long as it runs."""
    monkeypatch.setattr(ending, "PATIENCE", 20)
    busy = Busy()
    busy.start()
    ending.end(busy)
    assert busy.isRunning()
    assert ending.some_are_left()
    busy.go.set()
    assert busy.wait(10_000)
    assert not ending.some_are_left()


def test_the_program_ends_without_it() -> None:
    """With its own status, with all that was written, and without a word."""
    text = (
        "import time\n"
        "from PySide6.QtCore import QCoreApplication, QThread\n"
        "from tuner.window import ending\n"
        "class Busy(QThread):\n"
        "    def run(self): time.sleep(60)\n"
        "application, busy = QCoreApplication([]), Busy()\n"
        "busy.start(); print('kept'); ending.end(busy); ending.leave(3)\n"
    )
    began = time.monotonic()
    done = subprocess.run([sys.executable, "-c", text], capture_output=True, text=True, check=False, timeout=50)
    assert time.monotonic() - began < 50.0
    assert (done.returncode, done.stdout, done.stderr) == (3, "kept\n", "")

"""The guard of tests/conftest.py against threads left behind, tried on tests that leave some."""

import subprocess
import sys
from pathlib import Path

import pytest

CONFTEST = Path(__file__).parents[1] / "conftest.py"

LEAVES_THREAD = """
import threading
def test_leaves_one():
    threading.Thread(target=threading.Event().wait, args=(3,)).start()
"""
LEAVES_QT_THREAD = """
from PySide6.QtCore import QThread
kept = QThread()
def test_leaves_one():
    kept.start()
def test_ends_it():
    kept.quit()
    assert kept.wait(5000)
"""
LEAVES_NOTHING = """
import threading
from concurrent.futures import ThreadPoolExecutor
pool = ThreadPoolExecutor(1)
def test_waits():
    thread = threading.Thread(target=int)
    thread.start()
    thread.join()
    pool.submit(int).result()
"""


@pytest.mark.parametrize(
    ("text", "summary"),
    [(LEAVES_THREAD, "1 passed, 1 error"), (LEAVES_QT_THREAD, "2 passed, 1 error"), (LEAVES_NOTHING, "1 passed")],
    ids=["thread", "QThread", "nothing"],
)
def test_threads_left_behind_fail_a_test(tmp_path: Path, text: str, summary: str) -> None:
    """A plain thread and a QThread left running are errors; one waited for and a pool are not."""
    (tmp_path / "conftest.py").write_text(CONFTEST.read_text(encoding="utf-8"), encoding="utf-8")
    (tmp_path / "test_it.py").write_text(text, encoding="utf-8")
    command = [
        sys.executable,
        "-m",
        "pytest",
        "-q",
        "-p",
        "no:cacheprovider",
        "--rootdir",
        str(tmp_path),
        str(tmp_path),
    ]
    run = subprocess.run(command, cwd=CONFTEST.parents[1], capture_output=True, text=True, check=False)
    assert summary in run.stdout.splitlines()[-1], run.stdout

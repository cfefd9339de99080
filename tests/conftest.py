"""Fixtures and guards for every test: steady random examples, no display needed, no thread left behind."""

import gc
import os
import sys
import threading
import time
from collections.abc import Iterator
from concurrent.futures import thread as pools
from pathlib import Path

import pytest
from hypothesis import settings

from tuner.places import keep_compiled_kernels

os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
keep_compiled_kernels()

settings.register_profile("steady", derandomize=True, deadline=None)
settings.load_profile("steady")

REAL_WINDOW = Path(__file__).parent / "real_window"
PATIENCE = 1.0  # seconds for a thread that is on its way out


def pytest_collection_modifyitems(items: list[pytest.Item]) -> None:
    """Give the marker `real_window` to every test of that folder."""
    for item in items:
        if REAL_WINDOW in item.path.parents:
            item.add_marker(pytest.mark.real_window)


@pytest.fixture(autouse=True)
def no_thread_left_behind() -> Iterator[None]:
    """Fail a test after which a thread still runs that would hold up or abort the end of the process."""
    plain, native = _plain_threads(), _native_threads()
    yield
    deadline = time.monotonic() + PATIENCE
    while (left := _left_behind(plain, native)) and time.monotonic() < deadline:
        time.sleep(0.01)
    assert not left, f"The test leaves threads running; stop them and wait for them: {left}"


def _left_behind(plain: set[threading.Thread], native: set[str]) -> list[str]:
    """Return the threads started since then that still run; Qt's are sought only if there are new ones at all."""
    left = [str(thread) for thread in _plain_threads() - plain]
    return left + _running_qt_threads() if _native_threads() - native else left


def _plain_threads() -> set[threading.Thread]:
    """Return Python's threads that outlive a test: neither daemons nor those of pools, which Python ends by itself."""
    pooled = set(pools._threads_queues)
    return {thread for thread in threading.enumerate() if not thread.daemon and thread not in pooled}


def _native_threads() -> set[str]:
    """Return the numbers of all threads of this process; elsewhere than on Linux a new one every time."""
    tasks = Path("/proc/self/task")
    return {task.name for task in tasks.iterdir()} if tasks.is_dir() else {str(time.monotonic_ns())}


def _running_qt_threads() -> list[str]:
    """Return the QThreads that run; Qt is not loaded for it."""
    if "PySide6.QtCore" not in sys.modules:
        return []
    from PySide6.QtCore import QThread
    from shiboken6 import isValid

    threads = [candidate for candidate in gc.get_objects() if isinstance(candidate, QThread) and isValid(candidate)]
    return [str(thread) for thread in threads if thread.isRunning() and thread is not QThread.currentThread()]

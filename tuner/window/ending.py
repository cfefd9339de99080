"""Threads that are still at work when their window closes: nobody is kept waiting for what nobody will see.

The first start on a machine compiles for seconds, which nothing can interrupt. Such a thread is left to itself, and the
program then ends without it.
"""

import logging
import os
import sys
from contextlib import suppress

from PySide6.QtCore import QThread

PATIENCE, HASTE = 500, 50
"""Milliseconds that a thread is waited for: the first that takes long, and any after that."""

_left: list[QThread] = []
"""Those that were left to themselves; they are kept, for one that is thrown away while it runs ends the program."""


def end(thread: QThread) -> None:
    """Wait for a thread that was told to end, unless that takes long."""
    if thread not in _left and not thread.wait(HASTE if some_are_left() else PATIENCE):
        _left.append(thread)


def some_are_left() -> bool:
    """Return whether a thread that was left to itself still runs."""
    return any(thread.isRunning() for thread in _left)


def leave(status: int) -> None:
    """End the program at once, once all that is to be kept has been written; only if a thread still runs."""
    if some_are_left():
        logging.shutdown()
        for stream in (sys.stdout, sys.stderr):
            with suppress(AttributeError, OSError, ValueError):  # a program without a console has none
                stream.flush()
        os._exit(status)

"""A lock between two runs that want to make the same environment."""

import os
import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path


@contextmanager
def locked(path: Path, on_wait: Callable[[], None]) -> Iterator[int]:
    """Hold the lock on a file, waiting for another process that has it; yields the open file's descriptor.

    The operating system drops the lock with the last process that holds the descriptor, so a killed run leaves none.
    """
    path.parent.mkdir(parents=True, exist_ok=True)
    descriptor = os.open(path, os.O_RDWR | os.O_CREAT, 0o644)
    try:
        if not _try(descriptor):
            on_wait()
            _wait(descriptor)
        yield descriptor
    finally:
        os.close(descriptor)


if sys.platform == "win32":
    import msvcrt
    import time

    def _try(descriptor: int) -> bool:
        try:
            msvcrt.locking(descriptor, msvcrt.LK_NBLCK, 1)
        except OSError:
            return False
        return True

    def _wait(descriptor: int) -> None:
        while not _try(descriptor):
            time.sleep(0.5)

else:
    import fcntl

    def _try(descriptor: int) -> bool:
        try:
            fcntl.flock(descriptor, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except BlockingIOError:
            return False
        return True

    def _wait(descriptor: int) -> None:
        fcntl.flock(descriptor, fcntl.LOCK_EX)

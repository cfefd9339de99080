"""A place for one thing, where the newest replaces what still waits."""

from threading import Condition
from typing import Generic, TypeVar

Thing = TypeVar("Thing")


class Slot(Generic[Thing]):
    """Hands things from one thread to another, the newest only; no queue can grow behind a slow taker."""

    def __init__(self) -> None:
        self._turn = Condition()
        self._waiting: Thing | None = None
        self._closed = self._nudged = False

    def put(self, thing: Thing) -> None:
        """Leave a thing; one that nobody took yet is dropped. After `close` it is dropped at once."""
        with self._turn:
            if not self._closed:
                self._waiting = thing
                self._turn.notify()

    def take(self) -> Thing | None:
        """Wait for a thing and take it; None once the slot is closed."""
        with self._turn:
            self._turn.wait_for(self._is_over)
            thing, self._waiting, self._nudged = self._waiting, None, False
            return thing

    def newer(self, patience: float, *, until_nudged: bool = False) -> bool:
        """Tell whether a newer thing is there, or comes within `patience` seconds, or the slot is closed.

        Parameters
        ----------
        until_nudged : bool
            Wait no longer once `nudge` was called since the last thing was taken.
        """
        with self._turn:
            self._turn.wait_for(lambda: self._is_over() or (until_nudged and self._nudged), patience)
            return self._is_over()

    def nudge(self) -> None:
        """Say to who took the last thing that there is nothing more to wait for."""
        with self._turn:
            self._nudged = True
            self._turn.notify()

    def _is_over(self) -> bool:
        return self._closed or self._waiting is not None

    @property
    def closed(self) -> bool:
        """Whether nothing more comes."""
        return self._closed

    def close(self) -> None:
        """Let every `take` return None, now and from now on; what waits is dropped."""
        with self._turn:
            self._closed, self._waiting = True, None
            self._turn.notify_all()

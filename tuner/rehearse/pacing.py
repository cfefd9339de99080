"""How fast a rehearsal goes by the clock on the wall: as many samples as are due, and never one left out."""

from math import floor

SLOWEST, FASTEST = 0.1, 100.0
"""Bounds of the speed, as a factor of real time."""

SHARE = 0.6
"""Share of the time between two calls that the samples may take; the rest is for drawing them."""

_WINDOW = 2.0
"""Seconds over which the speed that is reached is told."""

_FORGETS = 0.7
_FIRST = 200.0
"""Samples that are run at once at most before it is known how long they take."""

_ROUNDING = 1e-9


class Pacer:
    """Says how many samples are due.

    A computer that is too slow falls behind for good: the samples that it could not run are not made up for, so that
    the loop runs slower than asked and no sample is skipped.

    Parameters
    ----------
    sample_seconds : float
        Time between samples, in seconds.
    speed : float
        Factor of real time.
    """

    def __init__(self, sample_seconds: float, speed: float = 1.0) -> None:
        self._sample = sample_seconds
        self._last: float | None = None
        self._owed, self._cost = 0.0, 0.0
        self._begun, self._ran, self._reached = 0.0, 0, speed
        self._carried = 0.0
        self.speed = speed

    @property
    def speed(self) -> float:
        """The factor of real time that is asked for, within its bounds."""
        return self._speed

    @speed.setter
    def speed(self, value: float) -> None:
        self._speed = min(max(value, SLOWEST), FASTEST)
        self._reached, self._ran, self._begun = self._speed, 0, self._last or 0.0
        self._carried = self._owed

    def pause(self) -> None:
        """Let no time pass until the next call."""
        self._last = None

    def due(self, now: float) -> int:
        """Return how many samples to run now; `now` is a clock in seconds that never goes back."""
        if self._last is None:
            self._last = self._begun = now
            self._ran, self._carried = 0, self._owed
            return 0
        passed, self._last = now - self._last, now
        self._owed += passed * self._speed / self._sample
        most = SHARE * passed / self._cost if self._cost else _FIRST
        samples = floor(min(self._owed, max(most, 1.0)) + _ROUNDING)
        # What is left beyond one sample is what this computer could not run.
        self._owed = min(self._owed - samples, 1.0)
        return samples

    def took(self, samples: int, seconds: float, now: float) -> None:
        """Say how long it took to run and draw some samples."""
        if samples:
            self._cost = _FORGETS * self._cost + (1.0 - _FORGETS) * seconds / samples
        self._ran += samples
        if now - self._begun >= _WINDOW:
            # Parts of a sample count: of a slow loop only a few samples are due in this time.
            passed = self._ran + self._owed - self._carried
            self._reached = passed * self._sample / (now - self._begun)
            self._begun, self._ran, self._carried = now, 0, self._owed

    @property
    def achieved(self) -> float:
        """The factor of real time that was reached lately."""
        return self._reached

    @property
    def behind(self) -> bool:
        """Whether that is clearly less than was asked for."""
        return self._reached < 0.9 * self._speed

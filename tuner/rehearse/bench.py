"""One plant and one controller side by side, going on sample by sample: what of a rehearsal is arithmetic."""

import numpy as np
from numpy.typing import NDArray

from tuner.kernels.rehearsal import advance
from tuner.law import pid
from tuner.model.family import Member
from tuner.model.sheet import Sheet
from tuner.simulate.batch import law_constants, nominal
from tuner.simulate.feeding import Digital, Feeds, Running, feeds_of
from tuner.simulate.wiring import Wired, wire

Array = NDArray[np.float64]

CEILING = 1e12
"""Times the size of a signal beyond which a loop has run away."""

_LONGEST_JUMP = 100.0
_MODE, _EFFORT = pid.STATE.index("mode"), pid.STATE.index("effort")


class Bench:
    """A loop that goes on from where it is; plant and controller may be changed in between.

    Parameters
    ----------
    sheet : Sheet
        With a sampled controller.
    member : Member
    """

    def __init__(self, sheet: Sheet, member: Member) -> None:
        self.sheet, self.member, self.count = sheet, member, 0
        self.ran_away = False
        self._constants, self._feeds = _designed(sheet)
        self._filters = _begun(self._feeds, sheet, (None, None, None))
        self._wired = wire(sheet, (member,), sheet.controller.sample_time)
        self._law, self._x = np.zeros(len(pid.STATE)), np.zeros(self._wired.c.shape[2])
        length = self._needed()
        self._efforts, self._disturbances = np.zeros(length), np.zeros(length)

    @property
    def effort(self) -> float:
        """The last effort, as a deviation."""
        return float(self._law[_EFFORT])

    @property
    def mode(self) -> float:
        """The mode of the law, see `law.pid`."""
        return float(self._law[_MODE])

    def set_mode(self, mode: float) -> None:
        """Set the mode of the law."""
        self._law[_MODE] = mode

    def forget_integral(self) -> None:
        """Let the integral part begin anew, where nothing carries it over."""
        self._law[pid.STATE.index("integral")] = 0.0

    def restart(self) -> None:
        """Bring plant and controller to rest."""
        self._law[:] = self._x[:] = self._efforts[:] = self._disturbances[:] = 0.0
        self._filters = _begun(self._feeds, self.sheet, (None, None, None))
        self.ran_away = False

    def retune(self, sheet: Sheet, reference: float, disturbance: float) -> None:
        """Take another controller of the same sample time; filters that are not the same begin settled.

        Parameters
        ----------
        reference, disturbance : float
            What the filters have settled at: reference and measured disturbance, engineering units.

        Raises
        ------
        LoopError
            When the controller cannot be computed; nothing is changed then.
        """
        constants, feeds = _designed(sheet)
        wired = wire(sheet, (self.member,), sheet.controller.sample_time)
        begun = _begun(feeds, sheet, (reference, disturbance, reference))
        known = zip(feeds, self._feeds, self._filters, begun, strict=True)
        self._filters = tuple(kept if new == old else anew for new, old, kept, anew in known)
        self.sheet, self._constants, self._feeds = sheet, constants, feeds
        self._replant(wired)

    def change_plant(self, member: Member) -> None:
        """Go on with another plant; the output stays where it is, and moves from there.

        Raises
        ------
        LoopError
            When the plant cannot be computed; nothing is changed then.
        """
        wired = wire(self.sheet, (member,), self.sheet.controller.sample_time)
        before = self.output()
        self.member = member
        self._replant(wired)
        after = self.output()
        ratio = before / after if after else 0.0
        if 1.0 / _LONGEST_JUMP < abs(ratio) < _LONGEST_JUMP:
            self._x[self._plant_states()] *= ratio

    def output(self) -> float:
        """Return the output as it is now, as a deviation, without what answers the effort at once."""
        return float(self._wired.c[0, 0] @ self._x)

    def advance(self, reference: Array, noise: Array, disturbance: Array, by_hand: float) -> Array:
        """Go on by some samples.

        Parameters
        ----------
        reference : ndarray, shape (s,)
            Engineering units.
        noise, disturbance : ndarray, shape (s,)
            Noise of the measurement; disturbance, as a deviation.
        by_hand : float
            Effort by hand, engineering units; finite.

        Returns
        -------
        ndarray, shape (5, n)
            See `kernels.rehearsal.advance`; fewer than s only where the loop has run away.
        """
        asked, effort = self._fed(reference, disturbance)
        given = np.stack((asked, effort, np.full(len(reference), by_hand), noise, disturbance))
        seen = np.empty((5, len(reference)))
        wired, held = self._wired, self._wired.held
        ran = advance(
            self.count, self._constants, held.growth[0], held.old[0], held.new[0], wired.c[0], wired.direct[0],
            self._delay(), float(self.sheet.sensor.resolution), self._ceiling(), given, self._law, self._x,
            self._efforts, self._disturbances, seen,
        )  # fmt: skip
        self.count += ran
        self.ran_away = self.ran_away or ran < len(reference)
        return seen[:, :ran]

    def _fed(self, reference: Array, disturbance: Array) -> tuple[Array, Array]:
        """Return what the law is asked for, engineering units, and the effort of the feedforwards, a deviation."""
        forward, against, asked = self._filters
        effort = np.zeros(len(reference)) if forward is None else forward.take(reference)
        if against is not None:
            effort = effort + against.take(disturbance + _apart(self.sheet))
        rest = self.sheet.loop.controlled.resting
        return reference if asked is None else asked.take(reference) + rest, effort

    def _ceiling(self) -> Array:
        trial = self.sheet.trial
        size = max(abs(trial.reference), abs(trial.disturbance), abs(self.sheet.loop.controlled.resting), 1e-300)
        return np.minimum(np.array([size, size]) * CEILING, 1e150)

    def _delay(self) -> NDArray[np.int64]:
        delay: NDArray[np.int64] = self._wired.delay[0] + np.array([self.sheet.controller.delay_samples, 0])
        return delay

    def _needed(self) -> int:
        return int(self._delay().max()) + 2

    def _replant(self, wired: Wired) -> None:
        """Go on with another plant, its states where they were if it has as many, and a past as long as it needs."""
        order, x = wired.c.shape[2], self._x
        self._wired = wired
        self._x = x if len(x) == order else np.zeros(order)
        if self._needed() > len(self._efforts):
            self._efforts, self._disturbances = (
                _longer(ring, self.count, self._needed()) for ring in (self._efforts, self._disturbances)
            )

    def _plant_states(self) -> slice:
        """Return which states are those of the plant and of the disturbance's path."""
        first = 1 if self.sheet.actuator.lag else 0
        return slice(first, len(self._x) - (1 if self.sheet.sensor.lag else 0))


def _designed(sheet: Sheet) -> tuple[Array, Feeds]:
    step = sheet.controller.sample_time
    constants = np.array(law_constants(sheet, step, sheet.controller.measurement_filter))
    return constants, feeds_of(sheet, nominal(sheet), step)


def _apart(sheet: Sheet) -> float:
    measured = sheet.controller.disturbance_feedforward
    return measured.resting if measured else 0.0


_Filters = tuple[Running | None, ...]


def _begun(feeds: Feeds, sheet: Sheet, settled: tuple[float | None, ...]) -> _Filters:
    rest = sheet.loop.controlled.resting

    def begun(one: Digital | None, resting: float, value: float | None) -> Running | None:
        return None if one is None else Running(one, resting, value)

    return tuple(map(begun, feeds, (rest, _apart(sheet), rest), settled))


def _longer(ring: Array, count: int, length: int) -> Array:
    """Return a longer ring that holds the same past."""
    out = np.zeros(length)
    for sample in range(max(count - len(ring), 0), count):
        out[sample % length] = ring[sample % len(ring)]
    return out

"""The controller that a delivery must equal: the law as it is simulated, with the switches of the delivered files."""

from collections import deque
from collections.abc import Iterable
from enum import IntEnum, IntFlag
from math import isfinite
from typing import NamedTuple

from tuner.law import pid
from tuner.law.constants import Constants
from tuner.law.feedforward import scaled, section
from tuner.simulate.feeding import Digital, Feeds

NO_FEEDS = Feeds()
"""No filter at all."""


class Before(IntEnum):
    """What is done to the controller right before it takes a sample."""

    NOTHING = 0
    MANUAL = 1
    AUTO = 2
    RESET = 3


class Flags(IntFlag):
    """What a controller says beside its effort."""

    LIMITED = 1
    FAULT = 2
    MANUAL = 4


class Sample(NamedTuple):
    """What a controller is given: `before`, with `value` as the effort by hand, then one sample; engineering units.

    `disturbance` is the measured one, which only a controller with feedforward from it looks at.
    """

    before: Before
    value: float
    reference: float
    measurement: float
    disturbance: float = 0.0


class Outcome(NamedTuple):
    """What it answers: the effort in engineering units, and its flags."""

    effort: float
    flags: int


class Filter:
    """A filter that runs the sections of the law's room themselves.

    Parameters
    ----------
    digital : Digital
    resting : float
        Value of what comes in at the resting point, engineering units.
    """

    __slots__ = ("_digital", "_late", "_memories", "_resting")

    def __init__(self, digital: Digital, resting: float) -> None:
        self._digital, self._resting = digital, resting
        self.reset()

    def reset(self) -> None:
        """Go to rest."""
        self._late = deque([self._resting] * self._digital.delay)
        self._memories = [(0.0, 0.0)] * len(self._digital.sections)

    def take(self, value: float) -> float:
        """Take one value in engineering units and return what comes out, as a deviation.

        A value that is not finite spoils what comes out right then; where it would come late, the last good one does.
        """
        if not self._digital.delay:
            return self._through(value)
        self._late.append(value if isfinite(value) else self._late[-1])
        return self._through(self._late.popleft()) + (value - value)

    def _through(self, value: float) -> float:
        passed = scaled(value, self._resting, self._digital.gain)
        for place, constants in enumerate(self._digital.sections):
            passed, *memories = section(passed, *self._memories[place], *constants)
            self._memories[place] = (memories[0], memories[1])
        return passed


class Reference:
    """A controller that runs `pid.law` itself.

    Parameters
    ----------
    constants : Constants
        As `constants.bake` makes them.
    feeds : Feeds
        Its filters beside the law.
    resting_disturbance : float
        Value of the measured disturbance at the resting point.
    feedback : bool
        False for feedforward alone.
    """

    __slots__ = ("_constants", "_feedback", "_filters", "_manual_effort", "_state")

    def __init__(
        self,
        constants: Constants,
        feeds: Feeds = NO_FEEDS,
        *,
        resting_disturbance: float = 0.0,
        feedback: bool = True,
    ) -> None:
        self._constants = constants
        rest = constants.resting_measurement, resting_disturbance, constants.resting_measurement
        self._filters = [Filter(one, resting) if one else None for one, resting in zip(feeds, rest, strict=True)]
        self._feedback = feedback
        self.reset()

    @property
    def deviation(self) -> float:
        """Effort as a deviation from rest."""
        return self._state[0]

    def reset(self) -> None:
        """Go to the resting point, in automatic."""
        self._state: tuple[float, ...] = (0.0,) * len(pid.STATE)
        self._manual_effort = self._constants.resting_effort
        for one in self._filters:
            if one is not None:
                one.reset()

    def set_manual(self, effort: float) -> None:
        """Take the effort by hand from the next sample on."""
        self._manual_effort = effort
        self._set_mode(pid.MANUAL)

    def set_auto(self) -> None:
        """Go from manual to automatic; without feedback there is no integral to carry the effort over."""
        if self._state[pid.STATE.index("mode")] != pid.MANUAL:
            return
        self._manual_effort = self._state[0] + self._constants.resting_effort
        self._set_mode(pid.TRANSFER)
        if not self._feedback:
            self._set_mode(pid.AUTOMATIC)
            self._set("integral", 0.0)

    def take(self, sample: Sample) -> Outcome:
        """Do what comes before the sample, take it, and answer."""
        if sample.before == Before.MANUAL:
            self.set_manual(sample.value)
        elif sample.before == Before.AUTO:
            self.set_auto()
        elif sample.before == Before.RESET:
            self.reset()
        return self._step(sample)

    def run(self, samples: Iterable[Sample]) -> tuple[Outcome, ...]:
        """Take samples one after the other."""
        return tuple(self.take(sample) for sample in samples)

    def _step(self, sample: Sample) -> Outcome:
        constants = self._constants
        forward, against, asked = self._filters
        feedforward = 0.0 if forward is None else forward.take(sample.reference)
        if against is not None:
            feedforward = feedforward + against.take(sample.disturbance)
        reference = sample.reference
        if asked is not None:
            reference = asked.take(reference) + constants.resting_measurement
        given = (reference, sample.measurement, feedforward, self._manual_effort, *self._state, *constants)
        self._state = state = pid.law(*given)
        *_, mode, limited, fault = state
        flags = limited + 2.0 * fault + (4.0 if mode == pid.MANUAL else 0.0)  # Flags, without their slow arithmetic
        return Outcome(state[0] + constants.resting_effort, int(flags))

    def _set_mode(self, mode: float) -> None:
        self._set("mode", mode)

    def _set(self, name: str, value: float) -> None:
        state = list(self._state)
        state[pid.STATE.index(name)] = value
        self._state = tuple(state)

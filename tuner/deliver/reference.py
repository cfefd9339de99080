"""The controller that a delivery must equal: the law as it is simulated, with the switches of the delivered files."""

from collections.abc import Iterable
from enum import IntEnum, IntFlag
from typing import NamedTuple

from tuner.law import pid
from tuner.law.constants import Constants
from tuner.law.feedforward import static


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
    """What a controller is given: `before`, with `value` as the effort by hand, then one sample; engineering units."""

    before: Before
    value: float
    reference: float
    measurement: float


class Outcome(NamedTuple):
    """What it answers: the effort in engineering units, and its flags."""

    effort: float
    flags: int


class Reference:
    """A controller that runs `pid.law` itself.

    Parameters
    ----------
    constants : Constants
        As `constants.bake` makes them.
    feedforward_gain : float or None
        Effort for each unit of reference; None for no feedforward.
    feedback : bool
        False for feedforward alone.
    """

    __slots__ = ("_constants", "_feedback", "_gain", "_manual_effort", "_state")

    def __init__(self, constants: Constants, feedforward_gain: float | None = None, *, feedback: bool = True) -> None:
        self._constants = constants
        self._gain = feedforward_gain
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
        return self._step(sample.reference, sample.measurement)

    def run(self, samples: Iterable[Sample]) -> tuple[Outcome, ...]:
        """Take samples one after the other."""
        return tuple(self.take(sample) for sample in samples)

    def _step(self, reference: float, measurement: float) -> Outcome:
        constants = self._constants
        feedforward = 0.0 if self._gain is None else static(reference, constants.resting_measurement, self._gain)
        given = (reference, measurement, feedforward, self._manual_effort, *self._state, *constants)
        self._state = state = pid.law(*given)
        _, _, _, _, _, _, _, mode, limited, fault = state
        flags = limited + 2.0 * fault + (4.0 if mode == pid.MANUAL else 0.0)  # Flags, without their slow arithmetic
        return Outcome(state[0] + constants.resting_effort, int(flags))

    def _set_mode(self, mode: float) -> None:
        self._set("mode", mode)

    def _set(self, name: str, value: float) -> None:
        state = list(self._state)
        state[pid.STATE.index(name)] = value
        self._state = tuple(state)

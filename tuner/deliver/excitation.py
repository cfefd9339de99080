"""The long run that every delivered file must repeat: the closed loop, kicked in every way that a site knows."""

from array import array
from collections.abc import Callable
from dataclasses import dataclass
from math import nan
from random import Random

from tuner.deliver.reference import Before, Outcome, Sample
from tuner.deliver.specification import Specification
from tuner.deliver.vectors import Scales, scales
from tuner.law.constants import UNLIMITED

_SEED = 20017

PlantStep = Callable[[float], float]
"""Takes the effort of one sample, as a deviation, and returns the measurement of the next, as a deviation."""


@dataclass(frozen=True, slots=True, eq=False)
class Recording:
    """What a controller was given, and what the law answered; exact. The first sample finds it reset."""

    samples: tuple[Sample, ...]
    outcomes: tuple[Outcome, ...]

    def then(self, other: "Recording") -> "Recording":
        """Return this recording with another after it."""
        return Recording(self.samples + other.samples, self.outcomes + other.outcomes)

    def inputs(self) -> bytes:
        """Return the samples as five doubles each, in the byte order of this machine."""
        return array("d", (float(number) for sample in self.samples for number in sample)).tobytes()


def excite(specification: Specification, plant: Callable[[], PlantStep], steps: int) -> Recording:
    """Run the law in closed loop for `steps` samples and record it.

    `plant` makes a plant at rest; it is made anew when an unstable loop has run away, as an operator would start over.
    """
    kicks = _Kicks(specification)
    reference, push = specification.reference(), plant()
    samples: list[Sample] = []
    outcomes: list[Outcome] = []
    measurement, start_over = 0.0, True
    for position in range(steps):
        before, value = (Before.RESET, 0.0) if start_over else kicks.switch(position)
        given = kicks.reference(position), kicks.reading(position, measurement), kicks.measured(position)
        sample = Sample(before, value, *given)
        outcomes.append(reference.take(sample))
        samples.append(sample)
        measurement = push(reference.deviation + kicks.disturbance(position))
        start_over = not abs(measurement) < kicks.far
        if start_over:
            measurement, push = 0.0, plant()
    return Recording(tuple(samples), tuple(outcomes))


class _Kicks:
    """References, disturbances, noise, unusable readings, and the hand on the manual switch."""

    def __init__(self, specification: Specification) -> None:
        self._random = Random(_SEED)  # noqa: S311 - repeatable on purpose
        constants = specification.constants
        self._scale: Scales = scales(specification.sheet, constants)
        self._rest, self._rest_effort = constants.resting_measurement, constants.resting_effort
        self._low = constants.low if constants.low > -UNLIMITED else -self._scale.effort
        self._high = constants.high if constants.high < UNLIMITED else self._scale.effort
        self._reference, self._disturbance = self._rest, 0.0
        self._apart, self._measured = specification.resting_disturbance, specification.resting_disturbance
        self._against = specification.feeds.disturbance is not None
        self.far = 1e3 * self._scale.large

    def reference(self, position: int) -> float:
        if position % 400 == 0:
            reach = self._scale.small if position % 1200 else self._scale.large
            self._reference = self._rest + reach * self._random.uniform(-1.0, 1.0)
        return self._reference

    def disturbance(self, position: int) -> float:
        if position % 700 == 0:
            self._disturbance = 0.2 * self._scale.effort * self._random.uniform(-1.0, 1.0)
        return self._disturbance

    def measured(self, position: int) -> float:
        """Return the measured disturbance, which now and then cannot be used."""
        if not self._against:
            return 0.0
        if position % 600 == 0:
            self._measured = self._apart + 0.2 * self._scale.effort * self._random.uniform(-1.0, 1.0)
        return nan if position % 7000 == 6999 else self._measured

    def reading(self, position: int, measurement: float) -> float:
        noisy = self._rest + measurement + 0.05 * self._scale.small * self._random.gauss(0.0, 1.0)
        return nan if position % 5000 == 4999 else noisy

    def switch(self, position: int) -> tuple[Before, float]:
        if position % 1000 == 800 or position % 2000 == 850:
            reach = 1.4 * self._random.random() - 0.2
            return Before.MANUAL, self._rest_effort + self._low + reach * (self._high - self._low)
        return (Before.AUTO if position % 1000 == 900 else Before.NOTHING), 0.0

"""Samples with known answers, short enough to stand in a delivered file, that lead through every branch of the law."""

from collections.abc import Iterator
from enum import IntEnum
from math import inf, nan
from random import Random
from typing import NamedTuple

from tuner.deliver.reference import Before, Outcome, Reference, Sample
from tuner.law.constants import UNLIMITED, Constants
from tuner.model.loop import Signal
from tuner.model.sheet import Sheet

_SEED = 1704


class Spoiled(IntEnum):
    """What a file makes of a row's numbers before it uses them, because not every language can write these."""

    NOTHING = 0
    MEASUREMENT_NAN = 1
    REFERENCE_INFINITE = 2
    MEASUREMENT_MINUS_INFINITE = 3
    VALUE_NAN = 4
    DISTURBANCE_NAN = 5


class Row(NamedTuple):
    """One sample, finite numbers only, and the answer to it."""

    sample: Sample
    spoiled: Spoiled
    outcome: Outcome

    def spoilt(self) -> Sample:
        """Return the sample that is really given."""
        return spoil(self.sample, self.spoiled)


def spoil(sample: Sample, spoiled: Spoiled) -> Sample:
    """Return a sample with one of its numbers made not finite."""
    match spoiled:
        case Spoiled.MEASUREMENT_NAN:
            return sample._replace(measurement=nan)
        case Spoiled.REFERENCE_INFINITE:
            return sample._replace(reference=inf)
        case Spoiled.MEASUREMENT_MINUS_INFINITE:
            return sample._replace(measurement=-inf)
        case Spoiled.VALUE_NAN:
            return sample._replace(value=nan)
        case Spoiled.DISTURBANCE_NAN:
            return sample._replace(disturbance=nan)
        case _:
            return sample


class Scales(NamedTuple):
    """How large things are: `small` and `large` changes of the measurement, and the span of the effort."""

    small: float
    large: float
    effort: float


def scales(sheet: Sheet, constants: Constants) -> Scales:
    """Return changes of the measurement that stay within the limits of the effort, and that go beyond."""
    trial = sheet.trial
    effort = span(sheet.loop.manipulated, trial.disturbance)
    large = span(sheet.loop.controlled, trial.reference)
    steepness = constants.proportional_gain + constants.derivative_gain
    room = min([effort, *(abs(x) for x in (constants.low, constants.high) if 0.0 < abs(x) < UNLIMITED)])
    if steepness == 0.0:
        return Scales(large / 20.0, large, effort)
    beyond = min(4.0 * effort / steepness, 1e6 * large)  # a gain may be as good as zero
    return Scales(min(large / 20.0, room / (8.0 * steepness)), max(large, beyond), effort)


def span(signal: Signal, step: float) -> float:
    """Return the range of a signal, or five times the step of the trial when it has none."""
    if signal.low is not None and signal.high is not None:
        return signal.high - signal.low
    return 5.0 * abs(step) or 5.0


def rows(sheet: Sheet, constants: Constants, reference: Reference) -> tuple[Row, ...]:
    """Return two hundred rows, a few more where a disturbance is measured, with the answers of the reference."""
    found: list[Row] = []
    measured = sheet.controller.disturbance_feedforward
    resting = measured.resting if measured and measured.acts else None
    for sample, spoiled in _Scenario(scales(sheet, constants), constants, resting).samples():
        found.append(Row(sample, spoiled, reference.take(spoil(sample, spoiled))))
    return tuple(found)


class _Scenario:
    """Writes the samples; the measurement wanders, the reference steps, and switches are thrown in between."""

    def __init__(self, scale: Scales, constants: Constants, resting_disturbance: float | None) -> None:
        self._apart, self._count = resting_disturbance, 0
        self._random = Random(_SEED)  # noqa: S311 - repeatable on purpose
        self._scale = scale
        self._rest = constants.resting_measurement
        self._rest_effort = constants.resting_effort
        self._low = constants.low if constants.low > -UNLIMITED else -scale.effort
        self._high = constants.high if constants.high < UNLIMITED else scale.effort
        # A rate beyond every measure is as good as none.
        self._rate = constants.rate_step if constants.rate_step < 1e6 * scale.effort else 0.0

    def samples(self) -> Iterator[tuple[Sample, Spoiled]]:
        """Yield samples and what spoils them."""
        yield from self._automatic(24, self._scale.small)
        yield from self._automatic(32, self._scale.large)
        spoiling = [Spoiled.MEASUREMENT_NAN, Spoiled.REFERENCE_INFINITE, Spoiled.MEASUREMENT_MINUS_INFINITE]
        for spoiled in spoiling + [Spoiled.DISTURBANCE_NAN] * (self._apart is not None):
            yield self._row(spoiled=spoiled)
            yield from self._automatic(4, self._scale.small)
        yield from self._by_hand()
        yield from self._transfer(0.3)
        yield self._row(Before.AUTO)
        yield from self._automatic(12, self._scale.small)
        yield self._row(Before.MANUAL, self._between(0.6))
        yield from self._transfer(0.7)
        yield self._row(Before.RESET)
        yield from self._automatic(21, self._scale.large / 4.0)

    def _by_hand(self) -> Iterator[tuple[Sample, Spoiled]]:
        reach = max(self._high - self._low, self._rate)
        for effort in (self._between(0.5), self._high + reach, self._low - reach, self._between(0.4)):
            yield self._row(Before.MANUAL, effort)
            for _ in range(10):
                yield self._row()
        yield self._row(Before.MANUAL, self._between(0.5), Spoiled.VALUE_NAN)
        yield self._row(Before.MANUAL, self._between(0.3))
        yield self._row(spoiled=Spoiled.MEASUREMENT_NAN)

    def _transfer(self, share: float) -> Iterator[tuple[Sample, Spoiled]]:
        """Go to automatic, once with a reading that is no number just then."""
        for _ in range(6):
            yield self._row(Before.MANUAL, self._between(share))
        yield self._row(Before.AUTO, spoiled=Spoiled.MEASUREMENT_NAN)
        yield from self._automatic(16, self._scale.small)

    def _automatic(self, count: int, reach: float) -> Iterator[tuple[Sample, Spoiled]]:
        for position in range(count):
            sign = 1.0 if position % 16 < 8 else -1.0
            yield self._row(reference=sign * reach, wander=0.3 * reach)

    def _between(self, share: float) -> float:
        return self._low + share * (self._high - self._low)

    def _row(
        self,
        before: Before = Before.NOTHING,
        value: float = 0.0,
        spoiled: Spoiled = Spoiled.NOTHING,
        *,
        reference: float = 0.0,
        wander: float = 0.0,
    ) -> tuple[Sample, Spoiled]:
        measurement = self._rest + self._random.uniform(-1.0, 1.0) * (wander or self._scale.small)
        by_hand = _short(self._rest_effort + value) if before == Before.MANUAL else 0.0
        return Sample(before, by_hand, _short(self._rest + reference), _short(measurement), self._measured()), spoiled

    def _measured(self) -> float:
        """Return a measured disturbance that steps every ten rows; 0 where nobody looks at it."""
        if self._apart is None:
            return 0.0
        self._count += 1
        return _short(self._apart + 0.1 * self._scale.effort * ((self._count // 10) % 3 - 1))


def _short(value: float) -> float:
    """Return a number that is short to write."""
    return float(f"{value:.9g}")

"""What a controller is fed beside its measurement, sample by sample: feedforward efforts and the filtered reference.

A filter is made into sections that give, at the samples, exactly what it gives to a signal that is held between them.
The simulation and every delivered file run the same sections.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from math import isclose, isfinite
from typing import NamedTuple

import numpy as np

from tuner.kernels.filters import filtered
from tuner.model.sheet import Sheet
from tuner.simulate.algebra import series
from tuner.simulate.discrete import Held, hold, split
from tuner.simulate.factors import to_x
from tuner.simulate.feedforward import disturbance_feedforward, lags_of_reference, reference_feedforward
from tuner.simulate.linear import Linear, from_state_space, lag, with_conjugates
from tuner.simulate.sections import paired
from tuner.simulate.traces import Array, ComplexArray
from tuner.simulate.wiring import Process


@dataclass(frozen=True, slots=True)
class Digital:
    """A filter at one sample time.

    Parameters
    ----------
    gain : float
        What it begins with, see `law.feedforward.scaled`.
    sections : tuple of tuple of float
        Five constants each, in the order of `law.feedforward.SECTION`; each with a gain of one, static where it has
        that, else in its leading coefficients.
    delay : int
        Whole samples of dead time before all of it.
    """

    gain: float
    sections: tuple[tuple[float, ...], ...] = ()
    delay: int = 0

    def run(self, value: Array, resting: float) -> Array:
        """Return what becomes of a signal in engineering units, as a deviation; shape of `value`."""
        return Running(self, resting).take(value)


class Running:
    """A filter that goes on from where it is.

    Parameters
    ----------
    digital : Digital
    resting : float
        Value of what comes in at the resting point, engineering units.
    settled : float or None
        Value at which it has settled when it begins; the resting one unless given.
    """

    def __init__(self, digital: Digital, resting: float, settled: float | None = None) -> None:
        begin = resting if settled is None else settled
        self._gain, self._resting = digital.gain, resting
        self._sections = np.array(digital.sections, dtype=float).reshape(-1, 5)
        self._late, self._place = np.full(digital.delay, float(begin)), np.zeros(1, dtype=np.int64)
        self._memories = np.array([_settled(one, digital.gain * (begin - resting)) for one in digital.sections])
        self._memories = self._memories.reshape(-1, 2)

    def take(self, value: Array) -> Array:
        """Return what becomes of further values in engineering units, as deviations; shape of `value`."""
        out = np.empty(len(value))
        given = np.ascontiguousarray(value, dtype=float)
        filtered(given, self._resting, self._gain, self._sections, self._memories, self._late, self._place, out)
        return out


def _settled(section: tuple[float, ...], value: float) -> tuple[float, float]:
    """Return the memories of a section that has settled at a value; of one that never settles, none."""
    b0, b1, b2, a1, a2 = section
    if not isclose(b2, a2, rel_tol=1e-9) or not (a2 or isclose(b1, a1, rel_tol=1e-9)):
        return 0.0, 0.0
    return (1.0 - b0) * value, (a1 - b1) * value if a2 else 0.0


class Feeds(NamedTuple):
    """The filters of one controller at one sample time; None for those that it does not have.

    `reference` makes an effort of the reference, `disturbance` one of the measured disturbance, `asked` makes what
    the law is asked for of the reference.
    """

    reference: Digital | None = None
    disturbance: Digital | None = None
    asked: Digital | None = None


class Fed(NamedTuple):
    """What the law is given in the reference run and in the disturbance run, deviations, shapes (2, s)."""

    effort: Array
    asked: Array


def feeds_of(sheet: Sheet, process: Process, sample_time: float) -> Feeds:
    """Return the filters of a sheet's controller, designed for one plant, the nominal one.

    Raises
    ------
    LoopError
        When one cannot be made, with the reason.
    """
    controller, path = sheet.controller, process.disturbance_path
    driven = series(lag(sheet.actuator.lag), process.plant)
    forward, against = reference_feedforward(controller, driven), controller.disturbance_feedforward
    cancelling = disturbance_feedforward(against, path, driven) if against and against.acts and path else None
    asked = controller.reference_filter
    return Feeds(
        digital(forward, sample_time) if forward else None,
        digital(cancelling, sample_time) if cancelling else None,
        digital(lags_of_reference(asked), sample_time) if asked else None,
    )


def fed(sheet: Sheet, feeds: Feeds, samples: int) -> Fed:
    """Return what the law is given at each sample of the trial."""
    rest, step = sheet.loop.controlled.resting, sheet.trial.reference
    reference = np.full(samples, step + rest)
    effort, asked = np.zeros((2, samples)), np.zeros((2, samples))
    if feeds.reference is not None:
        effort[0] = feeds.reference.run(reference, rest)
    if feeds.disturbance is not None:
        against = sheet.controller.disturbance_feedforward
        apart = against.resting if against else 0.0
        effort[1] = feeds.disturbance.run(np.full(samples, sheet.trial.disturbance + apart), apart)
    asked[0] = step if feeds.asked is None else feeds.asked.run(reference, rest)
    return Fed(effort, asked)


@lru_cache(maxsize=64)
def digital(system: Linear, step: float) -> Digital:
    """Return what a filter is at the samples of a signal held for `step`, each just after what happens at it.

    Poles are exact, exp(p step); zeros are those of the exact equivalent under the hold.

    Raises
    ------
    LoopError
        When the dead time is too long for the step.
    """
    if not system.order and not system.dead_time:
        return Digital(system.d)
    held = hold(system, step)
    at_once = split(system.dead_time, step).offset == 0.0
    seen = from_state_space(*_just_after(held, at_once=at_once))
    poles = to_x(system.poles, step)
    if not at_once:
        poles = np.append(poles, -1.0 + 0.0j)
    gain, sections = _sections(seen.zeros, with_conjugates(poles, "pole"), seen.gain)
    static = system.static_gain()
    # Each section then has a static gain of one, so that the whole has that of the filter to the last digit.
    return Digital(static if static and isfinite(static) else gain, sections, held.steps)


def _just_after(held: Held, *, at_once: bool) -> tuple[Array, Array, Array, float]:
    """Return x -> a x + b u, y = c x + d u in z - 1; a jump between samples is remembered until it has arrived."""
    if at_once:
        return held.growth, held.new, held.c, held.d
    order = len(held.c)
    a = np.zeros((order + 1, order + 1))
    a[:order, :order], a[:order, order], a[order, order] = held.growth, held.old, -1.0
    return a, np.append(held.new, 1.0), np.append(held.c, held.d), 0.0


def _sections(zeros: ComplexArray, poles: ComplexArray, gain: float) -> tuple[float, tuple[tuple[float, ...], ...]]:
    """Return a gain, and sections of a gain of one, that together are gain prod(x - zeros) / prod(x - poles)."""
    found = []
    for part in paired(zeros, poles):
        over, under = _polynomial(part.zeros, len(part.poles)), _polynomial(part.poles, len(part.poles))
        scale = float(over[-1] / under[-1]) if over[-1] and under[-1] else 1.0
        gain *= scale
        found.append(_row(over / scale, under))
    return gain, tuple(found)


def _polynomial(roots: Sequence[complex], degree: int) -> Array:
    """Return the coefficients of a monic polynomial, highest power first, with zeros before it up to a degree."""
    own = np.real(np.poly(roots)) if roots else np.ones(1)
    return np.concatenate((np.zeros(degree + 1 - len(own)), own))


def _row(over: Array, under: Array) -> tuple[float, ...]:
    """Return the constants of a section of one or two poles."""
    return tuple(float(value) for value in (*over, *[0.0] * (3 - len(over)), *under[1:], *[0.0] * (3 - len(under))))

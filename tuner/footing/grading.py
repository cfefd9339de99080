"""The class of many tunings of one sheet at once: bounds decide most, the road of the assessment itself the rest."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field, replace
from functools import partial
from math import ceil, nan

import numpy as np
from numpy.typing import NDArray

from tuner.assess import results_of
from tuner.footing.chains import Chains
from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN, Classes, Overtaken, never
from tuner.footing.exact import exactly
from tuner.footing.ground import Ground
from tuner.footing.threads import spread_out
from tuner.footing.tunings import Numbers, Tunings
from tuner.kernels import grades, lanes, readings, responses
from tuner.law.constants import GainConstants, gain_constants
from tuner.measure.final import family_final_values
from tuner.measure.loop import damping_of
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet
from tuner.simulate.batch import RUNAWAY, law_constants
from tuner.simulate.loop import loops_of
from tuner.simulate.poles import family_poles
from tuner.simulate.traces import Array

_FIRST = 3
"""Plants that every tuning is tried with before those that are left are put together anew."""

_WEIGHTS = ("b", "c")

_STEPS_OF_WINDUP = 8.0
"""Steps of a continuous controller's runs that its wind-up time takes at least."""

Flags = NDArray[np.bool_]

_NOTHING = (-1, np.zeros((2, 0, 0)))
"""No measure is watched."""


@dataclass(slots=True, eq=False)
class Grading:
    """Tunings being graded.

    Parameters
    ----------
    sheet : Sheet
        Whose controller each of the tunings takes the place of.
    ground : Ground
    tunings : Tunings
    stop : callable
        Whether a newer question has come.
    """

    sheet: Sheet
    ground: Ground
    tunings: Tunings
    stop: Callable[[], bool] = never
    numbers: Numbers = field(init=False)
    doubts: dict[int, list[int]] = field(default_factory=dict)
    misses: NDArray[np.int64] = field(init=False)
    baked: dict[float, Array] = field(default_factory=dict)

    def __post_init__(self) -> None:
        """Take the numbers of the tunings out, for what looks at all of them at once."""
        self.numbers = self.tunings.numbers()
        self.misses = np.zeros(len(self.ground.members), dtype=np.int64)

    def order(self) -> list[int]:
        """Return the plants, those that are likeliest to miss a limit first, the nominal one last."""
        order = np.roll(np.arange(len(self.ground.members)), -1)
        found: list[int] = order[np.argsort(-self.ground.misses[order], kind="stable")].tolist()
        return found

    def classes(self, lost: Flags, unsure: Flags, *, settle: bool = True) -> Classes:
        """Return the class of every tuning, shape (t,), given which are lost and of which that is not sure.

        Those that bounds leave in doubt are unknown, unless they are to be settled: `doubts` then says with which
        plants.
        """
        found = np.where(lost, LOST, FIRM).astype(np.int8)
        active = (~lost & ~unsure).astype(np.uint8)
        doubt = np.zeros((len(self.tunings), len(self.ground.members)), dtype=np.uint8)
        if self.sheet.limits:
            looked_at = active.copy()
            self._try_trials(active, doubt)
            self._try_margins(active, doubt)
            self._try_damping(active)
            found[(looked_at != 0) & (active == 0)] = SOFT
            self._note_doubts(found, active, doubt)
        found[unsure] = UNKNOWN
        self.doubts |= {at: list(range(len(self.ground.members))) for at in np.flatnonzero(unsure).tolist()}
        # Half of what was is forgotten, so that the plants that matter now come first.
        self.ground.misses[:] = self.ground.misses // 2 + self.misses
        if settle:
            for at, members in self.doubts.items():
                self._check()
                found[at] = exactly(self.sheet, self.ground, self.tunings[at], members)
        return found

    def watch(self, measure: str, stable: Flags) -> Array:
        """Return the worst value of a measure over the family for every tuning that is stable, shape (t,).

        Not a number where the measure does not exist for some plant, where it is not told, and where a tuning is not
        stable. Between the bounds of a value its middle is taken, of a peak the largest value at any point.
        """
        out = np.full(len(self.tunings), nan)
        left = np.flatnonzero(stable)
        if not len(left):
            return out
        if measure in readings.MEASURES:
            low, high = self._watched_trials(left, readings.MEASURES.index(measure))
        elif measure in responses.MEASURES and self.sheet.controller.feedback:
            low, high = self._watched_margins(left, responses.MEASURES.index(measure))
        else:
            low = high = self._exact_values(left, measure)
        with np.errstate(invalid="ignore"):
            middle = low if measure in responses.PEAKS else 0.5 * (low + high)
            worst = middle.min(axis=1) if BY_NAME[measure].at_least else middle.max(axis=1)
        out[left] = np.where(np.isfinite(worst), worst, nan)
        return out

    def _watched_trials(self, left: NDArray[np.intp], which: int) -> tuple[Array, Array]:
        none = np.full(len(readings.MEASURES), nan)
        values = np.full((2, len(left), len(self.ground.members)), nan)
        size = self._runs()[0 if which < readings.REFERENCE_COUNT else 1][0]
        if size and self.ground.bounded:
            active = np.ones(len(self.tunings), dtype=np.uint8)
            self._run(left, range(len(self.ground.members)), none, active, _no_doubt(self), (which, values))
        return values[0], values[1]

    def _watched_margins(self, left: NDArray[np.intp], which: int) -> tuple[Array, Array]:
        values = np.full((2, len(left), len(self.ground.members)), nan)
        gains, none = self._gains()[left], np.full(len(responses.MEASURES), nan)
        active, doubt = np.ones(len(left), dtype=np.uint8), np.zeros(values.shape[1:], dtype=np.uint8)
        for chains in self.ground.chains:
            spread_out(partial(_decide, chains, gains, none, active, self.misses, doubt, (which, values)), len(left))
        return values[0], values[1]

    def _exact_values(self, left: NDArray[np.intp], measure: str) -> Array:
        rows = []
        for at in left.tolist():
            self._check()
            sheet = replace(self.sheet, controller=self.tunings[at])
            found = [result.measures[measure] for result in results_of(sheet, self.ground.members)]
            rows.append([nan if value is None else value for value in found])
        return np.array(rows)

    def _gains(self) -> Array:
        some = self.numbers
        return np.column_stack((some.kp, some.ki, some.kd, some.filter_time))

    def _check(self) -> None:
        if self.stop():
            raise Overtaken("a newer question has come")

    def _try_trials(self, active: NDArray[np.uint8], doubt: NDArray[np.uint8]) -> None:
        limits = self._limits(readings.MEASURES)
        if np.isnan(limits).all():
            return
        if not self.ground.bounded or any(not size for size, names in self._runs() if self._has_limit(names)):
            # Measures of a run without a step do not exist: a limit on one is missed, which the assessment says.
            doubt[active != 0] = 1
            return
        if not self.sheet.controller.sample_time:
            doubt[(active != 0) & self._too_fast_for_steps()] = 1
        order = self.order()
        first, rest = order[:_FIRST], order[_FIRST:]
        for members in (first, rest):
            self._check()
            left = np.flatnonzero((active != 0) & ~doubt.all(axis=1))
            if len(left) and members:
                self._run(left, members, limits, active, doubt)

    def _too_fast_for_steps(self) -> Flags:
        """Return what of a continuous controller its steps do not show: so fast a return from a limit, or a kick."""
        some = self.numbers
        too_fast = some.windup_time < _STEPS_OF_WINDUP * self.ground.steps[0]
        if self._has_limit(("peak_effort", "effort_travel")):
            too_fast = too_fast | (some.kd * some.c != 0.0)
        return np.asarray(too_fast)

    def _runs(self) -> tuple[tuple[float, tuple[str, ...]], ...]:
        count = readings.REFERENCE_COUNT
        trial = self.sheet.trial
        return (trial.reference, readings.MEASURES[:count]), (trial.disturbance, readings.MEASURES[count:])

    def _has_limit(self, names: Sequence[str]) -> bool:
        return any(name in names for name, _ in self.sheet.limits)

    def _limits(self, names: Sequence[str]) -> Array:
        known = dict(self.sheet.limits)
        return np.array([known.get(name, nan) for name in names])

    def _run(  # noqa: PLR0913, PLR0917 - what is run, and where it is noted
        self,
        left: NDArray[np.intp],
        members: Sequence[int],
        limits: Array,
        active: NDArray[np.uint8],
        doubt: NDArray[np.uint8],
        watched: tuple[int, Array] = _NOTHING,
    ) -> None:
        """Run the tunings that are left with some plants; `watched` is a measure, and where its bounds go."""
        count = ceil(len(left) / lanes.LANES)
        filled = np.resize(left, count * lanes.LANES)
        constants = np.array([self._constants(filled, step) for step in self.ground.steps])
        together = constants.reshape(len(constants), count, lanes.LANES, -1).swapaxes(2, 3)
        blocks = grades.Blocks(
            np.ascontiguousarray(together).reshape(len(constants), count, -1),
            self._finals(filled).reshape(2, len(self.ground.members), count, lanes.LANES),
            np.ones((count, lanes.LANES), dtype=np.uint8),
            self.misses,
            np.zeros((count, len(self.ground.members), lanes.LANES), dtype=np.uint8),
            np.full((2, count, len(self.ground.members), lanes.LANES) if watched[0] >= 0 else (2, 0, 0, 0), nan),
        )
        course = self._course(members, limits)._replace(watched=watched[0])
        rich = self.rich()
        spread_out(lambda begin, end: grades.grade(self.ground.size, rich, course, blocks, begin, end), count)
        active[left] = blocks.active.reshape(-1)[: len(left)]
        doubt[left] |= blocks.doubt.swapaxes(1, 2).reshape(-1, len(self.ground.members))[: len(left)]
        if watched[0] >= 0:
            flat = blocks.values.swapaxes(2, 3).reshape(2, -1, len(self.ground.members))
            watched[1][:] = flat[:, : len(left)]

    def rich(self) -> lanes.Size:
        """Return whether the measurement has a filter, a lead-lag, a notch or a resolution, as `lanes.run` takes it."""
        controller = self.sheet.controller
        blocks = controller.measurement_filter, controller.lead_lag, controller.notch
        return (0,) if any(blocks) or self.sheet.sensor.resolution else ()

    def _constants(self, places: NDArray[np.intp], step: float) -> Array:
        """Return the constants of the law of some tunings at a step, shape (k, 22)."""
        if step not in self.baked:
            self.baked[step] = self._bake(step)
        found: Array = self.baked[step][places]
        return found

    def _bake(self, step: float) -> Array:
        controller, some = self.sheet.controller, np.array(self.numbers).T
        out = np.tile(np.array(law_constants(self.sheet, step, controller.measurement_filter)), (len(some), 1))
        if controller.feedback:
            own = [gain_constants(step, *gains) for gains in some[:, : -len(_WEIGHTS)].tolist()]
            out[:, : len(GainConstants._fields)] = own
        out[:, len(GainConstants._fields) : len(GainConstants._fields) + len(_WEIGHTS)] = some[:, -len(_WEIGHTS) :]
        return out

    def _course(self, members: Sequence[int], limits: Array) -> grades.Course:
        sheet = self.sheet
        size = max(abs(sheet.trial.reference), abs(sheet.trial.disturbance), 1e-300)
        common = (sheet.loop.controlled.resting, float(sheet.sensor.resolution), RUNAWAY * size)
        wanted = np.array([(sheet.trial.reference, 0.0, *common), (0.0, sheet.trial.disturbance, *common)])
        band = sheet.trial.settling_band / 100.0
        return grades.Course(self.ground.speeds, np.array(members, dtype=np.int64), wanted, band, limits, -1)

    def _finals(self, places: NDArray[np.intp]) -> Array:
        """Return the exact final values, shape (2, p, t); not a number under a resolution, which leaves none."""
        members, some = self.ground.members, self.numbers
        out = np.full((2, len(members), len(places)), nan)
        if self.sheet.sensor.resolution:
            return out
        integral = some.ki[places] > 0.0
        keys = np.where(integral, 0.0, np.column_stack((some.kp[places], some.b[places])).T)
        _, first, which = np.unique(np.column_stack((integral, keys.T)), axis=0, return_index=True, return_inverse=True)
        for kind, at in enumerate(first.tolist()):
            ends = family_final_values(replace(self.sheet, controller=self.tunings[places[at]]), members)
            out[0][:, which == kind] = np.array([end.reference for end in ends])[:, None]
            out[1][:, which == kind] = np.array([end.disturbance for end in ends])[:, None]
        return out

    def _try_margins(self, active: NDArray[np.uint8], doubt: NDArray[np.uint8]) -> None:
        limits = self._limits(responses.MEASURES)
        if np.isnan(limits).all():
            return
        self._check()
        if not self.sheet.controller.feedback:
            doubt[active != 0] = 1
            return
        left = np.flatnonzero(active)
        rows = self._gains()[left]
        # Neither the weights nor the wind-up time change a margin.
        gains, which = np.unique(rows, axis=0, return_inverse=True)
        unclear, still = np.zeros((len(gains), doubt.shape[1]), dtype=np.uint8), np.ones(len(gains), dtype=np.uint8)
        for chains in self.ground.chains:
            spread_out(partial(_decide, chains, gains, limits, still, self.misses, unclear, _NOTHING), len(gains))
        active[left] = still[which]
        doubt[left] |= unclear[which]

    def _try_damping(self, active: NDArray[np.uint8]) -> None:
        """Lay a limit on the damping, for which every tuning's poles are found."""
        least = dict(self.sheet.limits).get("damping")
        if least is None:
            return
        for at in np.flatnonzero(active).tolist():
            self._check()
            loops = loops_of(replace(self.sheet, controller=self.tunings[at]), self.ground.members)
            found = [damping_of(one) for one in family_poles(loops)]
            active[at] = all(one is not None and one >= least for one in found)

    def _note_doubts(self, found: Classes, active: NDArray[np.uint8], doubt: NDArray[np.uint8]) -> None:
        for at in np.flatnonzero((active != 0) & doubt.any(axis=1)).tolist():
            found[at] = UNKNOWN
            self.doubts[at] = np.flatnonzero(doubt[at]).tolist()


def _decide(  # noqa: PLR0913, PLR0917 - what a kernel takes, less what its chains hold
    chains: Chains,
    gains: Array,
    limits: Array,
    active: NDArray[np.uint8],
    misses: NDArray[np.int64],
    doubt: NDArray[np.uint8],
    watched: tuple[int, Array],
    begin: int,
    end: int,
) -> None:
    """Lay limits on the margins of some tunings with the plants of some chains."""
    members = np.array(chains.members)
    responses.decide(
        chains.w, *chains.at, chains.gain, members, gains, limits, active, misses, doubt, *watched, begin, end
    )  # fmt: skip


def _no_doubt(grading: Grading) -> NDArray[np.uint8]:
    return np.zeros((len(grading.tunings), len(grading.ground.members)), dtype=np.uint8)

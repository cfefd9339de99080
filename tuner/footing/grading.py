"""The class of many tunings of one sheet at once: bounds decide most, the road of the assessment itself the rest."""

from collections.abc import Callable, Mapping, Sequence
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass, replace
from functools import cache, lru_cache
from math import ceil, nan
from os import cpu_count

import numpy as np
from numpy.typing import NDArray

from tuner.assess import results_of
from tuner.footing.chains import Chains, chains_of
from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN, Classes, Overtaken, never
from tuner.judge.verdict import limit_result, verdict, worst_case
from tuner.kernels import grades, lanes, readings, responses
from tuner.measure.final import StaticGains, family_final_values, final_values, has_integral
from tuner.model.controller import Controller
from tuner.model.family import Member, family
from tuner.model.measures import BY_NAME
from tuner.model.sheet import Sheet
from tuner.simulate.batch import RUNAWAY, feedforward_of, law_constants, nominal
from tuner.simulate.grid import Grid, sampled_grid
from tuner.simulate.pace import Pace, paced
from tuner.simulate.traces import Array
from tuner.simulate.wiring import wire

_FIRST = 3
"""Plants that every tuning is tried with before those that are left are put together anew."""

_GRADES: Mapping[str, int] = {"met": FIRM, "missed": SOFT, "unstable": LOST}

Flags = NDArray[np.bool_]


@dataclass(frozen=True, slots=True, eq=False)
class Watched:
    """Bounds of one measure for each tuning and plant, shape (t, p); not a number where it was not looked at."""

    low: Array
    high: Array


@dataclass(frozen=True, slots=True, eq=False)
class Ground:
    """What grading needs of a sheet and that no gain changes.

    Parameters
    ----------
    members : tuple of Member
    grid : Grid
    pace : Pace
    size : tuple of int
        See `lanes.size_for`.
    chains : tuple of Chains
    feedforward : ndarray, shape (2, s)
    """

    members: tuple[Member, ...]
    grid: Grid
    pace: Pace
    size: lanes.Size
    chains: tuple[Chains, ...]
    feedforward: Array


def ground_of(sheet: Sheet, size: int) -> Ground:
    """Return the ground of a sheet; the same for all gains, so it is kept.

    Raises
    ------
    LoopError
        When a plant of the family cannot be computed.
    """
    controller = sheet.controller
    bare = Controller(
        sample_time=controller.sample_time,
        delay_samples=controller.delay_samples,
        action=controller.action,
        measurement_filter=controller.measurement_filter,
        notch=controller.notch,
        feedforward=controller.feedforward,
        disturbance_feedforward=controller.disturbance_feedforward,
        gain_1=1.0,
    )
    return _ground(replace(sheet, controller=bare, limits=()), size)


@lru_cache(maxsize=8)
def _ground(sheet: Sheet, size: int) -> Ground:
    members = family(sheet.plant, size)
    grid = sampled_grid(sheet.trial.duration, sheet.controller.sample_time, nominal(sheet).plant)
    wired = wire(sheet, members, grid.step)
    kernel = lanes.size_for(wired.c.shape[2])
    pace = paced(wired, grid, sheet.controller.delay_samples, len(kernel))
    return Ground(members, grid, pace, kernel, chains_of(sheet, size), feedforward_of(sheet, grid))


@cache
def pool() -> ThreadPoolExecutor:
    """Return the threads that kernels run in."""
    return ThreadPoolExecutor(cpu_count() or 1, thread_name_prefix="footing")


def spread_out(work: Callable[[int, int], object], count: int) -> None:
    """Let all threads share a range, a stretch each."""
    threads = min(cpu_count() or 1, count)
    places = [round(count * k / threads) for k in range(threads + 1)] if threads else []
    for done in [pool().submit(work, begin, end) for begin, end in zip(places, places[1:], strict=False)]:
        done.result()


@dataclass(slots=True, eq=False)
class Grading:
    """Tunings being graded.

    Parameters
    ----------
    sheet : Sheet
        Whose controller each of the tunings takes the place of.
    ground : Ground
    tunings : sequence of Controller
    order : list of int
        Plants, those that are likeliest to miss a limit first.
    stop : callable
        Whether a newer question has come.
    """

    sheet: Sheet
    ground: Ground
    tunings: Sequence[Controller]
    order: Sequence[int]
    stop: Callable[[], bool] = never
    watched: str = ""

    def classes(self, lost: Flags, unsure: Flags, *, settle: bool = True) -> Classes:
        """Return the class of every tuning, shape (t,), given which are lost and of which that is not sure.

        Those that bounds leave in doubt are unknown, unless they are to be settled.
        """
        found = np.where(lost, LOST, FIRM).astype(np.int8)
        active = (~lost & ~unsure).astype(np.uint8)
        doubt = np.zeros((len(self.tunings), len(self.ground.members)), dtype=np.uint8)
        if self.sheet.limits:
            looked_at = active.copy()
            self._try_trials(active, doubt)
            self._try_margins(active, doubt)
            found[(looked_at != 0) & (active == 0)] = SOFT
            self._settle_doubts(found, active, doubt, settle=settle)
        for at in np.flatnonzero(unsure).tolist():
            found[at] = self._exactly(at, range(len(self.ground.members)))
        return found

    def _check(self) -> None:
        if self.stop():
            raise Overtaken("a newer question has come")

    def _try_trials(self, active: NDArray[np.uint8], doubt: NDArray[np.uint8]) -> None:
        limits = self._limits(readings.MEASURES)
        if np.isnan(limits).all():
            return
        if any(not size for size, names in self._runs() if self._has_limit(names)):
            # Measures of a run without a step do not exist: a limit on one is missed, which the assessment says.
            doubt[active != 0] = 1
            return
        first, rest = self.order[:_FIRST], self.order[_FIRST:]
        for members in (first, rest):
            self._check()
            left = np.flatnonzero(active)
            if len(left) and members:
                self._run(left, members, limits, active, doubt)

    def _runs(self) -> tuple[tuple[float, tuple[str, ...]], ...]:
        count = readings.REFERENCE_COUNT
        trial = self.sheet.trial
        return (trial.reference, readings.MEASURES[:count]), (trial.disturbance, readings.MEASURES[count:])

    def _has_limit(self, names: Sequence[str]) -> bool:
        return any(name in names for name, _ in self.sheet.limits)

    def _limits(self, names: Sequence[str]) -> Array:
        known = dict(self.sheet.limits)
        return np.array([known.get(name, nan) for name in names])

    def _run(
        self,
        left: NDArray[np.intp],
        members: Sequence[int],
        limits: Array,
        active: NDArray[np.uint8],
        doubt: NDArray[np.uint8],
    ) -> None:
        """Run the tunings that are left with some plants."""
        count = ceil(len(left) / lanes.LANES)
        filled = np.resize(left, count * lanes.LANES)
        tunings = [self.tunings[i] for i in filled.tolist()]
        constants = self._constants(tunings)
        blocks = grades.Blocks(
            np.ascontiguousarray(constants.reshape(count, lanes.LANES, -1).swapaxes(1, 2)).reshape(count, -1),
            self._finals(tunings).reshape(2, len(self.ground.members), count, lanes.LANES),
            np.ones((count, lanes.LANES), dtype=np.uint8),
            np.zeros((count, len(self.ground.members), lanes.LANES), dtype=np.uint8),
            np.zeros((2, 0, 0, 0)),
        )
        course = self._course(members, limits)
        filters = (0,) if self.sheet.controller.measurement_filter or self.sheet.controller.notch else ()
        spread_out(lambda begin, end: grades.grade(self.ground.size, filters, course, blocks, begin, end), count)
        active[left] = blocks.active.reshape(-1)[: len(left)]
        doubt[left] |= blocks.doubt.swapaxes(1, 2).reshape(-1, len(self.ground.members))[: len(left)]

    def _constants(self, tunings: Sequence[Controller]) -> Array:
        sheet = self.sheet
        return np.array(
            [
                law_constants(replace(sheet, controller=one), one.sample_time, one.measurement_filter)
                for one in tunings
            ]
        )

    def _course(self, members: Sequence[int], limits: Array) -> grades.Course:
        sheet, ground = self.sheet, self.ground
        times = ground.grid.times()
        tail = int(np.searchsorted(times, times[-1] - 0.1 * (times[-1] - times[0])))
        rest = sheet.loop.controlled.resting
        size = max(abs(sheet.trial.reference), abs(sheet.trial.disturbance), 1e-300)
        common = (rest, float(sheet.sensor.resolution), RUNAWAY * size)
        wanted = np.array([(sheet.trial.reference, 0.0, *common), (0.0, sheet.trial.disturbance, *common)])
        return grades.Course(
            ground.pace.rows,
            ground.pace.push,
            ground.pace.timing,
            np.array(members, dtype=np.int64),
            wanted,
            ground.feedforward,
            ground.grid.step,
            sheet.trial.settling_band / 100.0,
            tail,
            limits,
            -1,
        )

    def _finals(self, tunings: Sequence[Controller]) -> Array:
        """Return the exact final values, shape (2, p, t); not a number under a resolution, which leaves none."""
        members = self.ground.members
        out = np.full((2, len(members), len(tunings)), nan)
        if self.sheet.sensor.resolution:
            return out
        known: dict[tuple[bool, float, float], tuple[Array, Array]] = {}
        for at, one in enumerate(tunings):
            gains = one.parallel()
            key = (True, 0.0, 0.0) if has_integral(one) else (False, gains.kp, one.b)
            if key not in known:
                ends = family_final_values(replace(self.sheet, controller=one), members)
                known[key] = (np.array([end.reference for end in ends]), np.array([end.disturbance for end in ends]))
            out[0, :, at], out[1, :, at] = known[key]
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
        gains = np.array([self._law(self.tunings[i]) for i in left.tolist()]).reshape(-1, 4)
        unclear, still = np.zeros((len(left), doubt.shape[1]), dtype=np.uint8), np.ones(len(left), dtype=np.uint8)
        for chains in self.ground.chains:
            members = np.array(chains.members)
            spread_out(
                lambda begin, end, chains=chains, members=members: responses.decide(
                    chains.w, *chains.at, chains.inverse, members, gains, limits, still, unclear, -1,
                    np.zeros((2, 0, 0)), begin, end,
                ),  # fmt: skip
                len(left),
            )
        active[left] = still
        doubt[left] |= unclear

    @staticmethod
    def _law(controller: Controller) -> tuple[float, float, float, float]:
        gains = controller.parallel()
        return gains.kp, gains.ki, gains.kd, controller.filter_time

    def _settle_doubts(
        self, found: Classes, active: NDArray[np.uint8], doubt: NDArray[np.uint8], *, settle: bool
    ) -> None:
        if self._has_limit(("damping",)):
            doubt[active != 0] = 1
        for at in np.flatnonzero((active != 0) & doubt.any(axis=1)).tolist():
            self._check()
            found[at] = UNKNOWN if not settle else self._exactly(at, np.flatnonzero(doubt[at]).tolist())

    def _exactly(self, at: int, members: Sequence[int]) -> int:
        """Return the class of one tuning with some plants, as the assessment has it."""
        sheet = replace(self.sheet, controller=self.tunings[at])
        results = results_of(sheet, [self.ground.members[i] for i in members])
        limits = [limit_result(name, limit, worst_case(BY_NAME[name], results)) for name, limit in sheet.limits]
        return _GRADES[verdict(results, limits)]

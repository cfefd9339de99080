"""The loop as poles and frequency response see it: what the controller acts on, the controller, and their loop gain."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import NamedTuple

import numpy as np

from tuner.model.controller import Controller
from tuner.model.family import ACTUATOR_LAG, SENSOR_LAG, Member
from tuner.model.plant import Plant
from tuner.model.sheet import Sheet
from tuner.simulate.discrete import Held, chain, held_batch, split
from tuner.simulate.factors import Factors
from tuner.simulate.linear import Linear
from tuner.simulate.pulse import pulse_factors
from tuner.simulate.realise import realise
from tuner.simulate.transfer import controller_factors, plant_factors

_Values = tuple[tuple[tuple[str, float], ...], ...]


@dataclass(frozen=True, slots=True, eq=False)
class ContinuousLoop:
    """A loop with a continuous controller.

    Parameters
    ----------
    controller : Controller
    chain : Linear
        From the effort to the measurement: actuator, plant, sensor.
    factors : Factors
        The loop gain, in s; the action's sign is in it, so a negative plant under direct action gives a positive one.
    """

    controller: Controller
    chain: Linear
    factors: Factors

    @property
    def sample_time(self) -> float:
        """0: there are no samples."""
        return 0.0


@dataclass(frozen=True, slots=True, eq=False)
class SampledLoop:
    """A loop with a sampled controller, seen at the sample instants.

    Parameters
    ----------
    controller : Controller
    chain : Linear
        From the held effort to the measurement: actuator, plant, sensor.
    held : Held
        The chain's exact equivalent under the hold, computing delay included.
    factors : Factors
        The loop gain in z - 1: the law's pulse transfer function times the chain's, nothing cancelled.
    """

    controller: Controller
    chain: Linear
    held: Held
    factors: Factors

    @property
    def sample_time(self) -> float:
        """Time between samples."""
        return self.held.step


Loop = ContinuousLoop | SampledLoop


def loop_of(sheet: Sheet, member: Member) -> Loop:
    """Return the loop of a sheet with one plant of its family.

    Raises
    ------
    LoopError
        When the plant cannot be realised; see `realise`.
    """
    return loops_of(sheet, (member,))[0]


def loops_of(sheet: Sheet, members: Sequence[Member]) -> tuple[Loop, ...]:
    """Return the loops of a sheet with some plants of its family; together they take less time than one by one."""
    values = tuple(tuple(member.values.items()) for member in members)
    return loops_around(sheet.controller, _chains(sheet.plant, values, sheet.actuator.lag, sheet.sensor.lag))


@lru_cache(maxsize=16)
def _chains(plant: Plant, values: _Values, actuator_lag: float, sensor_lag: float) -> tuple[Linear, ...]:
    """Return the chains of some plants; the same for all gains, so they are kept."""
    return tuple(_chain(plant, dict(items), actuator_lag, sensor_lag) for items in values)


def _chain(plant: Plant, values: dict[str, float], actuator_lag: float, sensor_lag: float) -> Linear:
    """Return the chain of one plant, with its own lags where they drift."""
    lags = values.get(ACTUATOR_LAG, actuator_lag), values.get(SENSOR_LAG, sensor_lag)
    return chain(realise(plant, values), *lags)


def loops_around(controller: Controller, chains: Sequence[Linear]) -> tuple[Loop, ...]:
    """Return the loops that a controller makes with chains from effort to measurement."""
    law = controller_factors(controller)
    if not controller.sample_time:
        return tuple(ContinuousLoop(controller, one, plant_factors(one).then(law)) for one in chains)
    loops: list[Loop] = [None] * len(chains)  # type: ignore[list-item] # every place is filled below
    for order in sorted({one.order for one in chains}):
        places = [i for i, one in enumerate(chains) if one.order == order]
        for place, loop in zip(places, _sampled(controller, law, [chains[i] for i in places]), strict=True):
            loops[place] = loop
    return tuple(loops)


def _sampled(controller: Controller, law: Factors, chains: Sequence[Linear]) -> list[SampledLoop]:
    """Return the sampled loops around chains of one order."""
    step, extra = controller.sample_time, controller.delay_samples
    return [
        SampledLoop(
            controller,
            one,
            Held(seen.held.growth, seen.held.old, seen.held.new, one.c, one.d, seen.held.steps + extra, step),
            seen.pulse.then(law),
        )
        for one, seen in zip(chains, _seen_at_samples(tuple(chains), step), strict=True)
    ]


class _Seen(NamedTuple):
    """A chain as its samples see it."""

    held: Held
    pulse: Factors


@lru_cache(maxsize=64)
def _seen_at_samples(chains: tuple[Linear, ...], step: float) -> tuple[_Seen, ...]:
    """Return chains of one order under the hold; the same for all gains, so they are kept."""
    delays = [split(one.dead_time, step) for one in chains]
    offsets = np.array([[delay.offset] for delay in delays])
    held = held_batch(
        np.array([one.a for one in chains]), np.array([one.b for one in chains])[..., None], step, offsets
    )
    pulses = pulse_factors(chains, held, [delay.steps for delay in delays], step)
    return tuple(
        _Seen(
            Held(held.growth[i], held.old[i, :, 0], held.new[i, :, 0], one.c, one.d, delays[i].steps, step), pulses[i]
        )
        for i, one in enumerate(chains)
    )


def same_shape(loops: Sequence[Loop]) -> list[list[int]]:
    """Return the places of loops whose gains have equally many zeros and poles, and can be evaluated as one."""
    groups: dict[tuple[int, int, int, bool, float], list[int]] = {}
    for i, loop in enumerate(loops):
        factors = loop.factors
        shape = (len(factors.zeros), len(factors.poles), loop.chain.order, factors.gain == 0.0, factors.step)
        groups.setdefault(shape, []).append(i)
    return list(groups.values())

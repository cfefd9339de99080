"""The way from effort and disturbance to output and measurement, for a whole family, ready for the loop kernel."""

from collections.abc import Mapping, Sequence
from functools import lru_cache
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from tuner.model.family import ACTUATOR_LAG, SENSOR_LAG, Member
from tuner.model.plant import Plant
from tuner.model.sheet import Sheet
from tuner.simulate.discrete import HeldBatch, held_batch, split
from tuner.simulate.linear import Linear, constant
from tuner.simulate.realise import realise, realise_expression
from tuner.simulate.traces import Array

_Values = tuple[tuple[tuple[str, float], ...], ...]


class Process(NamedTuple):
    """One member: its plant, and the path of a measured disturbance where there is one."""

    plant: Linear
    disturbance_path: Linear | None


class Wired(NamedTuple):
    """A family as state spaces, discretised over one step: p members, n states, inputs effort and disturbance.

    Parameters
    ----------
    held : HeldBatch
        Equivalents over a step, shapes (p, n, n) and (p, n, 2).
    c, direct : ndarray, shapes (p, 2, n), (p, 2, 2)
        Rows: output, sensor. Columns of `direct`: effort, disturbance.
    delay : ndarray of int, shape (p, 2)
        Whole steps of dead time of either input, without computing delay.
    """

    held: HeldBatch
    c: Array
    direct: Array
    delay: NDArray[np.int64]


class _Blocks(NamedTuple):
    """A state space with inputs effort and disturbance, outputs y and sensor, and the dead time of each input."""

    a: Array
    b: Array
    c: Array
    direct: Array
    dead_times: tuple[float, float]


def processes(sheet: Sheet, members: Sequence[Member]) -> tuple[Process, ...]:
    """Return plant and disturbance path of every member.

    Raises
    ------
    LoopError
        When a member cannot be computed, with the reason.
    """
    return _processes(sheet.plant, _expression(sheet), _values(members))


def wire(sheet: Sheet, members: Sequence[Member], step: float) -> Wired:
    """Return the family discretised over `step`; the same for all gains, so it is kept.

    Raises
    ------
    LoopError
        When a member cannot be computed, with the reason.
    """
    return _wired(sheet.plant, _expression(sheet), _values(members), (sheet.actuator.lag, sheet.sensor.lag), step)


def _expression(sheet: Sheet) -> str:
    path = sheet.controller.disturbance_feedforward
    return path.expression if path else ""


def _values(members: Sequence[Member]) -> _Values:
    return tuple(tuple(member.values.items()) for member in members)


@lru_cache(maxsize=16)
def _processes(plant: Plant, expression: str, values: _Values) -> tuple[Process, ...]:
    return tuple(Process(realise(plant, dict(items)), _path(expression, dict(items))) for items in values)


def _path(expression: str, values: Mapping[str, float]) -> Linear | None:
    return realise_expression(expression, values, "the path of the disturbance") if expression else None


@lru_cache(maxsize=64)
def _wired(plant: Plant, expression: str, values: _Values, lags: tuple[float, float], step: float) -> Wired:
    found = zip(_processes(plant, expression, values), map(dict, values), strict=True)
    blocks = [
        _assembled(process, own.get(ACTUATOR_LAG, lags[0]), own.get(SENSOR_LAG, lags[1])) for process, own in found
    ]
    order = max(len(block.a) for block in blocks)
    count = len(blocks)
    a, b = np.zeros((count, order, order)), np.zeros((count, order, 2))
    c, direct = np.zeros((count, 2, order)), np.zeros((count, 2, 2))
    offset, delay = np.zeros((count, 2)), np.zeros((count, 2), dtype=np.int64)
    for i, block in enumerate(blocks):
        own = len(block.a)
        a[i, :own, :own], b[i, :own], c[i, :, :own], direct[i] = block.a, block.b, block.c, block.direct
        for j, dead_time in enumerate(block.dead_times):
            delay[i, j], offset[i, j] = split(dead_time, step)
    return Wired(held_batch(a, b, step, offset), c, direct, delay)


def _assembled(process: Process, actuator_lag: float, sensor_lag: float) -> _Blocks:
    """Put actuator, plant, disturbance path and sensor together, in this order of states."""
    plant, path = process
    side = path or constant(0.0)
    first = 1 if actuator_lag else 0
    middle, last = first + plant.order, first + plant.order + side.order
    order = last + (1 if sensor_lag else 0)
    a, b, c, direct = np.zeros((order, order)), np.zeros((order, 2)), np.zeros((2, order)), np.zeros((2, 2))
    entry, enters = np.zeros(order), np.array([0.0 if actuator_lag else 1.0, 0.0 if path else 1.0])
    if actuator_lag:
        a[0, 0], b[0, 0], entry[0] = -1.0 / actuator_lag, 1.0 / actuator_lag, 1.0
    a[first:middle] += np.outer(plant.b, entry)
    a[first:middle, first:middle] += plant.a
    b[first:middle] = np.outer(plant.b, enters)
    a[middle:last, middle:last], b[middle:last, 1] = side.a, side.b
    c[0], c[0, first:middle], c[0, middle:last] = plant.d * entry, plant.c, side.c
    direct[0] = plant.d * enters + (0.0, side.d)
    c[1], direct[1] = c[0], direct[0]
    if sensor_lag:
        a[last], b[last] = c[0] / sensor_lag, direct[0] / sensor_lag
        a[last, last] = -1.0 / sensor_lag
        c[1], direct[1] = np.eye(order)[last], 0.0
    return _Blocks(a, b, c, direct, (plant.dead_time, path.dead_time if path else plant.dead_time))

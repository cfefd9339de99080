"""Block-diagram algebra on linear systems: in series, in parallel, and in feedback."""

from functools import reduce

import numpy as np

from tuner.errors import LoopError
from tuner.simulate.linear import Linear, constant, from_state_space
from tuner.simulate.traces import Array


def series(*systems: Linear) -> Linear:
    """Return systems one after the other, the first at the input; dead times add up, nothing cancels."""
    return reduce(_after, systems) if systems else constant(1.0)


def parallel(*systems: Linear) -> Linear:
    """Return the sum of systems.

    Raises
    ------
    LoopError
        When their dead times differ.
    """
    return reduce(_beside, systems) if systems else constant(0.0)


def feedback(forward: Linear, back: Linear) -> Linear:
    """Return forward / (1 + forward back), with every mode of both.

    Raises
    ------
    LoopError
        With dead time in the loop, or when 1 + forward back vanishes at infinite frequency.
    """
    if forward.dead_time or back.dead_time:
        raise LoopError("a feedback with dead time inside has no finite state space")
    direct = 1.0 + forward.d * back.d
    if direct == 0.0:
        raise LoopError("the loop cannot be closed: its direct terms cancel, so the effort has no unique value")
    # The inner input is e = (u - back.c xb - back.d forward.c xf) / direct.
    into = np.concatenate((-back.d * forward.c, -back.c)) / direct
    out = np.concatenate((forward.c, np.zeros(back.order))) + forward.d * into
    a = _side_by_side(forward.a, back.a)
    gain_in = np.concatenate((forward.b, back.b * forward.d))
    a = a + np.outer(gain_in, into)
    a[forward.order :, : forward.order] += np.outer(back.b, forward.c)
    return from_state_space(a, gain_in / direct, out, forward.d / direct)


def _after(first: Linear, second: Linear) -> Linear:
    a = _side_by_side(first.a, second.a)
    a[first.order :, : first.order] = np.outer(second.b, first.c)
    return Linear(
        zeros=np.concatenate((first.zeros, second.zeros)),
        poles=np.concatenate((first.poles, second.poles)),
        gain=first.gain * second.gain,
        a=a,
        b=np.concatenate((first.b, second.b * first.d)),
        c=np.concatenate((second.d * first.c, second.c)),
        d=first.d * second.d,
        dead_time=first.dead_time + second.dead_time,
    )


def _side_by_side(one: Array, other: Array) -> Array:
    """Return the block diagonal matrix of two square ones, either of which may be empty."""
    a = np.zeros((len(one) + len(other),) * 2)
    a[: len(one), : len(one)], a[len(one) :, len(one) :] = one, other
    return a


def _beside(first: Linear, second: Linear) -> Linear:
    if first.dead_time != second.dead_time:
        raise LoopError(
            f"only systems with the same dead time can be added, found {first.dead_time:g} and {second.dead_time:g}"
        )
    return from_state_space(
        _side_by_side(first.a, second.a),
        np.concatenate((first.b, second.b)),
        np.concatenate((first.c, second.c)),
        first.d + second.d,
        first.dead_time,
    )

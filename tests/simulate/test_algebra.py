"""Block-diagram algebra against the same algebra on frequency responses, and against python-control."""

import control
import numpy as np
import pytest

from tuner.errors import LoopError
from tuner.simulate.algebra import feedback, parallel, series
from tuner.simulate.linear import Linear, constant, from_zeros_poles
from tuner.simulate.traces import ComplexArray

S: ComplexArray = np.asarray(0.2 + 1j * np.logspace(-2, 2, 9), dtype=complex)
FIRST = from_zeros_poles((-3.0,), (-1.0, -0.2 + 2j, -0.2 - 2j), 2.0)
SECOND = from_zeros_poles((1.0,), (-4.0,), -0.5)


def _by_state_space(system: Linear) -> np.ndarray:
    unit = np.eye(system.order)
    return np.array([system.c @ np.linalg.solve(x * unit - system.a, system.b) + system.d for x in S])


def test_series_multiplies_and_keeps_every_factor() -> None:
    """Responses multiply, dead times add, and a zero does not cancel the pole of another block."""
    late = from_zeros_poles((-1.0,), (-2.0, -5.0), 1.0, 0.4)
    whole = series(FIRST, constant(3.0), late)
    assert whole.response(S) == pytest.approx(3.0 * FIRST.response(S) * late.response(S), rel=1e-12)
    assert _by_state_space(whole) * np.exp(-0.4 * S) == pytest.approx(whole.response(S), rel=1e-11)
    assert (whole.dead_time, whole.order) == (0.4, 5)


def test_parallel_adds() -> None:
    """Responses add."""
    assert parallel(FIRST, SECOND).response(S) == pytest.approx(FIRST.response(S) + SECOND.response(S), rel=1e-9)
    assert parallel(FIRST, constant(2.0)).response(S) == pytest.approx(FIRST.response(S) + 2.0, rel=1e-9)


@pytest.mark.parametrize("back", [SECOND, constant(0.7)])
def test_feedback_closes_the_loop(back: Linear) -> None:
    """The closed loop is forward / (1 + forward back), with the poles that python-control finds."""
    closed = feedback(FIRST, back)
    assert closed.response(S) == pytest.approx(
        FIRST.response(S) / (1.0 + FIRST.response(S) * back.response(S)), rel=1e-8
    )
    theirs = control.feedback(
        control.ss(FIRST.a, FIRST.b[:, None], FIRST.c[None], FIRST.d),
        control.ss(back.a, back.b[:, None], back.c[None], back.d) if back.order else back.d,
    )
    assert np.sort_complex(closed.poles) == pytest.approx(np.sort_complex(theirs.poles()), rel=1e-9)


def test_nothing_in_series_or_parallel() -> None:
    """No block in series is unity, none in parallel is zero."""
    assert series().static_gain() == 1.0
    assert parallel().static_gain() == 0.0


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (
            lambda: parallel(FIRST, from_zeros_poles((), (-1.0,), 1.0, 2.0)),
            "only systems with the same dead time can be added, found 0 and 2",
        ),
        (
            lambda: feedback(from_zeros_poles((), (-1.0,), 1.0, 2.0), FIRST),
            "a feedback with dead time inside has no finite state space",
        ),
        (
            lambda: feedback(constant(2.0), constant(-0.5)),
            "the loop cannot be closed: its direct terms cancel, so the effort has no unique value",
        ),
    ],
)
def test_sentences(call: object, sentence: str) -> None:
    """What cannot be is refused in one sentence."""
    with pytest.raises(LoopError) as caught:
        call()  # type: ignore[operator]  # a call without arguments
    assert str(caught.value) == sentence

"""The runs of a family, stacked by their grids, and where each of them ends."""

from collections.abc import Sequence

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tuner.measure.curve import Array
from tuner.measure.runs import FAR_AWAY, Runs, stacked
from tuner.simulate.traces import Trace

NONE = float("nan")


def run(  # noqa: PLR0913 - the parts of a trace
    y: Array | None = None,
    step: float = 1.0,
    *,
    duration: float = 10.0,
    count: int = 101,
    block: int = 1,
    linear: bool = True,
    at_limit: int = 0,
) -> Trace:
    """Return a run of some output, 0 unless said, with an effort of twice that and so many samples at a limit."""
    t = np.linspace(0.0, duration, count)
    output = np.zeros(count) if y is None else y
    samples = np.arange(0, count, block)
    limited = np.arange(len(samples)) < at_limit
    return Trace(t, np.full(count, step), output, 2.0 * output, samples, limited, linear)


def stack(
    traces: Sequence[Trace],
    exact: Sequence[float] | None = None,
    stable: Sequence[bool] | None = None,
    size: float = 1.0,
) -> list[Runs]:
    """Return the runs stacked; all are stable and none has an exact final value unless said."""
    return list(
        stacked(traces, exact or [NONE] * len(traces), stable or [True] * len(traces), size, [False] * len(traces))
    )


def only(trace: Trace, exact: float = NONE, size: float = 1.0) -> Runs:
    """Return the one run of one trace."""
    (found,) = stack([trace], [exact], size=size)
    return found


def test_runs_on_one_grid_are_stacked_in_order() -> None:
    """One row a plant, as they came, each with its own output and effort."""
    (found,) = stack([run(np.full(101, level)) for level in (1.0, 2.0, 3.0)])
    assert found.members.tolist() == [0, 1, 2]
    assert found.y[:, 50].tolist() == [1.0, 2.0, 3.0]
    assert found.u[:, 50].tolist() == [2.0, 4.0, 6.0]
    assert found.t.shape == (101,)


def test_runs_on_other_grids_are_apart() -> None:
    """Another number of points or another length makes another stack; every plant is in exactly one."""
    found = stack([run(), run(duration=20.0), run(count=201), run()])
    assert [runs.members.tolist() for runs in found] == [[0, 3], [1], [2]]


def test_unstable_plants_are_left_out() -> None:
    """Members are numbered by their place in the family, without the unstable ones; none at all is no stack."""
    wild = run(np.full(101, np.inf))
    (found,) = stack([wild, run(), wild, run()], stable=[False, True, False, True])
    assert found.members.tolist() == [1, 3]
    assert np.isfinite(found.y).all()
    assert stack([wild], stable=[False]) == []


@pytest.mark.parametrize("block", [1, 4, 25])
def test_the_steps_between_samples_are_counted(block: int) -> None:
    """A block is as many steps as lie between two samples; a run of one sample has blocks of one."""
    assert only(run(block=block)).block == block
    assert only(run(block=500)).block == 1


def test_saturation_is_a_share_of_the_samples() -> None:
    """Samples at a limit over all samples, not over all points."""
    assert only(run(block=10, at_limit=3)).saturated.tolist() == pytest.approx([3 / 11])


@given(st.floats(-100.0, 100.0), st.floats(-100.0, 100.0))
def test_the_end_of_a_linear_run_is_exact(exact: float, seen: float) -> None:
    """A linear run ends at its exact value whatever is seen; without one, and when not linear, at what is seen."""
    output = np.full(101, seen)
    assert only(run(output), exact).final.tolist() == [exact]
    assert only(run(output)).final.tolist() == pytest.approx([seen])
    assert only(run(output, linear=False), exact, size=1e3).final.tolist() == pytest.approx([seen])


def test_what_is_seen_is_the_mean_of_the_last_tenth() -> None:
    """Of a ramp over 10 time units the last tenth is from 9 to 10, both ends included."""
    assert only(run(np.linspace(0.0, 10.0, 101))).final.tolist() == pytest.approx([9.5])


def test_a_run_far_out_of_bounds_has_run_away() -> None:
    """Beyond so many times its size, or not finite, an output is astray and reads 0; its neighbours are kept."""
    far = np.full(101, 2.0 * FAR_AWAY)
    (found,) = stack([run(np.ones(101), linear=False), run(far, linear=False), run(np.full(101, np.nan), linear=False)])
    assert found.astray.tolist() == [False, True, True]
    assert not found.y[1:].any()
    assert found.final.tolist() == pytest.approx([1.0, 0.0, 0.0])
    assert not only(run(far, linear=False), size=10.0).astray.any()


def test_a_linear_run_never_runs_away() -> None:
    """Only a limit lets the output of a stable loop leave; a linear run is read as it is."""
    assert not only(run(np.exp(np.linspace(0.0, 30.0, 101)))).astray.any()


@pytest.mark.parametrize(
    ("output", "astray"),
    [
        (lambda t: -np.exp(0.5 * t), True),
        (lambda t: 1.0 + np.exp(0.5 * t), True),
        (lambda t: 0.5 * (1.0 - np.exp(-t)), False),
        (lambda t: -0.5 * (1.0 - np.exp(-t)), False),
        (lambda t: 1.0 + np.exp(-0.5 * t) * np.cos(3.0 * t), False),
        (lambda t: 1.0 - 8.0 * np.exp(-((t - 3.0) ** 2)) - 0.03 * t * t, False),
    ],
    ids=["down", "up", "held short", "held below rest", "ringing", "back from farther away"],
)
def test_a_run_that_leaves_its_reference_ever_faster_has_run_away(output: object, astray: bool) -> None:
    """Far out is no criterion alone: one that ends farther away than ever and left in its second half is astray."""
    t = np.linspace(0.0, 10.0, 101)
    assert callable(output)
    assert only(run(output(t), linear=False)).astray.tolist() == [astray]


def test_an_output_that_limits_bound_does_not_run_away() -> None:
    """The slow start of a lag looks like leaving; of an output that no limited effort can carry off it is none."""
    slow = run(-(np.linspace(0.0, 2.0, 101) ** 3), linear=False)
    assert only(slow).astray.tolist() == [True]
    (found,) = stacked([slow], [NONE], [True], 1.0, [True])
    assert found.astray.tolist() == [False]
    assert found.y[0, -1] == -8.0


@given(st.floats(0.1, 3.0), st.floats(-1e3, 1e3).filter(lambda step: abs(step) > 1e-3))
def test_running_away_does_not_depend_on_units(rate: float, step: float) -> None:
    """A run scaled by any factor, negative ones too, is astray exactly when it was."""
    t = np.linspace(0.0, 10.0, 101)
    shapes = [1.0 - np.exp(-rate * t), -np.exp(rate * t), 2.0 * rate * t, 1.0 - t * np.exp(-rate * t)]
    (one,) = stack([run(shape, linear=False) for shape in shapes])
    (scaled,) = stack([run(step * shape, step, linear=False) for shape in shapes], size=abs(step))
    assert scaled.astray.tolist() == one.astray.tolist()

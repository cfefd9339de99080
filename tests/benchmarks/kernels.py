"""All rulers of a window at once: many tunings, each around a whole family of plants, through the loop kernel.

The yardsticks are the same kernel in C, built by the compiler of this machine, and one linear loop in python-control.
"""

import ctypes
import os
import shutil
import subprocess
import tempfile
from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass, replace
from pathlib import Path

import control
import numpy as np
from numpy.typing import NDArray

from tests.benchmarks.row import Row, Times, timed
from tests.published.sampled_by_control import closed_loop
from tuner.files.sheet import read
from tuner.kernels import loop as kernel
from tuner.model.family import family
from tuner.model.plant import ZeroPolePlant
from tuner.model.sheet import Sheet
from tuner.places import sample_plants
from tuner.simulate.batch import law_constants
from tuner.simulate.wiring import Wired, wire

Array = NDArray[np.float64]

RULERS = ("kp", "ki", "kd", "filter_time", "b")
NOTCHES, PLANTS, SAMPLES = 64, 25, 1000
THREADS = 2
CHUNK = 100
"""Loops whose curves are kept at a time: few enough for the cache."""

COMPILE = ("-O3", "-march=native", "-ffast-math", "-fopenmp", "-shared", "-fPIC")
_NO_NOISE = np.zeros((0, 0))


@dataclass(frozen=True, slots=True, eq=False)
class Work:
    """What a frame of rulers computes: every tuning with every plant, in this order of plants."""

    sheet: Sheet
    constants: Array
    wired: Wired

    @property
    def loops(self) -> int:
        """Number of loops."""
        return len(self.constants) * PLANTS


def rows() -> list[Row]:
    """Measure the kernel, its twin in C, and python-control."""
    work = _work()
    with ThreadPoolExecutor(THREADS) as pool:
        frame = timed(lambda: _frame(work, pool), 15)
    twin, said = _twin_times(work)
    one = timed(_linear_loop(work.sheet), 15)
    each, c_frame = frame.median / work.loops, twin.median if twin else None
    ratio = frame.median / c_frame if c_frame else None
    what = f"{work.loops} saturating loops of {SAMPLES} samples, {work.wired.held.growth.shape[1]} states, 2 threads"
    in_c = "the same in C, vectorised"
    return [
        Row("rulers_frame_ms", what, "ms", "<= 16.7", frame.median, frame.p99, c_frame, ratio, in_c, said),
        Row(
            "loop_vs_python_control",
            "one of those loops",
            "ms a loop; the ratio is how many times faster",
            ">= 2000",
            each,
            frame.p99 / work.loops,
            one.median,
            one.median / each,
            "control.step_response of the linear loop, as many samples",
        ),
        Row(
            "kernel_vs_c",
            "the same kernel, time for a sample of a loop",
            "ns",
            "ratio <= 1.25",
            1e6 * each / SAMPLES,
            1e6 * frame.p99 / work.loops / SAMPLES,
            1e6 * c_frame / work.loops / SAMPLES if c_frame else None,
            ratio,
            in_c,
            said,
        ),
    ]


def _work() -> Work:
    """Return five rulers around the tuning of a sample, each from a tenth to ten times its value."""
    sheet = read(sample_plants() / "heater.toml")
    tunings = []
    for name in RULERS:
        value = sheet.controller.value(name) or 0.0
        for factor in np.geomspace(0.1, 10.0, NOTCHES):
            moved = replace(sheet, controller=sheet.controller.with_value(name, value * float(factor)))
            tunings.append(law_constants(moved, sheet.controller.sample_time, 0.0))
    wired = wire(sheet, family(sheet.plant, PLANTS), sheet.controller.sample_time)
    return Work(sheet, np.array(tunings), wired)


def _frame(work: Work, pool: ThreadPoolExecutor) -> None:
    """Run every loop, each half by a thread of its own, which the kernel lets run."""
    halves = np.array_split(np.arange(work.loops), THREADS)
    list(pool.map(lambda half: _run(work, half, lambda *_: None), halves))


def _run(work: Work, loops: NDArray[np.intp], look: Callable[[NDArray[np.intp], Array], object]) -> None:
    """Run some of the loops, and show their outputs chunk by chunk to whoever looks."""
    y, u, limited = (np.empty((CHUNK, SAMPLES)) for _ in range(3))
    tunings, sheet = len(work.constants), work.sheet
    reference = np.full(CHUNK, sheet.trial.reference)
    feedforward = np.zeros((CHUNK, SAMPLES))
    ceiling = np.full((CHUNK, 2), 1e12)
    for first in range(0, len(loops), CHUNK):
        some = loops[first : first + CHUNK]
        count = len(some)
        kernel.run(
            work.constants[some % tunings],
            some // tunings,
            *work.wired.held,
            work.wired.c,
            work.wired.direct,
            work.wired.delay,
            1,
            reference[:count],
            np.zeros(count),
            feedforward[:count],
            _NO_NOISE,
            0.0,
            ceiling[:count],
            y[:count],
            u[:count],
            limited[:count],
        )
        look(some, y[:count])


def _linear_loop(sheet: Sheet) -> Callable[[], object]:
    """Return what python-control does for one linear loop: its step response at as many samples."""
    values = {parameter.name: parameter.value for parameter in sheet.plant.parameters}
    poles = (-1.0 / values["lag"], -1.0 / values["tail"])
    plant = ZeroPolePlant((), tuple(map(complex, poles)), values["gain"] * poles[0] * poles[1], values["delay"])
    closed = closed_loop(replace(sheet, plant=plant))
    response = control.ss(closed.A, closed.B[:, :1], closed.C[:1], closed.D[:1, :1], closed.dt)
    times = np.arange(SAMPLES) * sheet.controller.sample_time
    return lambda: control.step_response(response, times)


def _twin_times(work: Work) -> tuple[Times | None, str]:
    """Return how long the twin in C takes, or why there is none."""
    compiler = next((found for name in ("cc", "gcc", "clang") if (found := shutil.which(name))), None)
    if compiler is None:
        return None, "No yardstick: there is no C compiler on this machine."
    with tempfile.TemporaryDirectory() as folder:
        library = Path(folder) / "loops.so"
        order = work.wired.held.growth.shape[1]
        source = Path(__file__).with_name("loops.c")
        command = [compiler, *COMPILE, f"-DORDER={order}", str(source), "-o", str(library)]
        built = subprocess.run(command, capture_output=True, text=True, check=False)
        if built.returncode or os.name != "posix":
            return None, f"No yardstick: {compiler} could not build the twin in C."
        peak, area = np.empty(work.loops), np.empty(work.loops)
        call = _twin(ctypes.CDLL(str(library)), work, peak, area)
        times = timed(call, 25)
    off = _disagreement(work, peak, area)
    return times, f"Both compute the same: they differ by {off:.1e} of the step at most."


def _twin(library: ctypes.CDLL, work: Work, peak: Array, area: Array) -> Callable[[], object]:
    """Return the call of the twin, which writes the highest output and the summed error of every loop."""
    wired, trial = work.wired, work.sheet.trial
    arrays = (work.constants, *wired.held, wired.c, wired.direct, wired.delay)
    numbers = [ctypes.c_int64(number) for number in (PLANTS, len(work.constants), SAMPLES)]
    steps = (ctypes.c_double(trial.reference), ctypes.c_double(0.0), ctypes.c_int64(THREADS))
    inputs = [_address(np.ascontiguousarray(one)) for one in arrays]
    outputs = [_address(peak), _address(area)]
    return lambda: library.run(*numbers, *inputs, *steps, *outputs)


def _address(array: NDArray[np.number]) -> ctypes.c_void_p:
    """Return where an array lies; it lives as long as this does."""
    return array.ctypes.data_as(ctypes.c_void_p)


def _disagreement(work: Work, peak: Array, area: Array) -> float:
    """Return the largest difference between the kernel and its twin, as a share of the step."""
    reference, worst = work.sheet.trial.reference, 0.0

    def look(loops: NDArray[np.intp], y: Array) -> None:
        nonlocal worst
        high, missing = np.abs(y).max(axis=1), np.abs(reference - y).sum(axis=1) / SAMPLES
        worst = max(worst, np.abs(high - peak[loops]).max(), np.abs(missing - area[loops] / SAMPLES).max())

    _run(work, np.arange(work.loops), look)
    return float(worst / reference)
